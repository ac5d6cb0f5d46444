import { fileURLToPath } from 'node:url';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate as runDrizzle } from 'drizzle-orm/node-postgres/migrator';
import { runMigrations as runQueue } from 'graphile-worker';
import pg from 'pg';

/** Any number: it only has to be the same in every process that migrates this database. */
const MIGRATION_LOCK = 724_031_553;

/**
 * Brings a database up to date: our tables, then the queue's own schema and the worker's rights in it. Safe to run
 * from several processes at once; the others wait. Runs as the owner, who is no superuser.
 */
export async function migrate(ownerUrl: string): Promise<void> {
  const lock = new pg.Client({ connectionString: ownerUrl, application_name: 'strikeboard migrate' });
  await lock.connect();
  const pool = new pg.Pool({ connectionString: ownerUrl, max: 2 });
  pool.on('error', () => {});
  pool.on('connect', (client) => client.on('error', () => {}));
  try {
    await lock.query('select pg_advisory_lock($1)', [MIGRATION_LOCK]);
    await runDrizzle(drizzle(pool), { migrationsFolder: migrationsFolder() });
    await runQueue({ pgPool: pool });
    await pool.query(queueRights);
  } finally {
    await pool.end();
    await lock.end();
  }
}

/** Where the SQL lies: beside the packages, or where an image has put it. */
function migrationsFolder(): string {
  return process.env.MIGRATIONS_DIR ?? fileURLToPath(new URL('../../../drizzle', import.meta.url));
}

// The queue's tables have row-level security without a policy, so that only their owner could run jobs. Jobs carry
// ids and no rows, and the worker sets each job's company before it reads anything.
const queueRights = `
  grant usage on schema graphile_worker to app_worker;
  grant select, insert, update, delete on all tables in schema graphile_worker to app_worker;
  grant usage on all sequences in schema graphile_worker to app_worker;
  grant execute on all functions in schema graphile_worker to app_worker;
  do $$
  declare t record;
  begin
    for t in
      select c.relname from pg_class c
      where c.relnamespace = 'graphile_worker'::regnamespace and c.relkind = 'r' and c.relrowsecurity
        and not exists (select from pg_policy p where p.polrelid = c.oid and p.polname = 'queue_worker')
    loop
      execute format(
        'create policy queue_worker on graphile_worker.%I for all to app_worker using (true) with check (true)', t.relname);
    end loop;
  end $$;
`;
