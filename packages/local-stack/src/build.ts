import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { holdLock } from './bootstrap.mjs';
import { type Child, type Program, runToEnd } from './children.ts';
import { type Say, step } from './progress.ts';

const SOURCES = ['apps/web', 'packages/domain', 'packages/db', 'packages/notices'];
const NOT_SOURCES = new Set(['node_modules', 'dist', '.astro', 'coverage']);
const IS_TEST = /\.(test|spec)\.\w+$/;

/**
 * Builds the web app when what it is built from has changed since the last complete build.
 * @param options.onStart gets the running build, so that it can be ended
 * @throws StackError with the end of the build's output when it fails
 */
export async function buildIfChanged(options: {
  root: string;
  env: NodeJS.ProcessEnv;
  say: Say;
  command?: Program['command'];
  onStart?: (child: Child) => void;
}): Promise<void> {
  const { root, env, say, onStart } = options;
  const web = path.join(root, 'apps/web');
  const command = options.command ?? [path.join(web, 'node_modules/.bin/astro'), 'build'];
  const stampFile = path.join(root, '.local/build-stamp');
  const isCurrent = () =>
    existsSync(path.join(web, 'dist/server/entry.mjs')) &&
    existsSync(stampFile) &&
    readFileSync(stampFile, 'utf8').trim() === sourceHash(root);
  let lock = await holdLock(root, 'build', () => `process ${process.pid}`);
  if (!lock.held) say(`Waiting for the build of another start (${lock.holder}) …`);
  while (!lock.held) {
    await sleep(200);
    lock = await holdLock(root, 'build', () => `process ${process.pid}`);
  }
  try {
    if (isCurrent()) return;
    await step(say, 'Building the web app (about 15 s)', async () => {
      const hash = sourceHash(root);
      // Removed first and written last, so a build that was cut short is done again.
      rmSync(stampFile, { force: true });
      const logFile = path.join(root, '.local/logs/build.log');
      const buildEnv = { ...env, NODE_ENV: 'production', ASTRO_TELEMETRY_DISABLED: '1' };
      await runToEnd({ name: 'build', command, cwd: web, env: buildEnv, logFile }, onStart);
      mkdirSync(path.dirname(stampFile), { recursive: true });
      writeFileSync(stampFile, `${hash}\n`);
    });
  } finally {
    await lock.release();
  }
}

/** A hash of every file the build can read, tests left out. */
export function sourceHash(root: string): string {
  const hash = createHash('sha256').update(process.versions.node);
  const files = SOURCES.flatMap((folder) => filesIn(path.join(root, folder)));
  for (const file of [path.join(root, 'pnpm-lock.yaml'), ...files]) {
    hash.update(path.relative(root, file)).update('\0').update(readFileSync(file)).update('\0');
  }
  return hash.digest('hex');
}

function filesIn(folder: string): string[] {
  if (!existsSync(folder)) return [];
  return readdirSync(folder, { withFileTypes: true })
    .toSorted((a, b) => (a.name < b.name ? -1 : 1))
    .filter((entry) => !NOT_SOURCES.has(entry.name) && !IS_TEST.test(entry.name))
    .flatMap((entry) => {
      const full = path.join(folder, entry.name);
      if (entry.isDirectory()) return filesIn(full);
      return entry.isFile() ? [full] : [];
    });
}
