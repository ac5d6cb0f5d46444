import { type ChildProcess, spawn } from 'node:child_process';
import { createWriteStream, mkdirSync } from 'node:fs';
import path from 'node:path';
import { createInterface } from 'node:readline';
import { setTimeout as sleep } from 'node:timers/promises';
import { StackError } from './bootstrap.mjs';
import { dieWithParent } from './workspace.ts';

/** A program the stack runs, by name, with what it has said lately. */
export type Child = {
  name: string;
  pid: number | undefined;
  /** Resolves with how it ended, once it has. */
  ended: Promise<string>;
  hasEnded(): boolean;
  lastLines(): string[];
  /** Everything it wrote to its standard output, line by line. */
  onLine(listener: (line: string) => void): void;
  /** SIGTERM, then SIGKILL after `graceMs`; resolves when it has ended. */
  end(graceMs?: number): Promise<void>;
};

export type Program = {
  name: string;
  command: readonly [string, ...string[]];
  cwd: string;
  env: NodeJS.ProcessEnv;
  /** where all it says is written, anew at each start; nowhere when not given */
  logFile?: string;
  /** also shows what it says as it says it */
  echo?: boolean;
  /** writes to this process's own output, colours and all, and is not listened to */
  inherit?: boolean;
};

const KEPT_LINES = 40;

/** Starts a program that ends with this process, however this process ends. */
export function startChild({
  name,
  command,
  cwd,
  env,
  logFile,
  echo = false,
  inherit = false,
}: Program): Child {
  const [file, ...args] = command;
  const nodeOptions = [env.NODE_OPTIONS, `--import=${dieWithParent}`].filter(Boolean).join(' ');
  const child = spawn(file, args, {
    cwd,
    stdio: inherit ? ['ignore', 'inherit', 'inherit'] : ['ignore', 'pipe', 'pipe'],
    env: { ...env, NODE_OPTIONS: nodeOptions },
  });
  const listeners: ((line: string) => void)[] = [];
  const kept: string[] = [];
  if (logFile !== undefined) mkdirSync(path.dirname(logFile), { recursive: true });
  const log = logFile === undefined ? undefined : createWriteStream(logFile, { mode: 0o600 });
  for (const stream of [child.stdout, child.stderr]) {
    if (stream === null) continue;
    createInterface({ input: stream }).on('line', (line) => {
      log?.write(`${line}\n`);
      if (echo) console.log(`${name}: ${line}`);
      kept.push(line);
      if (kept.length > KEPT_LINES) kept.shift();
      if (stream === child.stdout) for (const listener of listeners) listener(line);
    });
  }
  let isOver = false;
  const ended = howItEnds(child).then((how) => {
    isOver = true;
    log?.end();
    return how;
  });
  return {
    name,
    pid: child.pid,
    ended,
    hasEnded: () => isOver,
    lastLines: () => [...kept],
    onLine: (listener) => listeners.push(listener),
    end: async (graceMs = 5000) => {
      if (isOver) return;
      child.kill('SIGTERM');
      if (await endsWithin(ended, graceMs)) return;
      child.kill('SIGKILL');
      await ended;
    },
  };
}

/** Runs a program to its end and gives the lines of its standard output. @throws StackError when it fails */
export async function runToEnd(
  program: Program,
  onStart: (child: Child) => void = () => {},
): Promise<string[]> {
  const child = startChild(program);
  const lines: string[] = [];
  child.onLine((line) => lines.push(line));
  onStart(child);
  const how = await child.ended;
  if (how !== 'exit code 0') throw new StackError(failureOf(child, how));
  return lines;
}

/** One sentence about a child that ended when it should not have, and what it said last. */
export function failureOf(child: Child, how: string): string {
  const lines = child.lastLines();
  const said = lines.length > 0 ? ` It said last:\n${lines.map((line) => `  ${line}`).join('\n')}` : '';
  return `The ${child.name} stopped unexpectedly (${how}).${said}`;
}

/** Resolves when the child says a line that begins with `start`. @throws StackError when it ends or takes too long */
export async function untilItSays(child: Child, start: string, withinMs: number): Promise<void> {
  const said = new Promise<true>((resolve) => {
    child.onLine((line) => {
      if (line.startsWith(start)) resolve(true);
    });
  });
  await untilReady(child, said, withinMs);
}

/** Resolves when `isServing` accepts the answer of the address. @throws StackError as untilItSays does */
export async function untilItAnswers(
  child: Child,
  url: string,
  isServing: (status: number) => boolean,
  withinMs: number,
): Promise<void> {
  const stopped = new AbortController();
  const answered = (async () => {
    while (!stopped.signal.aborted) {
      try {
        const timeout = AbortSignal.timeout(10_000);
        const { status } = await fetch(url, { redirect: 'manual', signal: timeout });
        if (isServing(status)) return true as const;
      } catch {
        // Not listening yet.
      }
      await sleep(100);
    }
    return undefined;
  })();
  try {
    await untilReady(child, answered, withinMs);
  } finally {
    stopped.abort();
  }
}

async function untilReady(child: Child, ready: Promise<true | undefined>, withinMs: number): Promise<void> {
  const timer = new AbortController();
  const late = sleep(withinMs, 'late', { signal: timer.signal }).catch(() => undefined);
  const ended = child.ended.then((how) => ({ how }));
  const first = await Promise.race([ready, late, ended]);
  timer.abort();
  if (typeof first === 'object') throw new StackError(failureOf(child, first.how));
  if (first === 'late') {
    const said = child.lastLines().map((line) => `  ${line}`);
    throw new StackError(
      `The ${child.name} was not ready after ${withinMs / 1000} s. It said last:\n${said.join('\n')}`,
    );
  }
}

async function endsWithin(ended: Promise<unknown>, ms: number): Promise<boolean> {
  const timer = new AbortController();
  const late = sleep(ms, 'late', { signal: timer.signal }).catch(() => undefined);
  const first = await Promise.race([ended.then(() => 'ended'), late]);
  timer.abort();
  return first === 'ended';
}

/** 'close' comes after the last line of output, but not while a grandchild holds the pipes: 'exit' is enough then. */
function howItEnds(child: ChildProcess): Promise<string> {
  return new Promise((resolve) => {
    child.once('error', (error) => resolve(error.message));
    child.once('exit', (code, signal) => {
      const how = code === null ? `signal ${signal}` : `exit code ${code}`;
      child.once('close', () => resolve(how));
      setTimeout(() => resolve(how), 1000).unref();
    });
  });
}
