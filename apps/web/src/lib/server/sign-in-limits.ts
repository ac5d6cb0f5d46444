import { createHash } from 'node:crypto';
import { type IRateLimiterRes, RateLimiterMemory, RateLimiterRes } from 'rate-limiter-flexible';

const WINDOW_SECONDS = 15 * 60;

/** Tries from one address, whatever the account; an office shares one. Each process counts for itself. */
const byAddress = new RateLimiterMemory({ keyPrefix: 'address', points: 60, duration: WINDOW_SECONDS });
/** Failed tries for one account, from wherever. */
const byAccount = new RateLimiterMemory({ keyPrefix: 'account', points: 10, duration: WINDOW_SECONDS });

/** Counts a try before the password is looked at; returns 0 to go on, or the seconds to wait. */
export async function countTry(address: string, email: string): Promise<number> {
  const waits = await Promise.all([consume(byAddress, address), consume(byAccount, accountKey(email))]);
  return Math.max(...waits);
}

/** A right password forgets the account's failed tries. */
export async function forgetTries(email: string): Promise<void> {
  await byAccount.delete(accountKey(email));
}

async function consume(limiter: RateLimiterMemory, key: string): Promise<number> {
  try {
    await limiter.consume(key);
    return 0;
  } catch (refusal) {
    if (!(refusal instanceof RateLimiterRes)) throw refusal;
    return secondsOf(refusal);
  }
}

function secondsOf(refusal: IRateLimiterRes): number {
  return Math.max(1, Math.ceil((refusal.msBeforeNext ?? 1000) / 1000));
}

/** Unknown accounts are counted like known ones, so the limit tells nothing about which exist. */
function accountKey(email: string): string {
  return createHash('sha256').update(email.trim().toLowerCase()).digest('base64url');
}
