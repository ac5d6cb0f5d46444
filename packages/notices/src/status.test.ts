import type { NoticeState } from '@strikeboard/domain/vocabulary';
import { describe, expect, it } from 'vitest';
import { deliveryProblem } from './delivery-problem.ts';
import type { NoticeProgress } from './ports.ts';
import { afterReport, afterSending, MAX_ATTEMPTS, readReport, statusUrl } from './status.ts';
import { COMPANY_ID, NOTICE_ID } from './testing.ts';
import { deliveryProblemKinds } from './words/words.ts';

const SID = 'SM00000000000000000000000000000001';
const OTHER_SID = 'SM00000000000000000000000000000002';

const at = (state: NoticeState, providerId: string | null = SID): NoticeProgress => ({
  state,
  providerId,
  errorCode: null,
  error: null,
});

/** The state after reports in this order. */
function after(start: NoticeProgress, reports: readonly ('sent' | 'delivered' | 'failed')[]): NoticeState {
  return reports.reduce(
    (current, state) =>
      afterReport(current, { providerId: SID, state, errorCode: state === 'failed' ? '30003' : null }) ??
      current,
    start,
  ).state;
}

describe('reading a report', () => {
  // The provider's message statuses and callback fields: its documentation of the Messages resource (published).
  it.each([
    ['accepted', 'sent'],
    ['scheduled', 'sent'],
    ['queued', 'sent'],
    ['sending', 'sent'],
    ['sent', 'sent'],
    ['delivered', 'delivered'],
    ['read', 'delivered'],
    ['undelivered', 'failed'],
    ['failed', 'failed'],
    ['canceled', 'failed'],
    ['received', null],
    ['something-new', null],
  ])('%s is %s', (status, state) => {
    const report = readReport(new URLSearchParams(), { MessageSid: SID, MessageStatus: status });
    expect(report).toEqual({ providerId: SID, notice: null, state, errorCode: null });
  });

  it('knows the notice from its address', () => {
    const key = { companyId: COMPANY_ID, noticeId: NOTICE_ID };
    const url = new URL(statusUrl('https://board.example.com', key));
    expect(url.pathname).toBe('/api/sms/status');
    const form = { MessageSid: SID, MessageStatus: 'undelivered', ErrorCode: '30003' };
    expect(readReport(url.searchParams, form)).toEqual({
      providerId: SID,
      notice: key,
      state: 'failed',
      errorCode: '30003',
    });
    expect(readReport(new URLSearchParams({ company: 'x', notice: '1' }), form)?.notice).toBeNull();
  });

  it.each<Record<string, string>>([{}, { MessageSid: SID }, { MessageStatus: 'sent' }])(
    'is refused without id and status: %o',
    (form) => {
      expect(readReport(new URLSearchParams(), form)).toBeNull();
    },
  );
});

describe('reports in any order', () => {
  // Callbacks are not ordered: provider's documentation (published).
  it.each([
    [['sent', 'delivered'], 'delivered'],
    [['delivered', 'sent'], 'delivered'],
    [['delivered', 'failed', 'sent'], 'delivered'],
    [['sent', 'failed'], 'failed'],
    [['failed', 'sent'], 'failed'],
    [['failed', 'delivered'], 'delivered'],
    [['sent', 'sent'], 'sent'],
  ] as const)('%o end as %s', (reports, state) => {
    for (const start of ['sending', 'sent', 'unsure', 'queued'] as const) {
      expect(after(at(start, start === 'sent' ? SID : null), reports), start).toBe(state);
    }
  });

  it('settle a notice whose sending was cut off', () => {
    expect(afterReport(at('unsure', null), { providerId: SID, state: 'sent', errorCode: null })).toEqual(
      at('sent'),
    );
  });

  it('of an attempt taken for lost count only when it arrived', () => {
    const report = (state: 'sent' | 'failed' | 'delivered') => ({
      providerId: OTHER_SID,
      state,
      errorCode: null,
    });
    expect(afterReport(at('sent'), report('failed'))).toBeNull();
    expect(afterReport(at('sent'), report('sent'))).toBeNull();
    expect(afterReport(at('sent'), report('delivered'))).toEqual(at('delivered', OTHER_SID));
  });

  it('keep the error', () => {
    expect(afterReport(at('sent'), { providerId: SID, state: 'failed', errorCode: '30006' })).toEqual({
      state: 'failed',
      providerId: SID,
      errorCode: '30006',
      error: 'The number is not a mobile phone, so no text can reach it.',
    });
  });
});

describe('after an attempt', () => {
  const accepted = { outcome: 'accepted', providerId: SID } as const;

  it('accepted is sent, unless a report came first', () => {
    expect(afterSending(at('sending', null), accepted, 1)).toEqual(at('sent'));
    expect(afterSending(at('unsure', null), accepted, 1)).toEqual(at('sent'));
    expect(afterSending(at('delivered'), accepted, 1)).toBeNull();
    expect(afterSending(at('failed'), accepted, 1)).toBeNull();
  });

  it.each([
    ['refused', '21614', 1, 'failed'],
    ['unsure', 'ECONNRESET', 1, 'unsure'],
    ['retry', '20429', 1, 'queued'],
    ['retry', '20429', MAX_ATTEMPTS - 1, 'queued'],
    ['retry', '20429', MAX_ATTEMPTS, 'failed'],
  ] as const)('%s %s at attempt %i is %s', (outcome, code, attempts, state) => {
    const progress = afterSending(at('sending', null), { outcome, code }, attempts);
    expect(progress).toMatchObject({ state, providerId: null, errorCode: code });
    expect(progress?.error).toMatch(/\.$/);
  });

  it('a failure changes nothing once a report has said that it was sent', () => {
    expect(afterSending(at('sent'), { outcome: 'retry', code: 'http-500' }, 1)).toBeNull();
    expect(afterSending(at('delivered'), { outcome: 'unsure', code: 'ECONNRESET' }, 1)).toBeNull();
  });
});

describe('why a notice has not arrived', () => {
  // Codes: the provider's dictionary (from memory); RFC 5321 section 4.2.3, RFC 4954 section 6 (published).
  it.each([
    ['failed', '21211', 'The number or address does not exist or takes no messages.'],
    ['failed', '550', 'The number or address does not exist or takes no messages.'],
    ['failed', '21610', 'This person has said STOP. Call them.'],
    ['failed', 'said-stop', 'This person has said STOP. Call them.'],
    ['failed', 'superseded', 'A newer message took its place before it was sent.'],
    ['failed', 'ECONNREFUSED', 'The service could not be reached for over an hour, so it was not sent.'],
    ['failed', '99999', 'It was refused.'],
    ['queued', 'ECONNREFUSED', 'The service was busy or could not be reached; it is being tried again.'],
    ['queued', '535', 'The account or the number that texts come from is not set up rightly.'],
    [
      'unsure',
      'interrupted',
      'Sending was interrupted. It may or may not have arrived: ask before sending it again.',
    ],
    [
      'unsure',
      'ECONNRESET',
      'The service did not answer. It may or may not have arrived: ask before sending it again.',
    ],
  ] as const)('%s %s', (state, errorCode, sentence) => {
    expect(deliveryProblem({ state, errorCode }, 'en')).toBe(sentence);
  });

  it('is said in Spanish too', () => {
    expect(deliveryProblem({ state: 'failed', errorCode: '21610' }, 'es')).toBe(
      'Esta persona mandó STOP. Llámele.',
    );
    expect(deliveryProblem({ state: 'sent', errorCode: null }, 'es')).toBeNull();
    expect(new Set(deliveryProblemKinds).size).toBe(deliveryProblemKinds.length);
  });
});
