import path from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { withClient } from './app-database.ts';
import { createStack } from './stack.ts';
import { makeStandInCheckout, type StandInCheckout } from './stand-in-checkout.ts';

// How the parts are held together: common practice, no source.

let checkout: StandInCheckout;

beforeAll(async () => {
  checkout = await makeStandInCheckout();
});

afterAll(() => checkout.remove());

const options = (signal?: AbortSignal) => ({
  root: checkout.root,
  dir: path.join(checkout.root, '.local/test'),
  port: checkout.port,
  durable: false,
  settleSeconds: 0,
  env: { ...process.env, PATH: `${checkout.root}/bin:${process.env.PATH}` },
  ...(signal ? { signal } : {}),
});

it('restarts its worker, says nothing failed, and begins with an empty database each time', async () => {
  const stack = await createStack(options());
  const before = checkout.processes('worker.ts');
  await stack.restartWorker();
  const after = checkout.processes('worker.ts');
  expect(before).toHaveLength(1);
  expect(after).toHaveLength(1);
  expect(after).not.toEqual(before);
  expect(await Promise.race([stack.failed, 'none'])).toBe('none');
  const env = (await (await fetch(`${stack.webUrl}/env`)).json()) as Record<string, string>;
  expect(env.SETTLE_SECONDS).toBe('0');
  await withClient(stack.urls.owner, (client) => client.query('create table kept (n int)'));
  await stack.close();
  expect(checkout.processes()).toEqual([]);

  const second = await createStack(options());
  const gone = withClient(second.urls.owner, (client) => client.query('select from kept'));
  await expect(gone).rejects.toMatchObject({ code: '42P01' });
  await second.close();
});

it('leaves nothing running when it is called off', async () => {
  const calledOff = new AbortController();
  const starting = createStack(options(calledOff.signal));
  setTimeout(() => calledOff.abort(), 1500);
  await expect(starting).rejects.toThrow();
  expect(checkout.processes()).toEqual([]);
});
