import type { NoticeState } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { deliveryProblem } from './delivery-problem.ts';
import type { NoticeKey, NoticeProgress, NoticeProgressStore } from './ports.ts';
import type { SendResult } from './send-result.ts';

/** Attempts at sending, with the queue's growing pauses about an hour and a quarter, before a message is given up. */
export const MAX_ATTEMPTS = 8;

/**
 * The provider's words for what became of a text, by our states: `sent` means that the provider has taken it. Source:
 * the provider's documentation of its Messages resource (published).
 */
const STATES: Readonly<Record<string, 'sent' | 'delivered' | 'failed'>> = {
  accepted: 'sent',
  scheduled: 'sent',
  queued: 'sent',
  sending: 'sent',
  sent: 'sent',
  delivered: 'delivered',
  read: 'delivered',
  undelivered: 'failed',
  failed: 'failed',
  canceled: 'failed',
};

/** What the provider reported of one text. */
export interface DeliveryReport {
  providerId: string;
  /** The notice, where the report's address named it. */
  notice: NoticeKey | null;
  /** null: a word that says nothing of delivery. */
  state: 'sent' | 'delivered' | 'failed' | null;
  errorCode: string | null;
}

/** Where the provider reports on a notice. It names the notice, so that a report settles one whose sending was cut off. */
export function statusUrl(appOrigin: string, { companyId, noticeId }: NoticeKey): string {
  return `${appOrigin}/api/sms/status?company=${companyId}&notice=${noticeId}`;
}

const keySchema = z.object({ companyId: z.uuid(), noticeId: z.uuid() });

/**
 * Reads a report that the provider has posted.
 * @param query of the address that was posted to
 * @param form the posted form
 * @returns null: not a report (no message id or no status)
 */
export function readReport(
  query: URLSearchParams,
  form: Readonly<Record<string, string>>,
): DeliveryReport | null {
  const providerId = form.MessageSid ?? form.SmsSid;
  const status = form.MessageStatus ?? form.SmsStatus;
  if (!providerId || !status) return null;
  const key = keySchema.safeParse({ companyId: query.get('company'), noticeId: query.get('notice') });
  return {
    providerId,
    notice: key.success ? key.data : null,
    state: STATES[status.toLowerCase()] ?? null,
    errorCode: form.ErrorCode || null,
  };
}

/** Records a report, in whatever order reports come. Returns the state it led to; null: no such notice, or nothing to record. */
export async function recordReport(
  store: NoticeProgressStore,
  report: DeliveryReport,
  nowMs: number,
): Promise<NoticeState | null> {
  const { state } = report;
  if (state === null) return null;
  const which = report.notice ?? { providerId: report.providerId };
  const after = await store.changeNotice({ ...which, nowMs }, (current) =>
    afterReport(current, { ...report, state }),
  );
  return after?.state ?? null;
}

/**
 * A notice after a report; null: unchanged. It never goes backwards: delivered is final, and of what failed only a later
 * `delivered` is believed.
 */
export function afterReport(
  current: NoticeProgress,
  report: Pick<DeliveryReport, 'providerId' | 'errorCode'> & { state: 'sent' | 'delivered' | 'failed' },
): NoticeProgress | null {
  const isOther = current.providerId !== null && current.providerId !== report.providerId;
  // Two texts for one notice can only come of an attempt that was taken for lost. What matters is whether one arrived.
  if (isOther && report.state !== 'delivered') return null;
  if (current.state === 'delivered') return null;
  if (report.state === 'delivered') return progress('delivered', report.providerId, null);
  if (current.state === 'failed') return null;
  if (report.state === 'failed') {
    return progress('failed', report.providerId, report.errorCode ?? 'undelivered');
  }
  const isKnown = current.state === 'sent' && current.providerId === report.providerId;
  return isKnown ? null : progress('sent', report.providerId, null);
}

/** A notice after an attempt at sending; null: unchanged, for a report came first. */
export function afterSending(
  current: NoticeProgress,
  result: SendResult,
  attempts: number,
): NoticeProgress | null {
  if (result.outcome === 'accepted') {
    // A report may have come before the provider's own answer was recorded.
    if (current.providerId === result.providerId || current.state === 'delivered') return null;
    return progress('sent', result.providerId, null);
  }
  if (current.state !== 'sending') return null;
  const { code } = result;
  switch (result.outcome) {
    case 'refused':
      return progress('failed', null, code);
    case 'unsure':
      return progress('unsure', null, code);
    case 'retry':
      return progress(attempts < MAX_ATTEMPTS ? 'queued' : 'failed', null, code);
  }
}

function progress(state: NoticeState, providerId: string | null, errorCode: string | null): NoticeProgress {
  return { state, providerId, errorCode, error: deliveryProblem({ state, errorCode }, 'en') };
}
