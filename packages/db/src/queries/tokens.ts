import { createHash, randomBytes } from 'node:crypto';

/** The form in which tokens of sessions and links are kept: sha256 as hex. */
export function tokenHash(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}

/** 32 random bytes as base64url: what a browser's cookie or a link carries. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}
