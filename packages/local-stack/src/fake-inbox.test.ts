import { createTransport } from 'nodemailer';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startFakeInbox } from './fake-inbox.ts';
import { type FakeMail, startFakeMail } from './fake-mail.ts';
import { createFakeSms, type FakeSms } from './fake-sms.ts';

// nodemailer is the outside source for SMTP and for reading addresses, encodings and headers.

const PHONE = '+13035550123';

let sms: FakeSms;
let mail: FakeMail;
let url: string;
let stop: (() => Promise<void>)[];

beforeEach(async () => {
  sms = createFakeSms({ accountSid: 'AC0', authToken: 't', numbers: ['+17205550100'] });
  mail = await startFakeMail();
  const inbox = await startFakeInbox({ sms, mail });
  url = inbox.url;
  stop = [inbox.close, mail.close];
});

afterEach(async () => {
  sms.close();
  for (const close of stop) await close();
});

function transport() {
  return createTransport(mail.url, { from: 'Ridgeline Flatwork <board@example.com>' });
}

const sendMail = (extra: Record<string, unknown> = {}) =>
  transport().sendMail({
    to: 'Ana Núñez <Ana@example.com>',
    subject: 'Mañana, 6 a. m.',
    text: 'See you',
    ...extra,
  });

describe('mail', () => {
  it('keeps what was sent, decoded, by address', async () => {
    await sendMail({
      bcc: 'lee@example.com',
      html: '<p>See you</p>',
      list: { unsubscribe: 'https://example.com/u?id=1' },
      icalEvent: { content: 'BEGIN:VCALENDAR\r\nEND:VCALENDAR\r\n' },
    });
    const response = await fetch(`${url}/_mail/messages?to=ANA@example.com`);
    const { messages } = (await response.json()) as { messages: unknown[] };
    expect(messages).toMatchObject([
      {
        from: '"Ridgeline Flatwork" <board@example.com>',
        to: ['ana@example.com', 'lee@example.com'],
        subject: 'Mañana, 6 a. m.',
        headers: { 'list-unsubscribe': '<https://example.com/u?id=1>' },
      },
    ]);
    expect(mail.messages('lee@example.com')).toHaveLength(1);
    expect(mail.messages('nobody@example.com')).toEqual([]);
    expect(mail.messages()[0]?.text.trim()).toBe('See you');
    expect(mail.messages()[0]?.attachments.map(({ text }) => text.slice(0, 15))).toContain('BEGIN:VCALENDAR');
  });

  // RFC 5321 4.2.1: 4yz is a refusal for now, 5yz one for good.
  it.each([451, 550])('refuses with %i once when asked to', async (code) => {
    const order = { method: 'POST', body: JSON.stringify({ refuse: { code } }) };
    expect((await fetch(`${url}/_mail/control`, order)).status).toBe(200);
    await expect(sendMail()).rejects.toMatchObject({ responseCode: code });
    await sendMail();
    expect(mail.messages()).toHaveLength(1);
    await fetch(`${url}/_mail`, { method: 'DELETE' });
    expect(mail.messages()).toEqual([]);
  });
});

describe('pages', () => {
  const page = async (path: string) => {
    const response = await fetch(url + path);
    return { status: response.status, headers: response.headers, html: await response.text() };
  };

  it('show phones and mailboxes, escaped, with links that can be followed', async () => {
    await sms.reply({ from: PHONE, body: '<script>alert(1)</script>' });
    await sendMail({ text: 'Open http://127.0.0.1:4321/n/abc?x=1&y=2.' });
    const index = await page('/');
    expect(index.html).toContain('href="/phone/%2B13035550123"');
    expect(index.html).toContain('href="/mail/ana%40example.com"');
    const phone = await page('/phone/%2B13035550123');
    expect(phone.html).not.toContain('<script>alert');
    expect(phone.html).toContain('&#60;script&#62;');
    const box = await page('/mail/ana%40example.com');
    expect(box.html).toContain('href="http://127.0.0.1:4321/n/abc?x=1&#38;y=2" rel="noreferrer"');
    expect(box.headers.get('content-security-policy')).toContain("default-src 'none'");
  });

  it('take an answer typed on the phone', async () => {
    const form = new URLSearchParams({ body: 'Yes, I can', to: '' });
    const response = await fetch(`${url}/phone/%2B13035550123`, {
      method: 'POST',
      body: form,
      redirect: 'manual',
    });
    expect(response.status).toBe(303);
    expect(response.headers.get('location')).toBe('/phone/%2B13035550123');
    expect(sms.messages(PHONE)).toMatchObject([
      { direction: 'inbound', body: 'Yes, I can', to: '+17205550100' },
    ]);
    const empty = await fetch(`${url}/phone/%2B13035550123`, { method: 'POST', body: 'body=' });
    expect(empty.status).toBe(400);
  });

  it('change their revision with every message', async () => {
    const before = (await page('/_inbox/revision')).html;
    await sms.reply({ from: PHONE, body: 'Yes' });
    expect((await page('/_inbox/revision')).html).not.toBe(before);
  });

  it('give no answer to another site or an unknown address', async () => {
    const headers = { origin: 'https://example.com' };
    const foreign = await fetch(`${url}/_inbox`, { method: 'DELETE', headers });
    expect(foreign.status).toBe(403);
    expect((await page('/nothing')).status).toBe(404);
    expect((await page('/phone/%zz')).status).toBe(400);
  });
});
