import { and, eq, sql } from 'drizzle-orm';
import type { Tx } from './client.ts';
import { Conflict } from './errors.ts';
import { currentCompany } from './tables/columns.ts';
import { idempotencyKeys } from './tables/index.ts';

/** An answer as it was, or will be, sent. */
export interface KeptAnswer {
  status: number;
  body: unknown;
}

/**
 * Runs a write once per key and person: a repetition gets the first answer, in the same transaction as the write, so
 * that neither is there without the other. Two at the same time run one after the other.
 * @throws Conflict `key-reused` when the key came with another request before
 */
export async function oncePerKey(
  tx: Tx,
  of: { key: string; personId: string; requestHash: string; nowMs: number },
  work: () => Promise<KeptAnswer>,
): Promise<KeptAnswer> {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`key:${of.personId}:${of.key}`}, 0))`);
  const [kept] = await tx
    .select()
    .from(idempotencyKeys)
    .where(
      and(
        eq(idempotencyKeys.companyId, currentCompany),
        eq(idempotencyKeys.personId, of.personId),
        eq(idempotencyKeys.key, of.key),
      ),
    );
  if (kept) {
    if (kept.requestHash !== of.requestHash) throw new Conflict('key-reused', { key: of.key });
    return { status: kept.status, body: kept.body };
  }
  const answer = await work();
  await tx.insert(idempotencyKeys).values({
    companyId: currentCompany,
    personId: of.personId,
    key: of.key,
    requestHash: of.requestHash,
    status: answer.status,
    body: answer.body,
    createdAt: new Date(of.nowMs),
  });
  return answer;
}
