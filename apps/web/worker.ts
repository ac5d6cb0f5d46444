/** Runs the background jobs: composing what has settled, and sending. `node --import tsx apps/web/worker.ts`. */

import { openDatabase } from '@strikeboard/db/client';
import { noticeStore } from '@strikeboard/db/queries/notice-store';
import { releaseDeadWorkers } from '@strikeboard/db/queue';
import { ConfigProblem, readNoticesConfig } from '@strikeboard/notices/config';
import { createMailDriver } from '@strikeboard/notices/mail-driver';
import { createSmsDriver } from '@strikeboard/notices/sms-driver';
import { noticeTasks } from '@strikeboard/notices/tasks';
import { Logger, run } from 'graphile-worker';
import { pino } from 'pino';
import { EnvironmentProblem, env } from './src/env.ts';

const CONCURRENT_JOBS = 8;
/** A change is told within a second of its settling even where a notification was missed. */
const POLL_MS = 1_000;

async function work(): Promise<void> {
  const { DATABASE_URL, LOG_LEVEL } = env();
  const config = readNoticesConfig(process.env);
  const log = pino({ level: LOG_LEVEL, base: { part: 'worker' } });
  const db = openDatabase(DATABASE_URL, { max: CONCURRENT_JOBS + 4 });
  await releaseDeadWorkers(db);
  const runner = await run({
    pgPool: db.pool,
    concurrency: CONCURRENT_JOBS,
    pollInterval: POLL_MS,
    noHandleSignals: true,
    taskList: noticeTasks({
      store: noticeStore(db),
      sms: createSmsDriver(config),
      mail: createMailDriver(config),
      config,
      logger: log,
      now: Date.now,
    }),
    // The queue's own lines name jobs by id; their payloads hold ids only, and its debug lines are left out.
    logger: new Logger(() => (level, message) => {
      if (level === 'error') log.error({ from: 'queue' }, message);
      else if (level === 'warning') log.warn({ from: 'queue' }, message);
    }),
  });
  const stop = (): void => {
    void runner
      .stop()
      .then(() => db.close())
      .then(() => process.exit(0));
  };
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);
  console.log('worker ready');
  await runner.promise;
}

try {
  await work();
} catch (error) {
  const isSetting = error instanceof EnvironmentProblem || error instanceof ConfigProblem;
  console.error(isSetting ? error.message : error);
  process.exit(1);
}
