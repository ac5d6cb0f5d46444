import { execFile } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import {
  chmodSync,
  chownSync,
  existsSync,
  lstatSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  realpathSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import { StackError } from './bootstrap.mjs';
import { canWriteAs, type OsUser, POSTGRES_MAJOR, type PostgresPrograms } from './postgres-programs.ts';

/** The cluster's own administrator; used to set the cluster up and by tests, never by the application. */
export const SUPERUSER = 'cluster_admin';

const PARTIAL_PREFIX = 'data.partial-';

/**
 * The folder to hold the cluster: `dir`, or one under /var/tmp when the server's account cannot reach
 * `dir` (a checkout under /root, for one). A small file in `dir` remembers which.
 */
export async function clusterHome(dir: string, user: OsUser | undefined): Promise<string> {
  mkdirSync(dir, { recursive: true });
  if (!user) return dir;
  // Under a umask of 077 these would be closed to the server's account; nothing in them is readable by being here.
  chmodSync(dir, 0o711);
  chmodSync(path.dirname(dir), 0o711);
  const probe = path.join(dir, `probe-${process.pid}`);
  mkdirSync(probe);
  chownSync(probe, user.uid, user.gid);
  const isReachable = await canWriteAs(user, probe);
  rmSync(probe, { recursive: true });
  return isReachable ? dir : fallbackHome(dir);
}

function fallbackHome(dir: string): string {
  const note = path.join(dir, 'cluster-id');
  if (!existsSync(note)) writeFileSync(note, `${randomBytes(8).toString('hex')}\n`);
  const id = readFileSync(note, 'utf8').trim();
  const hash = createHash('sha256').update(realpathSync(dir)).update(id).digest('hex').slice(0, 16);
  const home = `/var/tmp/strikeboard-${hash}`;
  mkdirSync(home, { recursive: true });
  const found = lstatSync(home);
  if (!found.isDirectory() || found.uid !== process.getuid?.()) {
    throw new StackError(`${home} belongs to someone else; remove it, or delete ${note}, and start again.`);
  }
  chmodSync(home, 0o711);
  return home;
}

/**
 * The data folder inside `home`, made with initdb when it is not there yet. It is made under another
 * name and renamed when complete, so a data folder that exists is a whole one.
 * @throws StackError for a cluster of another major version, or for files that are no cluster; neither is touched
 */
export async function ensureDataFolder(options: {
  home: string;
  programs: PostgresPrograms;
  user: OsUser | undefined;
  durable: boolean;
  superuserPassword: string;
}): Promise<{ data: string; isNew: boolean }> {
  const { home, programs, user, durable, superuserPassword } = options;
  for (const name of readdirSync(home)) {
    if (name.startsWith(PARTIAL_PREFIX)) rmSync(path.join(home, name), { recursive: true, force: true });
  }
  const data = path.join(home, 'data');
  if (existsSync(data) && readdirSync(data).length > 0) {
    assertOurVersion(data);
    return { data, isNew: false };
  }
  rmSync(data, { recursive: true, force: true });
  const partial = path.join(home, `${PARTIAL_PREFIX}${process.pid}`);
  mkdirSync(partial, { mode: 0o700 });
  const passwordFile = path.join(home, `${PARTIAL_PREFIX}password`);
  writeFileSync(passwordFile, `${superuserPassword}\n`, { mode: 0o600 });
  if (user) {
    chownSync(partial, user.uid, user.gid);
    chownSync(passwordFile, user.uid, user.gid);
  }
  const args = [
    ['-D', partial, '-U', SUPERUSER, `--pwfile=${passwordFile}`],
    ['--auth=scram-sha-256', '-E', 'UTF8', '--locale=C.UTF-8'],
    durable ? [] : ['--no-sync'],
  ].flat();
  try {
    await promisify(execFile)(programs.initdb, args, { ...user, cwd: '/' });
  } catch (error) {
    const said = error instanceof Error && 'stderr' in error ? String(error.stderr).trim() : String(error);
    throw new StackError(`The database could not be set up in ${home}: ${said}`);
  } finally {
    rmSync(passwordFile, { force: true });
  }
  renameSync(partial, data);
  return { data, isNew: true };
}

function assertOurVersion(data: string): void {
  const versionFile = path.join(data, 'PG_VERSION');
  const aside = `mv ${data} ${data}.aside`;
  if (!existsSync(versionFile)) {
    throw new StackError(
      `${data} holds files that are no PostgreSQL database; nothing was touched. Move them away, then start again:\n  ${aside}`,
    );
  }
  const version = readFileSync(versionFile, 'utf8').trim();
  if (version === POSTGRES_MAJOR) return;
  throw new StackError(
    `The database in ${data} was made by PostgreSQL ${version} and this machine runs ${POSTGRES_MAJOR}; nothing was touched. To begin with a fresh one, keep the old one aside and start again:\n  ${aside}`,
  );
}
