import { sql } from 'drizzle-orm';
import type { Database } from './client.ts';
import { guarded } from './errors.ts';

/**
 * Gives back the jobs that a worker held when it was killed; without this the queue keeps them for hours. A worker
 * that lives has a connection open, so only locks older than any job may take are released. Returns how many.
 */
export async function releaseDeadWorkers(db: Database, olderThanSeconds = 120): Promise<number> {
  const released = await guarded(() =>
    db.orm.execute(
      sql`update graphile_worker._private_jobs set locked_at = null, locked_by = null
          where locked_at < now() - make_interval(secs => ${olderThanSeconds})`,
    ),
  );
  return released.rowCount ?? 0;
}
