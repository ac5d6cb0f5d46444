import { hash, verify } from '@node-rs/argon2';

/** Longer passwords cost time and are not typed by anyone. */
export const MAX_PASSWORD_LETTERS = 200;

/** argon2id with the library's defaults (m = 19 MiB, t = 2, p = 1: OWASP Password Storage Cheat Sheet, published). */
export function hashPassword(password: string): Promise<string> {
  return hash(password);
}

/** Of a password that nobody has; made once, so that unknown accounts take as long as known ones. */
let dummy: Promise<string> | undefined;

/** Whether the password belongs to the hash. Without a hash it takes as long and says no. */
export async function passwordFits(passwordHash: string | null, password: string): Promise<boolean> {
  dummy ??= hashPassword(crypto.randomUUID());
  if (password.length > MAX_PASSWORD_LETTERS) return false;
  const fits = await verify(passwordHash ?? (await dummy), password).catch(() => false);
  return fits && passwordHash !== null;
}
