/** Jobs exist if their transaction commits, carry its company, and are run by the worker's role. */

import { asPerson, inCompany } from '@strikeboard/db/client';
import { DatabaseFailure } from '@strikeboard/db/errors';
import { addJob } from '@strikeboard/db/queries/jobs';
import { releaseDeadWorkers } from '@strikeboard/db/queue';
import { Logger, type Runner, run } from 'graphile-worker';
import { afterAll, beforeAll, expect, it, vi } from 'vitest';
import {
  act,
  type Board,
  type BoardDatabases,
  look,
  makeBoard,
  openBoardDatabases,
} from './board-fixture.ts';

let db: BoardDatabases;
let b: Board;
let runner: Runner;
const ran: { payload: unknown; atMs: number }[] = [];

beforeAll(async () => {
  db = await openBoardDatabases();
  b = await makeBoard(db, { slug: 'queueing' });
  runner = await run({
    pgPool: db.worker.pool,
    concurrency: 2,
    noHandleSignals: true,
    logger: new Logger(() => () => {}),
    taskList: {
      remember: async (payload) => {
        ran.push({ payload, atMs: performance.now() });
      },
    },
  });
});
afterAll(async () => {
  await runner.stop();
  await db.close();
});

const job = (key: string, runAtMs = Date.now()) => ({ task: 'remember', payload: { key }, key, runAtMs });
const keys = () =>
  look<{ key: string }>(b, 'select key from graphile_worker._private_jobs order by key').then((rows) =>
    rows.map(({ key }) => key),
  );
const ranWith = (key: string) => ran.filter(({ payload }) => JSON.stringify(payload).includes(key));

it('leaves no job of a transaction that is rolled back', async () => {
  const failing = act(b, async (tx) => {
    await addJob(tx, job('never'));
    throw new Error('changed my mind');
  });
  await expect(failing).rejects.toThrow('changed my mind');
  expect(await keys()).toEqual([]);
});

it('runs a committed job within a second, with the company of its transaction', async () => {
  const startMs = performance.now();
  await act(b, (tx) => addJob(tx, job('soon')));
  await vi.waitFor(() => expect(ranWith('soon')).toHaveLength(1), { timeout: 5000, interval: 10 });
  const [first] = ranWith('soon');
  expect(first?.payload).toEqual({ key: 'soon', companyId: b.companyId });
  expect((first?.atMs ?? Number.POSITIVE_INFINITY) - startMs).toBeLessThan(1000);
});

it("lets nobody name another company than the transaction's own", async () => {
  const payload = { key: 'forged', companyId: '00000000-0000-7000-8000-000000000000' };
  await act(b, (tx) => addJob(tx, { ...job('forged'), payload }));
  await vi.waitFor(() => expect(ranWith('forged')).toHaveLength(1), { timeout: 5000 });
  expect(ranWith('forged')[0]?.payload).toMatchObject({ companyId: b.companyId });
});

it('moves a job of the same key, and keeps those of two companies apart', async () => {
  const other = await makeBoard(db, { slug: 'queueing-too' });
  const laterMs = Date.now() + 3_600_000;
  await act(b, (tx) => addJob(tx, job('tell:1', laterMs)));
  await act(b, (tx) => addJob(tx, job('tell:1', laterMs + 1000)));
  await act(other, (tx) => addJob(tx, job('tell:1', laterMs)));
  expect(
    await look(
      b,
      "select key, run_at from graphile_worker._private_jobs where key like '%tell:1' order by run_at desc",
    ),
  ).toEqual([
    { key: `${b.companyId}:tell:1`, run_at: new Date(laterMs + 1000) },
    { key: `${other.companyId}:tell:1`, run_at: new Date(laterMs) },
  ]);
});

it('refuses a job without a company (42501, insufficient_privilege)', async () => {
  const before = await keys();
  const lone = asPerson(db.web, b.ownerId, (tx) => addJob(tx, job('lone')));
  await expect(lone).rejects.toThrow(DatabaseFailure);
  await expect(lone).rejects.toMatchObject({ sqlState: '42501' });
  expect(await keys()).toEqual(before);
});

it("keeps the queue's tables from the web's role", async () => {
  for (const statement of [
    'select * from graphile_worker._private_jobs',
    "select graphile_worker.add_job('remember', '{}')",
  ])
    await expect(db.web.pool.query(statement)).rejects.toMatchObject({ code: '42501' });
});

it('gives back the jobs of a worker that was killed, and leaves those that are being run', async () => {
  const laterMs = Date.now() + 3_600_000;
  for (const key of ['dead', 'alive'])
    await inCompany(db.worker, { companyId: b.companyId, personId: null }, (tx) =>
      addJob(tx, job(key, laterMs)),
    );
  const lock = (key: string, ago: string) =>
    look(
      b,
      `update graphile_worker._private_jobs set locked_at = now() - $2::interval, locked_by = 'worker-' || $1
       where key like '%:' || $1`,
      [key, ago],
    );
  await lock('dead', '10 minutes');
  await lock('alive', '10 seconds');
  expect(await releaseDeadWorkers(db.worker)).toBe(1);
  expect(
    await look(b, 'select locked_by from graphile_worker._private_jobs where locked_at is not null'),
  ).toEqual([{ locked_by: 'worker-alive' }]);
});
