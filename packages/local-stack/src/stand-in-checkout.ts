import { spawn } from 'node:child_process';
import {
  chmodSync,
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { serversIn } from './leftovers.ts';
import { freePort } from './postgres.ts';
import { repositoryRoot } from './workspace.ts';

/** For tests: a small checkout whose web app, package manager and build are stand-ins, and the real start. */

const PREPARE = `
console.log('account owner@example.com pour-early-4321 owner of Ridgeline Flatwork');
if (!process.env.OWNER_DATABASE_URL || !process.env.WEB_DATABASE_URL) process.exit(2);
`;

const SERVER = `
import { createServer } from 'node:http';
const shown = ['DATABASE_URL', 'OWNER_DATABASE_URL', 'APP_ORIGIN', 'AUTH_SECRET', 'SMS_ACCOUNT_SID', 'SMS_AUTH_TOKEN',
  'SMS_FROM', 'SMS_BASE_URL', 'SMTP_URL', 'MAIL_FROM', 'SETTLE_SECONDS', 'LOG_LEVEL', 'PORT', 'HOST', 'NODE_ENV'];
const server = createServer((request, response) => {
  if (request.url === '/env') response.end(JSON.stringify(Object.fromEntries(shown.map((name) => [name, process.env[name]]))));
  else response.writeHead(request.url === '/healthz' ? 200 : 404).end();
});
setTimeout(() => server.listen(Number(process.env.PORT), process.env.HOST), 300);
`;

const WORKER = `
console.log('worker ready');
setInterval(() => {}, 1000);
`;

const ASTRO = `#!/bin/sh
if test "$1" = dev; then
  exec "${process.execPath}" -e 'require("http").createServer((q, r) => r.writeHead(404).end(process.cwd())).listen(+process.argv[1], process.env.HOST)' "$5"
fi
mkdir -p dist/server
echo "$*" >> dist/calls
touch dist/server/entry.mjs
`;

/** Stands in for npx: notes what it was asked, and fails while the file fail-install exists. */
const NPX = `#!/bin/sh
echo "CI=$CI $*" >> npx-calls
test ! -e fail-install
`;

export type StandInCheckout = {
  root: string;
  port: number;
  /** Runs `node run.mjs`, after `through` when given, and collects what it says. */
  run(command: string, options?: { env?: NodeJS.ProcessEnv; through?: string[]; uid?: number }): Run;
  /** Numbers of the processes that work in this checkout, by what their command line contains. */
  processes(part?: string): number[];
  /** Ends what has been run and not ended. */
  endRuns(): Promise<void>;
  remove(): void;
};

export type Run = {
  pid: number;
  output(): string;
  /** Resolves once the output has this text; rejects when the run ends before. */
  until(text: string): Promise<void>;
  /** the exit code, or the signal */
  ended: Promise<number | NodeJS.Signals | null>;
  kill(signal: NodeJS.Signals): void;
};

export async function makeStandInCheckout(): Promise<StandInCheckout> {
  const root = mkdtempSync(path.join(tmpdir(), 'strikeboard-stand-in-'));
  chmodSync(root, 0o755);
  const put = (file: string, text: string, mode = 0o644) => {
    mkdirSync(path.join(root, path.dirname(file)), { recursive: true });
    writeFileSync(path.join(root, file), text, { mode });
  };
  const own = path.join(repositoryRoot, 'packages/local-stack');
  cpSync(path.join(own, 'run.mjs'), path.join(root, 'packages/local-stack/run.mjs'));
  cpSync(path.join(own, 'src'), path.join(root, 'packages/local-stack/src'), { recursive: true });
  cpSync(path.join(own, 'package.json'), path.join(root, 'packages/local-stack/package.json'));
  symlinkSync(path.join(own, 'node_modules'), path.join(root, 'packages/local-stack/node_modules'));
  mkdirSync(path.join(root, 'node_modules'));
  symlinkSync(path.join(repositoryRoot, 'node_modules/tsx'), path.join(root, 'node_modules/tsx'));
  put('package.json', JSON.stringify({ type: 'module', packageManager: 'pnpm@10.34.9+sha512.00' }));
  put('pnpm-lock.yaml', 'lockfileVersion: 9\n');
  put('pnpm-workspace.yaml', 'packages: [apps/*]\n');
  put('apps/web/package.json', JSON.stringify({ type: 'module' }));
  put('apps/web/scripts/prepare.ts', PREPARE);
  put('apps/web/server.ts', SERVER);
  put('apps/web/worker.ts', WORKER);
  put('apps/web/node_modules/.bin/astro', ASTRO, 0o755);
  put('bin/npx', NPX, 0o755);
  const port = await freePort();
  const runs = new Map<Run, Promise<unknown>>();

  async function endRuns(): Promise<void> {
    for (const run of runs.keys()) run.kill('SIGTERM');
    await Promise.all(runs.values());
  }

  function run(command: string, { env, through = [], uid }: Parameters<StandInCheckout['run']>[1] = {}): Run {
    const [program = '', ...args] = [...through, process.execPath, 'packages/local-stack/run.mjs', command];
    const { NODE_OPTIONS, VITEST, ...usual } = process.env;
    const child = spawn(program, args, {
      cwd: root,
      stdio: ['ignore', 'pipe', 'pipe'],
      env: { ...usual, PORT: String(port), PATH: `${root}/bin:${usual.PATH}`, ...env },
      ...(uid === undefined ? {} : { uid, gid: uid }),
    });
    let said = '';
    for (const stream of [child.stdout, child.stderr]) {
      stream.on('data', (bytes) => {
        said += bytes;
      });
    }
    const ended = new Promise<number | NodeJS.Signals | null>((resolve) => {
      child.once('close', (code, signal) => resolve(code ?? signal));
    });
    let isOver = false;
    void ended.then(() => {
      isOver = true;
      runs.delete(started);
    });
    const started: Run = {
      pid: child.pid ?? 0,
      output: () => said,
      ended,
      kill: (signal) => child.kill(signal),
      until: async (text) => {
        while (!said.includes(text)) {
          if (isOver) throw new Error(`it ended without saying "${text}":\n${said}`);
          await sleep(50);
        }
      },
    };
    runs.set(started, ended);
    return started;
  }

  function processes(part = ''): number[] {
    const named = readdirSync('/proc')
      .filter((name) => /^\d+$/.test(name))
      .filter((pid) => {
        try {
          const line = readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ');
          const isHere = line.includes(root) || line.includes('packages/local-stack/run.mjs');
          return (
            isHere &&
            line.includes(part) &&
            readFileSync(`/proc/${pid}/environ`, 'utf8').includes(`${root}/bin:`)
          );
        } catch {
          return false;
        }
      })
      .map(Number);
    const data = path.join(root, '.local/pg/data');
    const servers = part === '' && existsSync(data) ? serversIn(data) : [];
    return [...new Set([...named, ...servers])];
  }

  return {
    root,
    port,
    run,
    processes,
    endRuns,
    remove: () => rmSync(root, { recursive: true, force: true }),
  };
}
