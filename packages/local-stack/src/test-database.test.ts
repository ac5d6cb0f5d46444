import { expect, it, vi } from 'vitest';
import { withClient } from './app-database.ts';

// Copying a database from a template: PostgreSQL 15's manual, 23.3.

const migrate = vi.fn(async (url: string) => {
  await withClient(url, (client) => client.query('create table made_by_migration (n int)'));
});
vi.mock('@strikeboard/db/migrate', () => ({ migrate }));

it('gives each caller a migrated database of its own, and migrates once', async () => {
  for (const name of ['ADMIN', 'OWNER', 'WEB', 'WORKER']) vi.stubEnv(`TEST_${name}_URL`, '');
  const { freshDatabase } = await import('./test-database.ts');
  const databases = await Promise.all([freshDatabase(), freshDatabase(), freshDatabase()]);
  expect(migrate).toHaveBeenCalledTimes(1);
  const [first, second] = databases;
  await withClient(first?.urls.owner ?? '', (client) =>
    client.query('insert into made_by_migration values (1)'),
  );
  const { rows } = await withClient(second?.urls.owner ?? '', (client) =>
    client.query('select current_user as role, (select count(*)::int from made_by_migration) as n'),
  );
  expect(rows).toEqual([{ role: 'app_owner', n: 0 }]);
  const asWeb = withClient(second?.urls.web ?? '', (client) => client.query('select from made_by_migration'));
  await expect(asWeb).rejects.toMatchObject({ code: '42501' });

  const adminUrl = new URL(first?.adminUrl ?? '');
  adminUrl.pathname = '/postgres';
  for (const database of databases) await database.close();
  const left = await withClient(adminUrl.href, (admin) =>
    admin.query("select datname from pg_database where datname like 'test\\_%'"),
  );
  expect(left.rows).toEqual([]);
});
