import type { Channel } from '@strikeboard/domain/vocabulary';
import { pino } from 'pino';
import { describe, expect, it } from 'vitest';
import type { NoticeProgress, NoticeStore, NoticeToSend } from './ports.ts';
import type { SendResult } from './send-result.ts';
import { noticeTasks, TryLater } from './tasks.ts';
import { at, COMPANY_ID, NOTICE_ID, person, situation, VISIT_ID } from './testing.ts';

// How a message goes through the states: the promises of the port; the one gap is between the provider's taking it and
// our record of that (common practice, no source).
const SID = `SM${'1'.repeat(32)}`;
const TOKEN = 'Zk3-tokenOfTheLink_9';
const PHONE = '+13035550123';
const BODY = 'Cedar Flat: Tue Dec 8. Reply YES or NO, or tap {link}';

type Options = {
  result?: SendResult;
  channel?: Channel;
  silenced?: boolean;
  linkToken?: string | null;
  attempts?: number;
  state?: NoticeProgress['state'];
};

function setUp(options: Options = {}) {
  const channel = options.channel ?? 'sms';
  const lines: string[] = [];
  const sent: Record<string, string>[] = [];
  let attempts = options.attempts ?? 0;
  let progress: NoticeProgress = {
    state: options.state ?? 'queued',
    providerId: null,
    errorCode: null,
    error: null,
  };
  const driver = {
    send: async (message: Record<string, string>): Promise<SendResult> => {
      sent.push(message);
      return options.result ?? { outcome: 'accepted', providerId: SID };
    },
  };
  const composed: unknown[] = [];
  const store: NoticeStore = {
    composeDue: async (input, compose) => {
      composed.push(input, compose(situation([person()])));
      return { noticeIds: [NOTICE_ID] };
    },
    takeForSending: async ({ companyId, noticeId }): Promise<NoticeToSend | null> => {
      if (progress.state === 'sending') progress = { ...progress, state: 'unsure', errorCode: 'interrupted' };
      if (progress.state !== 'queued') return null;
      progress = { ...progress, state: 'sending' };
      attempts += 1;
      return {
        companyId,
        noticeId,
        channel,
        language: 'en',
        toAddress: channel === 'sms' ? PHONE : 'ana@example.com',
        subject: channel === 'sms' ? null : 'Tuesday',
        body: BODY,
        silenced: options.silenced ?? false,
        attempts,
        linkToken: options.linkToken === undefined ? TOKEN : options.linkToken,
      };
    },
    changeNotice: async (_which, decide) => {
      progress = decide(progress) ?? progress;
      return progress;
    },
  };
  const logger = pino({ level: 'trace' }, { write: (line: string) => lines.push(line) });
  const config = { appOrigin: 'https://board.example.com', quietHours: null };
  const now = () => at('2026-12-06', '12:00');
  const tasks = noticeTasks({ store, sms: driver, mail: driver, config, logger, now });
  return { tasks, sent, lines, composed, progress: () => progress };
}

const payload = { companyId: COMPANY_ID, noticeId: NOTICE_ID };

describe('telling a visit', () => {
  it('gives the store the composer', async () => {
    const { tasks, composed } = setUp();
    await tasks['tell-visit']({ companyId: COMPANY_ID, visitId: VISIT_ID });
    expect(composed[0]).toEqual({
      companyId: COMPANY_ID,
      visitId: VISIT_ID,
      nowMs: at('2026-12-06', '12:00'),
    });
    expect(composed[1]).toMatchObject({ notices: [{ toAddress: PHONE, channel: 'sms' }] });
  });

  it.each([null, {}, { companyId: COMPANY_ID }, { companyId: 'x', visitId: 'y' }])(
    'refuses a job without its ids: %o',
    async (bad) => {
      await expect(setUp().tasks['tell-visit'](bad)).rejects.toThrow();
      await expect(setUp().tasks['send-notice'](bad)).rejects.toThrow();
    },
  );
});

describe('sending a notice', () => {
  it('puts the link in its place and says where to report', async () => {
    const { tasks, sent, progress } = setUp();
    await tasks['send-notice'](payload);
    expect(sent).toEqual([
      {
        to: PHONE,
        body: `Cedar Flat: Tue Dec 8. Reply YES or NO, or tap https://board.example.com/l/${TOKEN}`,
        statusUrl: `https://board.example.com/api/sms/status?company=${COMPANY_ID}&notice=${NOTICE_ID}`,
      },
    ]);
    expect(progress()).toEqual({ state: 'sent', providerId: SID, errorCode: null, error: null });
  });

  it('sends an e-mail in both parts', async () => {
    const { tasks, sent } = setUp({ channel: 'email' });
    await tasks['send-notice'](payload);
    expect(sent[0]).toMatchObject({ id: NOTICE_ID, to: 'ana@example.com', subject: 'Tuesday' });
    expect(sent[0]?.html).toContain(`<a href="https://board.example.com/l/${TOKEN}">`);
  });

  it('twice sends once', async () => {
    const { tasks, sent, progress } = setUp();
    await tasks['send-notice'](payload);
    await tasks['send-notice'](payload);
    expect(sent).toHaveLength(1);
    expect(progress().state).toBe('sent');
  });

  it('found already sending, after a crash, sends nothing and leaves it to a person', async () => {
    const { tasks, sent, progress } = setUp({ state: 'sending' });
    await tasks['send-notice'](payload);
    expect(sent).toEqual([]);
    expect(progress()).toMatchObject({ state: 'unsure', errorCode: 'interrupted' });
  });

  it('is run again later while the service is busy, and given up in the end', async () => {
    const result: SendResult = { outcome: 'retry', code: '20429' };
    const { tasks, sent, progress } = setUp({ result });
    for (let attempt = 1; attempt < 8; attempt += 1) {
      await expect(tasks['send-notice'](payload)).rejects.toThrow(TryLater);
      expect(progress()).toMatchObject({ state: 'queued', errorCode: '20429' });
    }
    await tasks['send-notice'](payload);
    expect(progress()).toMatchObject({ state: 'failed', errorCode: '20429' });
    expect(sent).toHaveLength(8);
  });

  it.each([
    [{ outcome: 'refused', code: '21614' }, 'failed'],
    [{ outcome: 'unsure', code: 'ECONNRESET' }, 'unsure'],
  ] as const)('that ends as %o is %s and not run again', async (result, state) => {
    const { tasks, progress } = setUp({ result });
    await tasks['send-notice'](payload);
    expect(progress()).toMatchObject({ state, errorCode: result.code });
  });

  it('to a number that has said STOP meanwhile is not sent', async () => {
    const { tasks, sent, progress } = setUp({ silenced: true });
    await tasks['send-notice'](payload);
    expect(sent).toEqual([]);
    expect(progress()).toMatchObject({ state: 'failed', errorCode: 'said-stop' });
  });

  it('without its link is not sent', async () => {
    const { tasks, sent, progress } = setUp({ linkToken: null });
    await tasks['send-notice'](payload);
    expect(sent).toEqual([]);
    expect(progress()).toMatchObject({ state: 'failed', errorCode: 'no-link' });
  });

  it('logs ids and codes alone', async () => {
    const all: string[] = [];
    for (const result of [
      { outcome: 'accepted', providerId: SID },
      { outcome: 'refused', code: '21614' },
      { outcome: 'retry', code: '20429' },
    ] as const) {
      const { tasks, lines } = setUp({ result });
      await tasks['tell-visit']({ companyId: COMPANY_ID, visitId: VISIT_ID });
      await tasks['send-notice'](payload).catch((error: unknown) => all.push(String(error)));
      all.push(...lines);
    }
    const log = all.join('\n');
    expect(log).toContain(NOTICE_ID);
    expect(log).toContain('21614');
    for (const secret of [PHONE.slice(1), TOKEN, 'Cedar Flat', 'Elm St', 'Ana', 'example.com']) {
      expect(log).not.toContain(secret);
    }
  });
});
