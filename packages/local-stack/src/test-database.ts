import { spawn } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { type DatabaseUrls, ensureDatabase, withClient, withDatabase } from './app-database.ts';
import { startCluster } from './postgres.ts';

/** How a test run tells its workers of the server they share. */
export const TEST_SERVER_NAMES = {
  adminUrl: 'TEST_ADMIN_URL',
  owner: 'TEST_OWNER_URL',
  web: 'TEST_WEB_URL',
  worker: 'TEST_WORKER_URL',
} as const;

const TEMPLATE = 'strikeboard_template';
/** Any number will do, as long as every worker of a run takes the same. */
const TEMPLATE_LOCK = 4_321_001;

type TestServer = { adminUrl: string; urls: DatabaseUrls };

let server: Promise<TestServer> | undefined;

/**
 * A database of one's own with every migration applied and no rows but theirs, open to the three
 * roles. It is on the server of the test run; when a package's tests are run alone, on a server that
 * ends with them. Takes about 0.1 s, the first of a run 2 s more.
 */
export async function freshDatabase(): Promise<{
  urls: DatabaseUrls;
  adminUrl: string;
  close(): Promise<void>;
}> {
  server ??= sharedServer() ?? ownServer();
  const { adminUrl, urls } = await server;
  const name = `test_${randomBytes(8).toString('hex')}`;
  await withClient(adminUrl, async (admin) => {
    await ensureTemplate(admin, withDatabase(urls.owner, TEMPLATE));
    await ensureDatabase(admin, name, TEMPLATE);
  });
  return {
    urls: {
      owner: withDatabase(urls.owner, name),
      web: withDatabase(urls.web, name),
      worker: withDatabase(urls.worker, name),
    },
    adminUrl: withDatabase(adminUrl, name),
    close: () =>
      withClient(adminUrl, async (admin) => {
        await admin.query(`drop database if exists ${pg.escapeIdentifier(name)} with (force)`);
      }),
  };
}

/** Makes the template before any test asks for it, so that no test waits for the migrations. */
export async function prepareTemplate({ adminUrl, urls }: TestServer): Promise<void> {
  await withClient(adminUrl, (admin) => ensureTemplate(admin, withDatabase(urls.owner, TEMPLATE)));
}

/** The template is migrated once per server, by whoever comes first; the others wait. */
async function ensureTemplate(admin: pg.Client, ownerUrl: string): Promise<void> {
  await admin.query('select pg_advisory_lock($1)', [TEMPLATE_LOCK]);
  try {
    const { rowCount } = await admin.query('select from pg_database where datname = $1', [TEMPLATE]);
    if (rowCount !== 0) return;
    const making = `${TEMPLATE}_making`;
    await admin.query(`drop database if exists ${making} with (force)`);
    await ensureDatabase(admin, making);
    const { migrate } = await import('@strikeboard/db/migrate');
    await migrate(withDatabase(ownerUrl, making));
    // A database can be copied or renamed only while nobody is connected to it.
    await admin.query('select pg_terminate_backend(pid) from pg_stat_activity where datname = $1', [making]);
    await admin.query(`alter database ${making} rename to ${TEMPLATE}`);
  } finally {
    await admin.query('select pg_advisory_unlock($1)', [TEMPLATE_LOCK]);
  }
}

function sharedServer(): Promise<TestServer> | undefined {
  const { adminUrl, owner, web, worker } = Object.fromEntries(
    Object.entries(TEST_SERVER_NAMES).map(([key, name]) => [key, process.env[name]]),
  );
  if (!adminUrl || !owner || !web || !worker) return undefined;
  return Promise.resolve({ adminUrl, urls: { owner, web, worker } });
}

/** A throw-away server in the temporary folder; the kernel ends it with this process. */
async function ownServer(): Promise<TestServer> {
  const folder = mkdtempSync(path.join(tmpdir(), 'strikeboard-test-pg-'));
  removeAfterThisProcess(folder);
  return await startCluster({ dir: path.join(folder, 'pg'), durable: false });
}

/** Test workers are ended by signal, without a chance to tidy up: another process does it after them. */
function removeAfterThisProcess(folder: string): void {
  const wait = `while kill -0 ${process.pid} 2>/dev/null; do sleep 1; done; sleep 1; rm -rf "$0"`;
  spawn('/bin/sh', ['-c', wait, folder], { detached: true, stdio: 'ignore' }).unref();
}
