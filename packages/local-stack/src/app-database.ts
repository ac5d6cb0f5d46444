import pg from 'pg';
import type { Secrets } from './secrets.ts';

/** The database that `npm start` serves. */
export const APP_DATABASE = 'strikeboard';

/** The application's roles. None is a superuser and none may bypass row-level security. */
export const ROLES = { owner: 'app_owner', web: 'app_web', worker: 'app_worker' } as const;

/** Owns the few functions that look across companies. It cannot sign in; the owner may hand functions to it. */
const CROSS_ROLE = 'app_cross';

/** Connection strings of one database, by role: the owner migrates, web and worker serve. */
export type DatabaseUrls = { owner: string; web: string; worker: string };

/** Makes the roles where they are missing and gives them their rights and passwords again. */
export async function ensureRoles(admin: pg.Client, secrets: Secrets): Promise<void> {
  const passwords = [
    [ROLES.owner, secrets.ownerPassword],
    [ROLES.web, secrets.webPassword],
    [ROLES.worker, secrets.workerPassword],
  ] as const;
  for (const [role, password] of passwords) {
    const { rowCount } = await admin.query('select from pg_roles where rolname = $1', [role]);
    if (rowCount === 0) await admin.query(`create role ${role}`);
    await admin.query(
      `alter role ${role} login nosuperuser nocreatedb nocreaterole noreplication nobypassrls password ${pg.escapeLiteral(password)}`,
    );
  }
  const { rowCount } = await admin.query('select from pg_roles where rolname = $1', [CROSS_ROLE]);
  if (rowCount === 0) await admin.query(`create role ${CROSS_ROLE} nologin nosuperuser nobypassrls`);
  await admin.query(`grant ${CROSS_ROLE} to ${ROLES.owner}`);
}

/** Makes a database owned by the owner role, open to the three roles and to nobody else, if it is not there. */
export async function ensureDatabase(admin: pg.Client, name: string, template = 'template0'): Promise<void> {
  const id = pg.escapeIdentifier(name);
  const { rowCount } = await admin.query('select from pg_database where datname = $1', [name]);
  if (rowCount === 0) {
    await admin.query(`create database ${id} owner ${ROLES.owner} template ${pg.escapeIdentifier(template)}`);
  }
  await admin.query(`revoke all on database ${id} from public`);
  await admin.query(`grant connect on database ${id} to ${ROLES.web}, ${ROLES.worker}`);
}

/** The same server and role, another database. */
export function withDatabase(url: string, database: string): string {
  const changed = new URL(url);
  changed.pathname = `/${database}`;
  return changed.href;
}

export async function withClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url });
  // Without a listener, a connection lost with its server would end this process.
  client.on('error', () => {});
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}
