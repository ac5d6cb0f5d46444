import { execFile } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import { StackError } from './bootstrap.mjs';
import { installDebianPackage } from './debian.ts';
import type { Say } from './progress.ts';

/** The major version of Debian 12's PostgreSQL. */
export const POSTGRES_MAJOR = '15';

const BIN_FOLDER = `/usr/lib/postgresql/${POSTGRES_MAJOR}/bin`;

export type PostgresPrograms = { postgres: string; initdb: string };

/** The account that runs the server: PostgreSQL refuses to run as root. */
export type OsUser = { uid: number; gid: number };

/**
 * The server's programs, installed from Debian when they are missing.
 * @throws StackError when they are missing and cannot be installed
 */
export async function ensurePostgres(say: Say): Promise<PostgresPrograms> {
  const programs = { postgres: path.join(BIN_FOLDER, 'postgres'), initdb: path.join(BIN_FOLDER, 'initdb') };
  const isThere = () => Object.values(programs).every((file) => existsSync(file));
  if (!isThere()) await installDebianPackage('postgresql', 'for the database', say);
  if (!isThere()) {
    throw new StackError(
      `PostgreSQL ${POSTGRES_MAJOR} is not in ${BIN_FOLDER} after the installation; Strikeboard's local database needs Debian 12, whose "postgresql" is version ${POSTGRES_MAJOR}.`,
    );
  }
  return programs;
}

/** The account to run the server as: "postgres" when this process is root, else this process's own. */
export function serverUser(passwdFile = '/etc/passwd'): OsUser | undefined {
  if (process.getuid?.() !== 0) return undefined;
  const entry = readFileSync(passwdFile, 'utf8')
    .split('\n')
    .map((line) => line.split(':'))
    .find(([name]) => name === 'postgres');
  const uid = Number(entry?.[2]);
  const gid = Number(entry?.[3]);
  if (!Number.isInteger(uid) || !Number.isInteger(gid) || uid === 0) {
    throw new StackError(
      'There is no account "postgres" to run the database as; reinstall Debian\'s package with: apt-get install --reinstall postgresql-common',
    );
  }
  return { uid, gid };
}

/** Whether that account can write in the folder, every parent included. Asked as that account, since root may always. */
export async function canWriteAs(user: OsUser | undefined, folder: string): Promise<boolean> {
  try {
    // The working folder of this process may itself be out of that account's reach.
    await promisify(execFile)('/usr/bin/test', ['-w', folder, '-a', '-x', folder], { ...user, cwd: '/' });
    return true;
  } catch {
    return false;
  }
}
