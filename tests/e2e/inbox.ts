import { request } from '@playwright/test';
import { fromStack } from './fixtures.ts';

export interface Text {
  to: string;
  body: string;
  createdAt: string;
}
export interface Mail {
  to: string[];
  subject: string;
  text: string;
  html: string | null;
  receivedAt: string;
}

/** Texts sent to a number, oldest first; null: to any. */
export function textsTo(number: string | null): Promise<Text[]> {
  return read(`/_inbox/messages${number === null ? '' : `?to=${encodeURIComponent(number)}`}`);
}

/** E-mails delivered to an address, oldest first. */
export function mailsTo(address: string): Promise<Mail[]> {
  return read(`/_mail/messages?to=${encodeURIComponent(address)}`);
}

async function read<T>(path: string): Promise<T[]> {
  const context = await request.newContext({ baseURL: fromStack('E2E_INBOX_URL') });
  try {
    const { messages } = await (await context.get(path)).json();
    return messages;
  } finally {
    await context.dispose();
  }
}

/**
 * Demo people by crew, with what the demo's phone list says of them. All read English. The crew called North is left
 * to the tests of the sub and the foreman, who belong to it.
 */
export const phoneList: Readonly<Record<string, { name: string; phone: string; email: string }>> = {
  South: { name: 'Travis Mebane', phone: '+19705550128', email: 'travis.mebane@example.com' },
  'Big Slab': { name: 'Marcus Dillard', phone: '+19705550132', email: 'marcus.dillard@example.com' },
};
