import { env } from '../../env.ts';

/** How long a session lasts from sign-in. */
export const SESSION_SECONDS = 30 * 24 * 3600;

/** Whether cookies are for https only: as the address that people type has it. */
export function usesHttps(): boolean {
  return env().APP_ORIGIN.startsWith('https:');
}

/** Name of the cookie that carries the session's token; the prefix makes browsers refuse it over http. */
export function sessionCookieName(): string {
  return usesHttps() ? '__Secure-authjs.session-token' : 'authjs.session-token';
}
