import { z } from 'zod';
import { composeWith } from './compose.ts';
import type { NoticesConfig } from './config.ts';
import type { MailDriver } from './mail-driver.ts';
import { LINK_PLACE, mailHtml } from './message.ts';
import type { NoticeStore, NoticeToSend } from './ports.ts';
import type { SendResult } from './send-result.ts';
import type { SmsDriver } from './sms-driver.ts';
import { afterSending, statusUrl } from './status.ts';

/** What the tasks write to; a pino logger is one. Entries hold ids, states and codes: no text, number, address or token. */
export interface TaskLogger {
  info(fields: Record<string, unknown>, message: string): void;
  warn(fields: Record<string, unknown>, message: string): void;
}

export interface TaskDependencies {
  store: NoticeStore;
  sms: SmsDriver;
  mail: MailDriver;
  config: Pick<NoticesConfig, 'appOrigin' | 'quietHours'>;
  logger: TaskLogger;
  now: () => number;
}

/** A task as the job queue runs it: it throws to be run again later. */
export type Task = (payload: unknown) => Promise<void>;

const tellVisitSchema = z.object({ companyId: z.uuid(), visitId: z.uuid() });
const sendNoticeSchema = z.object({ companyId: z.uuid(), noticeId: z.uuid() });

/** Says to the queue that a message is to be tried again. */
export class TryLater extends Error {
  constructor(code: string) {
    super(`The message was not taken (${code}) and is to be tried again.`);
    this.name = 'TryLater';
  }
}

/** The tasks of the queue: `tell-visit` composes what has settled, `send-notice` sends one message. */
export function noticeTasks(dependencies: TaskDependencies): Record<'tell-visit' | 'send-notice', Task> {
  const { store, config, logger, now } = dependencies;
  const compose = composeWith({ quietHours: config.quietHours });
  return {
    'tell-visit': async (payload) => {
      const { companyId, visitId } = tellVisitSchema.parse(payload);
      const { noticeIds } = await store.composeDue({ companyId, visitId, nowMs: now() }, compose);
      logger.info({ companyId, visitId, noticeIds }, 'visit told');
    },

    'send-notice': async (payload) => {
      const { companyId, noticeId } = sendNoticeSchema.parse(payload);
      const notice = await store.takeForSending({ companyId, noticeId, nowMs: now() });
      if (notice === null) {
        logger.info({ companyId, noticeId }, 'notice not to be sent');
        return;
      }
      const result = await send(notice, dependencies);
      const after = await store.changeNotice({ companyId, noticeId, nowMs: now() }, (current) =>
        afterSending(current, result, notice.attempts),
      );
      const { channel, attempts } = notice;
      const outcome = result.outcome === 'accepted' ? { outcome: result.outcome } : result;
      const entry = { companyId, noticeId, channel, attempts, ...outcome, state: after?.state };
      if (result.outcome === 'accepted') logger.info(entry, 'notice sent');
      else logger.warn(entry, 'notice not sent');
      if (result.outcome === 'retry' && after?.state === 'queued') throw new TryLater(result.code);
    },
  };
}

async function send(
  notice: NoticeToSend,
  { sms, mail, config }: Pick<TaskDependencies, 'sms' | 'mail' | 'config'>,
): Promise<SendResult> {
  const { channel, noticeId, toAddress: to, language } = notice;
  if (channel === 'sms' && notice.silenced) return { outcome: 'refused', code: 'said-stop' };
  if (notice.linkToken === null && notice.body.includes(LINK_PLACE)) {
    return { outcome: 'refused', code: 'no-link' };
  }
  const link = notice.linkToken === null ? null : `${config.appOrigin}/l/${notice.linkToken}`;
  const body = link === null ? notice.body : notice.body.replaceAll(LINK_PLACE, link);
  if (channel === 'sms') return sms.send({ to, body, statusUrl: statusUrl(config.appOrigin, notice) });
  const html = mailHtml({ body, link, language });
  return mail.send({ id: noticeId, to, subject: notice.subject ?? '', text: body, html });
}
