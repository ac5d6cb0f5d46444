import path from 'node:path';
import { watchParent } from './bootstrap.mjs';
import { reportFailure } from './progress.ts';
import { readSettings } from './settings.ts';
import { createStack, type Stack } from './stack.ts';
import { repositoryRoot } from './workspace.ts';

/** Serves until told to end: a signal, the end of the process that started this one, or a part that ends by itself. */
export async function serve(mode: 'built' | 'dev'): Promise<void> {
  const ending = new AbortController();
  const endNow = () => ending.abort();
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, endNow);
  watchParent(endNow);
  // A terminal that is gone must not keep the parts from being ended in order.
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {});
  try {
    const { port } = readSettings(process.env);
    const dir = path.join(repositoryRoot, '.local');
    const { signal } = ending;
    const stack = await createStack({ dir, port, durable: true, mode, say: console.log, signal });
    console.log(introduction(stack));
    const failure = await Promise.race([stack.failed, untilAborted(signal)]);
    console.log('\nStopping …');
    await stack.close();
    if (failure !== undefined) {
      console.error(`\n${failure}`);
      process.exitCode = 1;
    }
  } catch (error) {
    if (!ending.signal.aborted) reportFailure(error);
    process.exitCode = 1;
  }
}

/** Its last line names the address. */
function introduction({ accounts, inboxUrl, webUrl, logFolder }: Stack): string {
  const width = (pick: (account: Stack['accounts'][number]) => string) =>
    Math.max(...accounts.map((account) => pick(account).length));
  const emailWidth = width(({ email }) => email);
  const passwordWidth = width(({ password }) => password);
  return [
    '',
    'Demo accounts (e-mail, password, who):',
    ...accounts.map(
      ({ email, password, who }) =>
        `  ${email.padEnd(emailWidth)}  ${password.padEnd(passwordWidth)}  ${who}`,
    ),
    '',
    `Texts and e-mails that would have been sent: ${inboxUrl}`,
    `Logs are in ${path.relative(process.cwd(), logFolder) || '.'}; stop with Ctrl-C.`,
    `Strikeboard is at ${webUrl}`,
  ].join('\n');
}

function untilAborted(signal: AbortSignal): Promise<undefined> {
  return new Promise((resolve) => {
    if (signal.aborted) resolve(undefined);
    signal.addEventListener('abort', () => resolve(undefined));
  });
}
