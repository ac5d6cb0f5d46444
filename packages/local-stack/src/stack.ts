import path from 'node:path';
import type { DatabaseUrls } from './app-database.ts';
import { assertPortFree, StackError } from './bootstrap.mjs';
import { buildIfChanged } from './build.ts';
import { type Child, type Program, runToEnd, startChild, untilItAnswers, untilItSays } from './children.ts';
import { startFakeInbox } from './fake-inbox.ts';
import { type FakeMail, startFakeMail } from './fake-mail.ts';
import { createFakeSms, type FakeSms } from './fake-sms.ts';
import { createLifecycle, type Lifecycle } from './lifecycle.ts';
import { startCluster } from './postgres.ts';
import { type Say, step } from './progress.ts';
import { loadSecrets, type Secrets } from './secrets.ts';
import { FAKE_SMS_FROM, readSettings, serviceEnvironment } from './settings.ts';
import { repositoryRoot, tsxLoader } from './workspace.ts';

/** Where the web app takes texts that people send; the provider is told this address. */
export const INBOUND_SMS_PATH = '/api/sms/inbound';

const READY_WITHIN_MS = 90_000;

/** A demo account, as the seed prints it. */
export type Account = { email: string; password: string; who: string };

/** Database, fakes, worker and web server, all serving. */
export type Stack = {
  webUrl: string;
  /** pages of the fake inbox, the fakes' JSON, and the fake SMS provider */
  inboxUrl: string;
  urls: DatabaseUrls;
  adminUrl: string;
  accounts: Account[];
  fakes: { sms: FakeSms; mail: FakeMail };
  logFolder: string;
  /** Resolves with a sentence when a part has ended by itself. */
  failed: Promise<string>;
  /** Ends the worker at once, as a crash would, and starts it again. */
  restartWorker(): Promise<void>;
  /** Ends every part and nothing else. */
  close(): Promise<void>;
};

export type StackOptions = {
  /** the checkout */
  root?: string;
  /** where the database, its secrets and the logs are kept */
  dir: string;
  port: number;
  /** false, for tests: the database is made anew, need not outlive the machine's power, and is removed at the end */
  durable: boolean;
  /** `dev` serves the sources with hot reload, `built` the production build */
  mode?: 'built' | 'dev';
  /** overrides SETTLE_SECONDS */
  settleSeconds?: number;
  env?: NodeJS.ProcessEnv;
  say?: Say;
  /** Aborting ends what has been started; createStack then rejects. */
  signal?: AbortSignal;
  /** what is run instead of the usual programs */
  programs?: Partial<Record<'prepare' | 'build' | 'web' | 'worker', Program['command']>>;
};

/**
 * Starts everything that a person or a browser test needs, and resolves when it serves.
 * @throws StackError with the way out; nothing that was started is left running
 */
export async function createStack(options: StackOptions): Promise<Stack> {
  const { root = repositoryRoot, dir, port, durable, mode = 'built', say = () => {}, signal } = options;
  const env = options.env ?? process.env;
  const settings = readSettings(env);
  const lifecycle = createLifecycle();
  const endRunning = () => void lifecycle.close();
  signal?.addEventListener('abort', endRunning);
  try {
    signal?.throwIfAborted();
    await assertPortFree(port, mode === 'dev' ? 'dev' : 'start');
    const secrets = loadSecrets(path.join(dir, 'secrets.json'));
    const cluster = await step(say, 'Starting the database', () =>
      startCluster({ dir: path.join(dir, 'pg'), durable, fresh: !durable, secrets, say }),
    );
    lifecycle.onClose(() => cluster.stop());
    void cluster.ended.then(() => {
      if (lifecycle.isClosing()) return;
      lifecycle.fail(`The database stopped unexpectedly; ${cluster.home}/server.log says why.`);
    });
    signal?.throwIfAborted();

    const webUrl = `http://127.0.0.1:${port}`;
    const appOrigin = settings.APP_ORIGIN ?? webUrl;
    const fakes = await startFakes({ appOrigin, inboxPort: port + 1, secrets, lifecycle });
    const shared = serviceEnvironment({
      ...{ env, settings, secrets, port, settleSeconds: options.settleSeconds },
      ...{ inboxUrl: fakes.inboxUrl, smtpUrl: fakes.mail.url },
    });
    const commands = { ...usualPrograms(root, mode, port), ...options.programs };
    const prepareEnv = {
      ...shared,
      OWNER_DATABASE_URL: cluster.urls.owner,
      WEB_DATABASE_URL: cluster.urls.web,
    };
    const prepare = { name: 'preparation', command: commands.prepare, cwd: root, env: prepareEnv };
    const prepared = await step(say, 'Bringing the database up to date and seeding the demo', () =>
      runToEnd(prepare, lifecycle.own),
    );
    signal?.throwIfAborted();
    if (mode === 'built')
      await buildIfChanged({ root, env, say, command: commands.build, onStart: lifecycle.own });
    signal?.throwIfAborted();

    const logFolder = path.join(dir, 'logs');
    const { urls, adminUrl } = cluster;
    const services = { root, mode, webUrl, urls, commands, shared, logFolder, lifecycle };
    const { restartWorker } = await step(say, 'Starting the worker and the web server', () =>
      runServices(services),
    );
    signal?.throwIfAborted();
    const { failed, close } = lifecycle;
    const { inboxUrl, sms, mail } = fakes;
    const accounts = readAccounts(prepared);
    return {
      webUrl,
      inboxUrl,
      urls,
      adminUrl,
      accounts,
      fakes: { sms, mail },
      logFolder,
      failed,
      restartWorker,
      close,
    };
  } catch (error) {
    await lifecycle.close();
    throw error;
  } finally {
    signal?.removeEventListener('abort', endRunning);
  }
}

async function startFakes(options: {
  appOrigin: string;
  inboxPort: number;
  secrets: Secrets;
  lifecycle: Lifecycle;
}): Promise<{ sms: FakeSms; mail: FakeMail; inboxUrl: string }> {
  const { appOrigin, inboxPort, secrets, lifecycle } = options;
  const sms = createFakeSms({
    accountSid: secrets.smsAccountSid,
    authToken: secrets.smsAuthToken,
    numbers: [FAKE_SMS_FROM],
    inboundUrl: appOrigin + INBOUND_SMS_PATH,
  });
  lifecycle.onClose(async () => sms.close());
  const mail = await startFakeMail();
  lifecycle.onClose(() => mail.close());
  const inbox = await startInboxNear(inboxPort, { sms, mail });
  lifecycle.onClose(() => inbox.close());
  return { sms, mail, inboxUrl: inbox.url };
}

/** Starts worker and web server and waits until both serve. */
async function runServices(options: {
  root: string;
  mode: 'built' | 'dev';
  webUrl: string;
  urls: DatabaseUrls;
  commands: Record<'web' | 'worker', Program['command']>;
  shared: NodeJS.ProcessEnv;
  logFolder: string;
  lifecycle: Lifecycle;
}): Promise<{ restartWorker(): Promise<void> }> {
  const { root, mode, webUrl, urls, commands, shared, logFolder, lifecycle } = options;

  function start(name: string, part: { command: Program['command']; url: string; cwd: string }): Child {
    const env = {
      ...shared,
      ...(mode === 'built' ? { NODE_ENV: 'production' } : {}),
      DATABASE_URL: part.url,
    };
    const logFile = path.join(logFolder, `${name.replaceAll(' ', '-')}.log`);
    const child = startChild({
      name,
      command: part.command,
      cwd: part.cwd,
      env,
      logFile,
      echo: mode === 'dev',
    });
    lifecycle.own(child);
    return child;
  }

  async function startWorker(): Promise<Child> {
    const child = start('worker', { command: commands.worker, url: urls.worker, cwd: root });
    await untilItSays(child, 'worker ready', READY_WITHIN_MS);
    lifecycle.watch(child);
    return child;
  }

  async function startWeb(): Promise<void> {
    const cwd = mode === 'dev' ? path.join(root, 'apps/web') : root;
    const child = start('web server', { command: commands.web, url: urls.web, cwd });
    // In development the address may be no page of its own; the server is up once it answers at all.
    const isServing = (status: number) => (mode === 'dev' ? status < 500 : status === 200);
    await untilItAnswers(child, `${webUrl}/healthz`, isServing, READY_WITHIN_MS);
    lifecycle.watch(child);
  }

  let [worker] = await Promise.all([startWorker(), startWeb()]);
  return {
    restartWorker: async () => {
      await lifecycle.release(worker, 0);
      worker = await startWorker();
    },
  };
}

/** What `npm start` runs, by part. */
export function usualPrograms(root: string, mode: 'built' | 'dev', port: number) {
  const script = (file: string): Program['command'] => [process.execPath, '--import', tsxLoader, file];
  const astro = path.join(root, 'apps/web/node_modules/.bin/astro');
  const dev: Program['command'] = [astro, 'dev', '--host', '127.0.0.1', '--port', String(port)];
  return {
    prepare: script(path.join(root, 'apps/web/scripts/prepare.ts')),
    build: [astro, 'build'] satisfies Program['command'],
    worker: script(path.join(root, 'apps/web/worker.ts')),
    web: mode === 'dev' ? dev : script(path.join(root, 'apps/web/server.ts')),
  };
}

/** The port after the web server's, so that the address stays the same; any other when that is taken. */
async function startInboxNear(port: number, fakes: { sms: FakeSms; mail: FakeMail }) {
  try {
    return await startFakeInbox({ ...fakes, port: port <= 65535 ? port : 0 });
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EADDRINUSE')) throw error;
    return await startFakeInbox(fakes);
  }
}

/** Lines `account <email> <password> <who>`. @throws StackError when there is none */
function readAccounts(lines: string[]): Account[] {
  const accounts = lines.flatMap((line) => {
    const [, email, password, who] = /^account (\S+) (\S+) (.+)$/.exec(line) ?? [];
    return email && password && who ? [{ email, password, who }] : [];
  });
  if (accounts.length === 0)
    throw new StackError('The demo was prepared without any account to sign in with.');
  return accounts;
}
