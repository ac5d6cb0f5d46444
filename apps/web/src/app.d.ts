/// <reference types="astro/client" />

declare namespace App {
  interface Locals {
    /** Set on every page and endpoint that is not open to all. */
    person: import('./lib/locals.ts').SignedIn | null;
    /** Set on every page and endpoint under a company's slug. */
    company: import('./lib/locals.ts').Company | null;
    /** Names the request in the log and in answers that have gone wrong. */
    requestId: string;
  }
}
