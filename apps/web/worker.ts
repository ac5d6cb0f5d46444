/** Tells people and sends: `node --import tsx apps/web/worker.ts`. Any number may run beside each other. */
import { openDatabase } from '@strikeboard/db/client';
import { noticeStore } from '@strikeboard/db/queries/notice-store';
import { ConfigProblem, readNoticesConfig } from '@strikeboard/notices/config';
import { createMailDriver } from '@strikeboard/notices/mail-driver';
import { createSmsDriver } from '@strikeboard/notices/sms-driver';
import { noticeTasks, TryLater } from '@strikeboard/notices/tasks';
import { Logger, run, type TaskList } from 'graphile-worker';
import { pino } from 'pino';
import { z } from 'zod';
import { describeError } from './src/lib/server/describe-error.ts';

const CONCURRENCY = 4;

const environmentSchema = z.object({
  DATABASE_URL: z.string('the address of the database as the worker role').min(1),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
});

async function work(): Promise<void> {
  const config = readNoticesConfig(process.env);
  const { DATABASE_URL, LOG_LEVEL } = environmentSchema.parse(process.env);
  const logger = pino({ level: LOG_LEVEL, base: { part: 'worker' } });
  const db = openDatabase(DATABASE_URL, { max: CONCURRENCY + 4 });
  const tasks = noticeTasks({
    store: noticeStore(db),
    sms: createSmsDriver(config),
    mail: createMailDriver(config),
    config,
    logger,
    now: () => Date.now(),
  });
  const taskList: TaskList = Object.fromEntries(
    Object.entries(tasks).map(([name, task]) => [
      name,
      async (payload: unknown) => {
        try {
          await task(payload);
        } catch (error) {
          // The queue keeps what is thrown, so nothing of a statement or a message may be in it.
          if (error instanceof TryLater) throw error;
          const described = describeError(error);
          logger.error({ task: name, error: described }, 'task failed');
          throw new Error(`Failed: ${String(described.kind)} ${String(described.code ?? '')}`.trim());
        }
      },
    ]),
  );
  const runner = await run({
    pgPool: db.pool,
    concurrency: CONCURRENCY,
    noHandleSignals: true,
    // Failures are logged above; the queue's own lines would repeat them.
    logger: new Logger(() => (level, message) => {
      if (level === 'error') logger.warn({ message: message.slice(0, 200) }, 'queue');
    }),
    taskList,
  });
  console.log('worker ready');
  let isClosing = false;
  const close = async (): Promise<void> => {
    if (isClosing) return;
    isClosing = true;
    await runner.stop().catch(() => {});
    await db.close();
    process.exit(0);
  };
  process.on('SIGTERM', () => void close());
  process.on('SIGINT', () => void close());
  await runner.promise;
}

try {
  await work();
} catch (error) {
  const sentence = error instanceof ConfigProblem || error instanceof z.ZodError ? error.message : error;
  console.error(sentence);
  process.exit(1);
}
