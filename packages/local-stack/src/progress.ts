import { StackError } from './bootstrap.mjs';

/** Where progress goes: one finished line at a time, without a line end. */
export type Say = (line: string) => void;

/** Runs a step and says what it is, that it still goes on every five seconds, and how long it took. */
export async function step<T>(say: Say, title: string, work: () => Promise<T>): Promise<T> {
  const startedMs = performance.now();
  const seconds = () => ((performance.now() - startedMs) / 1000).toFixed(1);
  say(`${title} …`);
  const heartbeat = setInterval(() => say(`  … still at it after ${seconds()} s`), 5000);
  try {
    const result = await work();
    say(`  done in ${seconds()} s`);
    return result;
  } finally {
    clearInterval(heartbeat);
  }
}

/** Tells a person why a command stopped: one sentence for what they can act on, the stack for a bug. */
export function reportFailure(error: unknown): void {
  console.error(error instanceof StackError ? `\n${error.message}` : error);
}
