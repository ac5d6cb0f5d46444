import { chmodSync, existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { makeStandInCheckout, type Run, type StandInCheckout } from './stand-in-checkout.ts';

// What a start must do, say and leave behind: common practice, no source. Exit codes after a signal
// (128 and its number) are those of the POSIX shell.

let checkout: StandInCheckout;
let address: string;

beforeAll(async () => {
  checkout = await makeStandInCheckout();
  address = `http://127.0.0.1:${checkout.port}`;
});

afterEach(() => checkout.endRuns());

afterAll(async () => {
  expect(await left()).toEqual([]);
  checkout.remove();
});

const read = (file: string) => readFileSync(path.join(checkout.root, file), 'utf8');

/** What still runs in the checkout, after the time that ending may take. */
async function left(): Promise<number[]> {
  for (let i = 0; i < 160 && checkout.processes().length > 0; i++) await sleep(50);
  return checkout.processes();
}

async function serving(run: Run): Promise<void> {
  await run.until(`Strikeboard is at ${address}`);
  expect((await fetch(`${address}/healthz`)).status).toBe(200);
}

describe.sequential('npm start', () => {
  it('says in one sentence that an install failed, and installs again the next time', async () => {
    writeFileSync(path.join(checkout.root, 'fail-install'), '');
    const run = checkout.run('start');
    expect(await run.ended).toBe(1);
    expect(run.output()).toMatch(/Installing packages failed .*Nothing is lost/);
    rmSync(path.join(checkout.root, 'fail-install'));
    expect(existsSync(path.join(checkout.root, 'node_modules/.install-stamp'))).toBe(false);
  });

  it('installs with the pinned pnpm, builds, and names accounts, inbox and, last, the address', async () => {
    const run = checkout.run('start');
    await serving(run);
    expect(read('npx-calls').trim().split('\n').at(-1)).toBe(
      'CI=true --yes pnpm@10.34.9 install --frozen-lockfile',
    );
    expect(run.output()).toContain('owner@example.com  pour-early-4321  owner of Ridgeline Flatwork');
    expect(run.output().trimEnd().split('\n').at(-1)).toBe(`Strikeboard is at ${address}`);
    const inbox = /would have been sent: (\S+)/.exec(run.output())?.[1] ?? '';
    expect(await (await fetch(inbox)).text()).toContain('No text has been sent yet.');
    expect(await (await fetch(`${address}/env`)).json()).toMatchObject({
      DATABASE_URL: expect.stringMatching(/^postgres:\/\/app_web:[0-9a-f]+@127\.0\.0\.1:\d+\/strikeboard$/),
      APP_ORIGIN: address,
      AUTH_SECRET: expect.stringMatching(/^[0-9a-f]{64}$/),
      SMS_BASE_URL: inbox,
      SMS_FROM: '+17205550100',
      SMTP_URL: expect.stringMatching(/^smtp:\/\/127\.0\.0\.1:\d+$/),
      SETTLE_SECONDS: '120',
      HOST: '127.0.0.1',
      NODE_ENV: 'production',
    });
    // npm passes on the Ctrl-C that the terminal sends as well: two signals are one wish.
    run.kill('SIGINT');
    run.kill('SIGINT');
    expect(await run.ended).toBe(130);
    expect(await left()).toEqual([]);
  });

  it('starts again within ten seconds without installing or building, with services of one’s own', async () => {
    const calls = read('npx-calls');
    const startedMs = performance.now();
    const run = checkout.run('start', {
      env: {
        SMS_ACCOUNT_SID: 'AC1',
        SMS_AUTH_TOKEN: 't',
        SMS_FROM: '+13035550111',
        SMTP_URL: 'smtp://mail.example.com:587',
        DATABASE_URL: 'postgres://someone@db.example.com/theirs',
        OWNER_DATABASE_URL: 'postgres://someone@db.example.com/theirs',
      },
    });
    await serving(run);
    expect(performance.now() - startedMs).toBeLessThan(10_000);
    expect(read('npx-calls')).toBe(calls);
    expect(read('apps/web/dist/calls')).toBe('build\n');
    const env = (await (await fetch(`${address}/env`)).json()) as Record<string, string>;
    expect(env).toMatchObject({ SMS_FROM: '+13035550111', SMTP_URL: 'smtp://mail.example.com:587' });
    expect(env.SMS_BASE_URL).toBeUndefined();
    expect(env.OWNER_DATABASE_URL).toBeUndefined();
    expect(env.DATABASE_URL).toContain('@127.0.0.1:');

    const second = checkout.run('start', { env: { PORT: '1' } });
    expect(await second.ended).toBe(1);
    expect(second.output().trim()).toBe(
      `Strikeboard is already running from this folder (process ${run.pid}, port ${checkout.port}); use that one, or stop it with Ctrl-C before you start another.`,
    );
    run.kill('SIGTERM');
    expect(await run.ended).toBe(143);
    expect(await left()).toEqual([]);
  });

  it('ends at once when told to in the middle of a long step', async () => {
    const file = path.join(checkout.root, 'apps/web/scripts/prepare.ts');
    const usual = readFileSync(file);
    writeFileSync(file, 'setInterval(() => {}, 1000);');
    const run = checkout.run('start');
    await run.until('seeding the demo');
    run.kill('SIGINT');
    expect(await run.ended).toBe(130);
    writeFileSync(file, usual);
    expect(await left()).toEqual([]);
  });

  it('npm run dev serves the sources from the web app’s own folder, on the same database', async () => {
    const run = checkout.run('dev');
    await run.until(`Strikeboard is at ${address}`);
    expect(await (await fetch(address)).text()).toBe(path.join(checkout.root, 'apps/web'));
    expect(checkout.processes('worker.ts')).toHaveLength(1);
    run.kill('SIGTERM');
    expect(await run.ended).toBe(143);
    expect(await left()).toEqual([]);
  });

  it('ends everything when its parent is killed', async () => {
    // "; true" keeps the shell from handing its own process over.
    const run = checkout.run('start', { through: ['/bin/sh', '-c', '"$0" "$@"; true'] });
    await serving(run);
    expect(checkout.processes('worker.ts')).toHaveLength(1);
    run.kill('SIGKILL');
    expect(await left()).toEqual([]);
  });

  it.each(['packages/local-stack/run.mjs', 'packages/local-stack/src/start.ts'])(
    'leaves nothing behind when %s is killed',
    async (script) => {
      const run = checkout.run('start');
      await serving(run);
      for (const pid of checkout.processes(script)) process.kill(pid, 'SIGKILL');
      await run.ended;
      expect(await left()).toEqual([]);
    },
  );

  it('says which part crashed and ends the others', async () => {
    const run = checkout.run('start');
    await serving(run);
    for (const pid of checkout.processes('worker.ts')) process.kill(pid, 'SIGKILL');
    expect(await run.ended).toBe(1);
    expect(run.output()).toMatch(
      /The worker stopped unexpectedly \(signal SIGKILL\)\. It said last:\n {2}worker ready/,
    );
    expect(await left()).toEqual([]);
  });

  it('says what a preparation that fails has said', async () => {
    const file = path.join(checkout.root, 'apps/web/scripts/prepare.ts');
    const usual = readFileSync(file);
    writeFileSync(file, "console.error('no such column'); process.exit(3);");
    const run = checkout.run('start');
    expect(await run.ended).toBe(1);
    expect(run.output()).toMatch(
      /The preparation stopped unexpectedly \(exit code 3\)\. It said last:\n {2}no such column/,
    );
    writeFileSync(file, usual);
    expect(await left()).toEqual([]);
  });
});

describe('npm start refuses in one sentence', () => {
  it('a port in use', async () => {
    const other = createServer();
    await new Promise<void>((resolve) => other.listen(0, '127.0.0.1', resolve));
    const taken = (other.address() as { port: number }).port;
    const run = checkout.run('start', { env: { PORT: String(taken) } });
    expect(await run.ended).toBe(1);
    expect(run.output().trim()).toBe(
      `Port ${taken} on 127.0.0.1 is already in use; stop the program that uses it, or choose another port: PORT=${taken + 1} npm start`,
    );
    other.close();
  });

  it.each(['http', '0', '65536', '43.5'])('PORT=%s', async (port) => {
    const run = checkout.run('start', { env: { PORT: port } });
    expect(await run.ended).toBe(1);
    expect(run.output().trim()).toBe(
      `PORT is "${port}"; it must be a whole number from 1 to 65535, for example PORT=4321.`,
    );
  });

  it('a folder it cannot write to', async () => {
    // To root every folder is writable, so it is tried as the account that owns nothing.
    const uid = process.getuid?.() === 0 ? 65534 : undefined;
    const local = path.join(checkout.root, '.local');
    mkdirSync(local, { recursive: true });
    chmodSync(local, 0o555);
    const run = checkout.run('start', { uid });
    expect(await run.ended).toBe(1);
    chmodSync(local, 0o755);
    expect(run.output().trim()).toBe(
      `Strikeboard cannot write to ${checkout.root} (EACCES); copy the folder to a place where you may write, and run the command there.`,
    );
  });

  it('half of an SMS provider, or a variable of the wrong form', async () => {
    const half = checkout.run('start', { env: { SMS_FROM: '+13035550111' } });
    expect(await half.ended).toBe(1);
    expect(half.output()).toContain('Set SMS_ACCOUNT_SID, SMS_AUTH_TOKEN and SMS_FROM together');
    const wrong = checkout.run('start', { env: { SETTLE_SECONDS: 'soon' } });
    expect(await wrong.ended).toBe(1);
    expect(wrong.output()).toContain('SETTLE_SECONDS must be a whole number of seconds, such as 120.');
  });
});
