/** A database is brought up to date by whoever starts first, however many start. */

import { randomBytes } from 'node:crypto';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { migrate } from '@strikeboard/db/migrate';
import { ensureDatabase, withClient, withDatabase } from '@strikeboard/local-stack/app-database';
import { freshDatabase } from '@strikeboard/local-stack/test-database';
import pg from 'pg';
import { afterAll, beforeAll, expect, it } from 'vitest';

let server: Awaited<ReturnType<typeof freshDatabase>>;
const made: string[] = [];

beforeAll(async () => {
  server = await freshDatabase();
});
afterAll(async () => {
  for (const name of made)
    await withClient(server.adminUrl, (admin) =>
      admin.query(`drop database if exists ${pg.escapeIdentifier(name)} with (force)`),
    );
  await server.close();
});

/** A database without any table. */
async function emptyDatabase() {
  const name = `test_${randomBytes(8).toString('hex')}`;
  made.push(name);
  await withClient(server.adminUrl, (admin) => ensureDatabase(admin, name));
  return {
    ownerUrl: withDatabase(server.urls.owner, name),
    adminUrl: withDatabase(server.adminUrl, name),
  };
}

/** Everything that the migrations make, as text. */
function shapeOf(url: string): Promise<string[]> {
  return withClient(url, async (client) => {
    const { rows } = await client.query<{ shape: string }>(`
      select format('%s.%s %s %s', table_schema, table_name, column_name, data_type) as shape
        from information_schema.columns where table_schema in ('public', 'graphile_worker')
      union all
      select format('%s %s', conrelid::regclass, pg_get_constraintdef(oid)) from pg_constraint
        where connamespace = 'public'::regnamespace
      union all select format('%s %s', tablename, indexdef) from pg_indexes where schemaname = 'public'
      union all select format('%s.%s %s %s %s', schemaname, tablename, policyname, roles, qual) from pg_policies
      union all select format('%s %s', oid::regprocedure, proacl) from pg_proc where pronamespace = 'app'::regnamespace
      union all select format('%s %s', oid::regclass, relacl) from pg_class
        where relnamespace in ('public'::regnamespace, 'graphile_worker'::regnamespace) and relkind in ('r', 'S')
      order by 1`);
    return rows.map(({ shape }) => shape);
  });
}

async function appliedIn(url: string): Promise<number> {
  return withClient(url, async (client) => {
    const { rows } = await client.query('select count(*)::int as count from drizzle.__drizzle_migrations');
    return rows[0]?.count;
  });
}

const journal: { entries: unknown[] } = JSON.parse(
  readFileSync(path.resolve(import.meta.dirname, '../../drizzle/meta/_journal.json'), 'utf8'),
);

it('is done once by three at the same time, and adds nothing when it is done again', async () => {
  const { ownerUrl, adminUrl } = await emptyDatabase();
  await Promise.all([migrate(ownerUrl), migrate(ownerUrl), migrate(ownerUrl)]);
  const shape = await shapeOf(adminUrl);
  expect(shape.length).toBeGreaterThan(300);
  expect(await appliedIn(adminUrl)).toBe(journal.entries.length);
  await migrate(ownerUrl);
  expect(await shapeOf(adminUrl)).toEqual(shape);
  expect(await appliedIn(adminUrl)).toBe(journal.entries.length);
  // The database of the tests was made by the same way.
  expect(await shapeOf(server.adminUrl)).toEqual(shape);
});

it('gives its lock back, also when it fails', async () => {
  const { ownerUrl, adminUrl } = await emptyDatabase();
  await withClient(adminUrl, (admin) => admin.query('create table public.visits (id int)'));
  await expect(migrate(ownerUrl)).rejects.toThrow();
  await withClient(adminUrl, (admin) => admin.query('drop table public.visits'));
  await migrate(ownerUrl);
  expect(await appliedIn(adminUrl)).toBe(journal.entries.length);
});

it('is done by a role that is no superuser', async () => {
  const { ownerUrl } = await emptyDatabase();
  await migrate(ownerUrl);
  await withClient(ownerUrl, async (client) => {
    const { rows } = await client.query(
      'select rolsuper, rolbypassrls from pg_roles where rolname = current_user',
    );
    expect(rows).toEqual([{ rolsuper: false, rolbypassrls: false }]);
  });
});
