import type { IncomingMessage } from 'node:http';
import twilio from 'twilio';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { startFakeInbox } from './fake-inbox.ts';
import { startFakeMail } from './fake-mail.ts';
import { createFakeSms } from './fake-sms.ts';
import { listen, pathOf, readBody } from './http.ts';
import type { SmsMessage } from './sms-types.ts';

// The provider's own SDK is the outside source: it sends, reads the answers, and checks the signatures.

const ACCOUNT = `AC${'0a'.repeat(16)}`;
const TOKEN = 'token-of-the-fake-provider';
const FROM = '+17205550100';
const TO = '+13035550123';

type Hook = { path: string; form: Record<string, string>; isSigned: boolean };

let hooks: Hook[];
let hookAnswer: { status: number; body: string };
let stop: (() => Promise<void>)[];
let inboxUrl: string;
let appUrl: string;

beforeEach(async () => {
  hooks = [];
  hookAnswer = { status: 200, body: '<Response/>' };
  const app = await listen(async (request, response) => {
    const form = Object.fromEntries(new URLSearchParams(await readBody(request)));
    hooks.push({ path: pathOf(request).pathname, form, isSigned: isSigned(request, form) });
    response.writeHead(hookAnswer.status, { 'content-type': 'text/xml' }).end(hookAnswer.body);
  }, 0);
  appUrl = app.url;
  const sms = createFakeSms({
    accountSid: ACCOUNT,
    authToken: TOKEN,
    numbers: [FROM],
    inboundUrl: `${app.url}/inbound?from=fake`,
    callbackDelayMs: 0,
  });
  const mail = await startFakeMail();
  const inbox = await startFakeInbox({ sms, mail });
  inboxUrl = inbox.url;
  stop = [inbox.close, app.close, mail.close, async () => sms.close()];
});

afterEach(async () => {
  for (const close of stop) await close();
});

function isSigned(request: IncomingMessage, form: Record<string, string>): boolean {
  const signature = String(request.headers['x-twilio-signature']);
  return twilio.validateRequest(TOKEN, signature, `${appUrl}${request.url}`, form);
}

function clientWith(token = TOKEN) {
  const inner = new twilio.RequestClient({ timeout: 5000 });
  return twilio(ACCOUNT, token, {
    httpClient: {
      request: (options: Parameters<typeof inner.request>[0]) =>
        inner.request({ ...options, uri: inboxUrl + new URL(String(options.uri)).pathname }),
    } as typeof inner,
  });
}

const send = (extra: Partial<{ to: string; from: string; body: string; statusCallback: string }> = {}) =>
  clientWith().messages.create({ to: TO, from: FROM, body: 'Pour at 7', ...extra });

type Answer = { messages: SmsMessage[]; message: string; answered: number | null };

const ask = async (path: string, method = 'GET', body?: unknown) => {
  const response = await fetch(inboxUrl + path, {
    method,
    body: body === undefined ? null : JSON.stringify(body),
  });
  const text = await response.text();
  return { status: response.status, value: (text === '' ? {} : JSON.parse(text)) as Answer };
};

describe('sending', () => {
  it('answers as the SDK expects, and reports queued, sent and delivered with right signatures', async () => {
    const sent = await send({ statusCallback: `${appUrl}/status?notice=1` });
    expect(sent).toMatchObject({ to: TO, from: FROM, status: 'queued', numSegments: '1', errorCode: null });
    expect(sent.sid).toMatch(/^SM[0-9a-f]{32}$/);
    expect(Number.isNaN(sent.dateCreated.getTime())).toBe(false);
    await vi.waitFor(() => expect(hooks).toHaveLength(3));
    expect(hooks.map(({ form }) => form.MessageStatus)).toEqual(['queued', 'sent', 'delivered']);
    expect(hooks.every(({ isSigned, form }) => isSigned && form.MessageSid === sent.sid)).toBe(true);
    expect((await clientWith().messages(sent.sid).fetch()).status).toBe('delivered');
    expect((await clientWith().messages.list({ to: TO })).map(({ sid }) => sid)).toEqual([sent.sid]);
  });

  // Error codes are those of the provider's documentation.
  it.each([
    ['a number with too few digits', { to: '+1303555' }, 21211],
    ['a number with an impossible area code', { to: '+10035550123' }, 21211],
    ['a number not in E.164', { to: '303-555-0123' }, 21211],
    ['a sender of another account', { from: '+13035550199' }, 21606],
    ['its own number', { to: FROM }, 21266],
    ['no words', { body: '' }, 21602],
    ['more than 1600 characters', { body: 'a'.repeat(1601) }, 21617],
  ])('refuses %s', async (_what, extra, code) => {
    await expect(send(extra)).rejects.toMatchObject({ status: 400, code });
    expect((await ask('/_inbox/messages')).value).toEqual({ messages: [] });
  });

  it('refuses a wrong token with 20003', async () => {
    const attempt = clientWith('wrong').messages.create({ to: TO, from: FROM, body: 'x' });
    await expect(attempt).rejects.toMatchObject({ status: 401, code: 20003 });
  });
});

describe('control', () => {
  it('refuses with a chosen code as often as asked', async () => {
    await ask('/_control', 'POST', { refuse: { code: 20429, times: 2 } });
    await expect(send()).rejects.toMatchObject({ status: 429, code: 20429 });
    await expect(send()).rejects.toMatchObject({ status: 429, code: 20429 });
    await expect(send()).resolves.toMatchObject({ status: 'queued' });
  });

  it('lets a text end undelivered, with its code in the callback', async () => {
    await ask('/_control', 'POST', { undelivered: { code: 30003 } });
    await send({ statusCallback: `${appUrl}/status` });
    await vi.waitFor(() => expect(hooks).toHaveLength(3));
    expect(hooks.at(-1)?.form).toMatchObject({ MessageStatus: 'undelivered', ErrorCode: '30003' });
  });

  it('takes a text and loses the answer', async () => {
    await ask('/_control', 'POST', { loseAnswers: 1 });
    await expect(send()).rejects.toThrow();
    expect((await ask('/_inbox/messages?to=%2B13035550123')).value.messages).toHaveLength(1);
  });

  it('answers late', async () => {
    await ask('/_control', 'POST', { answerDelayMs: 120 });
    const startedMs = performance.now();
    await send();
    expect(performance.now() - startedMs).toBeGreaterThan(100);
    await ask('/_control', 'POST', { reset: true });
    expect((await ask('/_control', 'POST', {})).value).toMatchObject({ answerDelayMs: 0 });
  });

  it('names what is wrong with an order it does not know', async () => {
    const { status, value } = await ask('/_control', 'POST', { refuse: { code: 'busy' } });
    expect(status).toBe(400);
    expect(value.message).toMatch(/^refuse\.code: /);
    expect((await ask('/_control', 'POST', { fail: 1 })).status).toBe(400);
  });
});

describe('a person answers', () => {
  it('posts the text with a right signature and shows what the application answers', async () => {
    await send();
    hookAnswer.body = '<Response><Message>Thanks &amp; see you</Message></Response>';
    const { value } = await ask('/_inbox/reply', 'POST', { from: TO, body: 'Yes' });
    expect(value).toMatchObject({ answered: 200, message: { to: FROM, direction: 'inbound' } });
    expect(hooks).toMatchObject([
      { path: '/inbound', isSigned: true, form: { From: TO, To: FROM, Body: 'Yes' } },
    ]);
    const { messages } = (await ask('/_inbox/messages?to=+13035550123')).value;
    expect(messages.map(({ body }) => body)).toEqual(['Pour at 7', 'Yes', 'Thanks & see you']);
  });

  it('STOP blocks the number until START', async () => {
    await ask('/_inbox/reply', 'POST', { from: TO, body: ' stop ' });
    expect(hooks).toHaveLength(1);
    await expect(send()).rejects.toMatchObject({ code: 21610 });
    await ask('/_inbox/reply', 'POST', { from: TO, body: 'Start' });
    await expect(send()).resolves.toMatchObject({ status: 'queued' });
  });

  it('says so when the application cannot be reached', async () => {
    await ask('/_control', 'POST', { inboundUrl: 'http://127.0.0.1:9/inbound' });
    const { value } = await ask('/_inbox/reply', 'POST', { from: TO, body: 'Yes' });
    expect(value.answered).toBeNull();
  });

  it('forgets on request', async () => {
    await send();
    expect((await ask('/_inbox', 'DELETE')).status).toBe(204);
    expect((await ask('/_inbox/messages')).value).toEqual({ messages: [] });
  });
});
