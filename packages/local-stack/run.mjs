/**
 * `node run.mjs start|dev|test [NAME]`: installs the pinned packages when they are not what the
 * lockfile says, then runs src/<command>.ts. Only node: built-ins, since nothing is installed yet.
 */
import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { constants } from 'node:os';
import path from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { assertPortFree, endGroup, holdLock, parsePort, StackError, watchParent } from './src/bootstrap.mjs';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../..');
const stampFile = path.join(root, 'node_modules', '.install-stamp');
const COMMANDS = ['start', 'dev', 'test'];
const ENDING_SIGNALS = ['SIGINT', 'SIGTERM', 'SIGHUP'];

let child;
let ending;

try {
  process.exitCode = await main(process.argv[2], process.argv.slice(3));
} catch (error) {
  console.error(error instanceof StackError ? `\n${error.message}` : error);
  process.exitCode = 1;
}

async function main(command, args) {
  if (!COMMANDS.includes(command)) throw new StackError(`Say one of: ${COMMANDS.join(', ')}.`);
  for (const signal of ENDING_SIGNALS) process.on(signal, () => end(signal));
  watchParent(() => end('SIGTERM'));
  assertNode();
  assertWritable();
  if (command !== 'test') await assertMayServe(command);
  await install();
  if (ending) return 128 + constants.signals[ending];
  const tsx = createRequire(path.join(root, 'package.json')).resolve('tsx');
  const script = path.join(root, 'packages/local-stack/src', `${command}.ts`);
  return await runChild(process.execPath, ['--import', pathToFileURL(tsx).href, script, ...args]);
}

/** The first ending signal counts; npm passes on a Ctrl-C that the terminal has already sent. */
function end(signal) {
  if (ending) return;
  ending = signal;
  child?.kill(signal);
  const group = child?.pid;
  if (group !== undefined) setTimeout(() => endGroup(group, 0), 20_000).unref();
}

/** A child in a process group of its own: it gets one signal, from here, and what it leaves behind is ended. */
async function runChild(program, args, env = {}) {
  child = spawn(program, args, {
    cwd: root,
    detached: true,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, ...env },
  });
  const group = child.pid;
  const code = await new Promise((resolve, reject) => {
    child.once('error', reject);
    child.once('exit', (exitCode, signal) => resolve(exitCode ?? 128 + constants.signals[signal]));
  });
  child = undefined;
  if (group !== undefined) await endGroup(group);
  return ending ? 128 + constants.signals[ending] : code;
}

function assertNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major > 20 || (major === 20 && minor >= 19)) return;
  throw new StackError(
    `Strikeboard needs Node 20.19 or newer and this is ${process.versions.node}; install a newer Node and run the command again.`,
  );
}

function assertWritable() {
  try {
    for (const folder of ['.local', 'node_modules']) {
      const probe = path.join(root, folder, `.write-probe-${process.pid}`);
      mkdirSync(path.dirname(probe), { recursive: true });
      writeFileSync(probe, '');
      rmSync(probe);
    }
  } catch (error) {
    if (error.code === 'ENOSPC') {
      throw new StackError(
        `The disk under ${root} is full; free some space (about 1 GB) and run the command again.`,
      );
    }
    throw new StackError(
      `Strikeboard cannot write to ${root} (${error.code}); copy the folder to a place where you may write, and run the command there.`,
    );
  }
}

/** Refuses before anything long is done: a second start in this folder, or a port that is taken. */
async function assertMayServe(command) {
  const port = parsePort(process.env.PORT);
  const lock = await holdLock(root, 'serve', () => `process ${process.pid}, port ${port}`);
  if (!lock.held) {
    throw new StackError(
      `Strikeboard is already running from this folder (${lock.holder}); use that one, or stop it with Ctrl-C before you start another.`,
    );
  }
  await assertPortFree(port, command);
}

async function install() {
  if (isInstalled()) return;
  let lock = await holdLock(root, 'install', () => `process ${process.pid}`);
  if (!lock.held) {
    console.log(`Waiting for packages, which another start (${lock.holder}) is installing …`);
    while (!lock.held && !ending) {
      await new Promise((done) => setTimeout(done, 250));
      lock = await holdLock(root, 'install', () => `process ${process.pid}`);
    }
  }
  if (!isInstalled() && !ending) await installPackages();
  if (lock.held) await lock.release();
}

async function installPackages() {
  const pin = pinnedPnpm();
  const startedMs = performance.now();
  console.log(`Installing packages with pnpm ${pin} (the first time takes about half a minute) …`);
  // The stamp is removed first and written last, so an install that was cut short is done again.
  rmSync(stampFile, { force: true });
  const args = ['--yes', `pnpm@${pin}`, 'install', '--frozen-lockfile'];
  // Without a terminal pnpm refuses to replace a half-made node_modules unless CI is set.
  const code = await runChild('npx', args, { CI: 'true' });
  if (ending) return;
  if (code !== 0) {
    throw new StackError(
      `Installing packages failed (exit code ${code}; the lines above say why). Nothing is lost: check the network and the disk, and run the command again.`,
    );
  }
  writeFileSync(stampFile, `${installHash()}\n`);
  console.log(`Packages installed in ${((performance.now() - startedMs) / 1000).toFixed(0)} s.`);
}

function pinnedPnpm() {
  const { packageManager } = JSON.parse(readFileSync(path.join(root, 'package.json'), 'utf8'));
  const match = /^pnpm@(\d+\.\d+\.\d+)/.exec(packageManager ?? '');
  if (!match) throw new StackError('package.json names no exact pnpm version in "packageManager".');
  return match[1];
}

function isInstalled() {
  const complete = workspaceFolders().every((folder) => existsSync(path.join(folder, 'node_modules')));
  return complete && existsSync(stampFile) && readFileSync(stampFile, 'utf8').trim() === installHash();
}

function installHash() {
  const hash = createHash('sha256').update(process.versions.node.split('.')[0]);
  const files = ['pnpm-lock.yaml', 'pnpm-workspace.yaml'].map((name) => path.join(root, name));
  for (const file of [...files, ...workspaceFolders().map((folder) => path.join(folder, 'package.json'))]) {
    hash.update(path.relative(root, file)).update('\0').update(readFileSync(file)).update('\0');
  }
  return hash.digest('hex');
}

/** The folders with a package.json: the root, tests, and each of apps and packages. */
function workspaceFolders() {
  const members = ['apps', 'packages'].flatMap((parent) =>
    readdirSync(path.join(root, parent)).map((name) => path.join(root, parent, name)),
  );
  return [root, path.join(root, 'tests'), ...members.toSorted()].filter((folder) =>
    existsSync(path.join(folder, 'package.json')),
  );
}
