import { type AddressInfo, createServer, type Server, type Socket } from 'node:net';
import { afterEach, describe, expect, it } from 'vitest';
import { createMailDriver } from './mail-driver.ts';
import { mailHtml } from './message.ts';

// The dialogue: RFC 5321 (published).
const link = 'https://board.example.com/l/abc_-1';
const body = `Hola, Ana:\n\nDía: martes 8 de diciembre\nConcreto: 32 yd³\n\nDiga sí o no aquí: ${link}`;
const message = {
  id: '01936f2a-0000-7000-8000-000000000004',
  to: 'ana@example.com',
  subject: 'martes 8 de diciembre, 6:30: Elm St garage',
  text: body,
  html: mailHtml({ body, link, language: 'es' }),
};

let server: Server | undefined;
const sockets = new Set<Socket>();

afterEach(() => {
  for (const socket of sockets) socket.destroy();
  sockets.clear();
  server?.close();
  server = undefined;
});

type Step = 'greeting' | 'EHLO' | 'MAIL' | 'RCPT' | 'DATA' | 'message';

/** A mail server on loopback that takes everything, but for what `answers` says: a reply, or `null` to hang up. */
async function mailServer(answers: Partial<Record<Step, string | null>> = {}) {
  const received: string[] = [];
  const usual: Record<Step, string> = {
    greeting: '220 ready',
    EHLO: '250 fine',
    MAIL: '250 fine',
    RCPT: '250 fine',
    DATA: '354 go on',
    message: '250 taken',
  };
  const started = createServer((socket) => {
    sockets.add(socket);
    const say = (step: Step) => {
      const answer = step in answers ? answers[step] : usual[step];
      if (answer === null) socket.destroy();
      else if (answer !== '') socket.write(`${answer}\r\n`);
    };
    say('greeting');
    let pending = '';
    let isData = false;
    socket.on('error', () => {});
    socket.on('data', (chunk: Buffer) => {
      pending += chunk.toString('utf8');
      for (;;) {
        const end = pending.indexOf(isData ? '\r\n.\r\n' : '\r\n');
        if (end < 0) return;
        const part = pending.slice(0, end);
        pending = pending.slice(end + (isData ? 5 : 2));
        received.push(part);
        if (isData) {
          isData = false;
          say('message');
        } else if (part.startsWith('DATA')) {
          isData = (answers.DATA ?? usual.DATA).startsWith('3');
          say('DATA');
        } else if (part.startsWith('QUIT')) socket.end('221 bye\r\n');
        else say(part.startsWith('MAIL') ? 'MAIL' : part.startsWith('RCPT') ? 'RCPT' : 'EHLO');
      }
    });
  });
  server = started;
  await new Promise<void>((resolve) => started.listen(0, '127.0.0.1', resolve));
  return { smtpUrl: `smtp://127.0.0.1:${(started.address() as AddressInfo).port}`, received };
}

function driverOf(smtpUrl: string, timeoutMs = 2_000) {
  const config = {
    smtpUrl,
    mailFrom: 'Strikeboard <board@example.com>',
    appOrigin: 'https://board.example.com',
  };
  return createMailDriver(config, { timeoutMs });
}

describe('sending through the mailer', () => {
  it('hands over both parts, whom it is from and to, and an id of its own', async () => {
    const { smtpUrl, received } = await mailServer();
    const messageId = `<${message.id}@board.example.com>`;
    expect(await driverOf(smtpUrl).send(message)).toEqual({ outcome: 'accepted', providerId: messageId });
    expect(received).toContain('MAIL FROM:<board@example.com>');
    expect(received).toContain('RCPT TO:<ana@example.com>');
    const sent = received.find((part) => part.includes('Message-ID:')) ?? '';
    expect(sent).toContain(`Message-ID: ${messageId}`);
    expect(sent).toContain('Auto-Submitted: auto-generated');
    expect(sent).toContain('Content-Type: text/plain; charset=utf-8');
    // RFC 2045 section 6.7: "Día" in UTF-8 as quoted-printable.
    expect(sent).toContain('D=C3=ADa: martes 8 de diciembre');
    expect(sent).toContain('Content-Type: text/html; charset=utf-8');
  });

  it.each([
    ['RCPT', '550 5.1.1 no such user', 'refused', '550'],
    ['RCPT', '451 4.7.1 greylisted', 'retry', '451'],
    ['MAIL', '552 too large', 'refused', '552'],
    ['DATA', '451 busy', 'retry', '451'],
    ['message', '554 rejected', 'refused', '554'],
    ['message', '452 full', 'retry', '452'],
    ['greeting', '421 too busy', 'retry', '421'],
    ['greeting', '554 not you', 'retry', '554'],
  ] as const)('sorts %s answered with %s as %s', async (step, reply, outcome, code) => {
    const { smtpUrl } = await mailServer({ [step]: reply });
    expect(await driverOf(smtpUrl).send(message)).toEqual({ outcome, code });
  });

  it('tries again later when the server hangs up before the message', async () => {
    for (const step of ['greeting', 'EHLO'] as const) {
      const { smtpUrl } = await mailServer({ [step]: null });
      expect(await driverOf(smtpUrl).send(message), step).toMatchObject({ outcome: 'retry' });
      server?.close();
    }
  });

  it('is unsure when the server hangs up after the message', async () => {
    const { smtpUrl, received } = await mailServer({ message: null });
    expect(await driverOf(smtpUrl).send(message)).toMatchObject({ outcome: 'unsure' });
    expect(received.some((part) => part.includes('Message-ID:'))).toBe(true);
  });

  it('is unsure when the server says nothing after the message', async () => {
    const { smtpUrl } = await mailServer({ message: '' });
    expect(await driverOf(smtpUrl, 300).send(message)).toEqual({ outcome: 'unsure', code: 'ETIMEDOUT' });
  });

  it('tries again later when the server says nothing at all, or nothing listens', async () => {
    const { smtpUrl } = await mailServer({ greeting: '' });
    expect(await driverOf(smtpUrl, 300).send(message)).toEqual({ outcome: 'retry', code: 'ETIMEDOUT' });
    for (const socket of sockets) socket.destroy();
    await new Promise((resolve) => server?.close(resolve));
    expect(await driverOf(smtpUrl).send(message)).toMatchObject({ outcome: 'retry' });
  });

  it('cannot be given a second recipient or header by its texts', async () => {
    const { smtpUrl, received } = await mailServer();
    await driverOf(smtpUrl).send({ ...message, subject: 'A\r\nBcc: x@example.com' });
    expect(received.filter((part) => part.startsWith('RCPT'))).toEqual(['RCPT TO:<ana@example.com>']);
    expect(received.join('\n')).not.toMatch(/^Bcc:/m);
  });
});

describe('the formatted part', () => {
  it('escapes what was typed and links the link', () => {
    const html = mailHtml({ body: `A & B <Concrete>\n"x"\n\nHere: ${link}`, link, language: 'en' });
    expect(html).toContain('<html lang="en">');
    expect(html).toContain('<p>A &amp; B &lt;Concrete&gt;<br>\n&quot;x&quot;</p>');
    expect(html).toContain(`<p>Here: <a href="${link}">${link}</a></p>`);
  });
});
