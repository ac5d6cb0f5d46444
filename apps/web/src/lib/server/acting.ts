import type { Acting } from '@strikeboard/db/queries/visit-changes';
import type { SignedIn } from '../locals.ts';
import { noticesConfig } from './notices.ts';

/** Who acts, when, and how long a change settles before people are told. */
export function acting(person: SignedIn, nowMs: number): Acting {
  return { actorId: person.id, nowMs, settleSeconds: noticesConfig().settleSeconds };
}
