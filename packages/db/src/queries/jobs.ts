import { sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';

/**
 * Adds a background job of the company that is set; it exists only if the transaction commits. A job with the same
 * key that has not begun is moved to the new time instead.
 */
export async function addJob(
  tx: Tx,
  job: { task: string; payload: Record<string, string>; key: string; runAtMs: number },
): Promise<void> {
  const runAt = new Date(job.runAtMs).toISOString();
  await tx.execute(
    sql`select app.add_job(${job.task}, ${JSON.stringify(job.payload)}::json, ${job.key}, ${runAt}::timestamptz)`,
  );
}
