import { readdirSync, readFileSync, readlinkSync, realpathSync, rmSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { StackError } from './bootstrap.mjs';

/**
 * Ends what an earlier server, killed or orphaned, left running in this data folder, and clears a
 * lock file that names a process which is no server of this folder. To be called only while holding
 * the folder's lock. No process outside the folder is signalled.
 * @throws StackError when a server cannot be ended
 */
export async function clearLeftovers(data: string): Promise<void> {
  const folder = realpathSync(data);
  const lockFile = path.join(folder, 'postmaster.pid');
  const lockPid = readLockPid(lockFile);
  if (lockPid !== undefined && serversIn(folder).includes(lockPid)) {
    // SIGINT is PostgreSQL's fast shutdown, SIGQUIT its immediate one; both keep every committed row.
    if (!(await endAll(folder, () => [lockPid], 'SIGINT', 10_000))) {
      await endAll(folder, () => [lockPid], 'SIGQUIT', 5000);
    }
  }
  // The backends of a killed server notice by themselves within moments.
  const others = () => serversIn(folder);
  if (!(await gone(others, 5000)) && !(await endAll(folder, others, 'SIGQUIT', 5000))) {
    throw new StackError(
      `An earlier database server still runs in ${data} (process ${others().join(', ')}) and would not stop; stop it, and start again.`,
    );
  }
  if (readLockPid(lockFile) !== undefined) rmSync(lockFile, { force: true });
}

/** Processes of PostgreSQL whose working folder is this data folder, as every server process's is. */
export function serversIn(folder: string): number[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .filter((pid) => {
      try {
        const program = path.basename(readlinkSync(`/proc/${pid}/exe`)).replace(/ \(deleted\)$/, '');
        return program === 'postgres' && readlinkSync(`/proc/${pid}/cwd`) === folder;
      } catch {
        return false;
      }
    })
    .map(Number);
}

function readLockPid(lockFile: string): number | undefined {
  try {
    const pid = Number(readFileSync(lockFile, 'utf8').split('\n')[0]);
    return Number.isInteger(pid) && pid > 1 ? pid : 0;
  } catch {
    return undefined;
  }
}

async function endAll(
  folder: string,
  pids: () => number[],
  signal: NodeJS.Signals,
  withinMs: number,
): Promise<boolean> {
  for (const pid of pids()) {
    try {
      process.kill(pid, signal);
    } catch {
      // It has ended meanwhile, or belongs to another account; the wait below tells which.
    }
  }
  return await gone(() => serversIn(folder).filter((pid) => pids().includes(pid)), withinMs);
}

async function gone(pids: () => number[], withinMs: number): Promise<boolean> {
  const untilMs = performance.now() + withinMs;
  while (pids().length > 0) {
    if (performance.now() > untilMs) return false;
    await sleep(30);
  }
  return true;
}
