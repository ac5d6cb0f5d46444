import type { IncomingMessage, ServerResponse } from 'node:http';
import { setTimeout as sleep } from 'node:timers/promises';
import { type AddressObject, type ParsedMail, simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { z } from 'zod';
import { pathOf, readJson, sendJson } from './http.ts';

/** One e-mail, as the fake keeps it and as its JSON API gives it. */
export type Mail = {
  id: string;
  from: string;
  /** the addresses of the envelope: who it is delivered to */
  to: string[];
  subject: string;
  text: string;
  html: string | null;
  /** names in lower case */
  headers: Record<string, string>;
  attachments: { name: string; contentType: string; text: string }[];
  receivedAt: string;
};

/** How a test makes the mail server slow or unwilling. */
const controlSchema = z.strictObject({
  /** milliseconds before a message is accepted */
  answerDelayMs: z.number().min(0).max(60_000).optional(),
  /** the next messages are refused with this SMTP reply code: 4xx for now, 5xx for good */
  refuse: z.object({ code: z.int().min(400).max(599), times: z.int().min(1).default(1) }).optional(),
  /** forgets the above before the rest is applied */
  reset: z.literal(true).optional(),
});

export type MailControl = z.infer<typeof controlSchema>;

/** A stand-in for an SMTP server: takes every message and delivers none. */
export type FakeMail = {
  /** smtp://host:port */
  url: string;
  /** Answers the request if its path is one of the fake's; false if it is not. */
  handle(request: IncomingMessage, response: ServerResponse): Promise<boolean>;
  /** All mail, oldest first; with an address, what was delivered to it. */
  messages(address?: string): Mail[];
  control(change: MailControl): void;
  clear(): void;
  close(): Promise<void>;
};

class SmtpRefusal extends Error {
  readonly responseCode: number;
  constructor(responseCode: number) {
    super(`refused with ${responseCode}, as a test asked`);
    this.responseCode = responseCode;
  }
}

/** Starts the server on loopback. Port 0 takes a free one. */
export async function startFakeMail(port = 0): Promise<FakeMail> {
  let store: Mail[] = [];
  let count = 0;
  let behaviour: Pick<MailControl, 'refuse'> & { answerDelayMs: number } = { answerDelayMs: 0 };

  async function take(parsed: ParsedMail, envelopeTo: string[]): Promise<void> {
    await sleep(behaviour.answerDelayMs);
    const { refuse } = behaviour;
    if (refuse) {
      behaviour.refuse = refuse.times > 1 ? { ...refuse, times: refuse.times - 1 } : undefined;
      throw new SmtpRefusal(refuse.code);
    }
    count += 1;
    store.push({ id: String(count), ...plain(parsed), to: envelopeTo, receivedAt: new Date().toISOString() });
  }

  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    disableReverseLookup: true,
    onData(stream, session, callback) {
      const envelopeTo = session.envelope.rcptTo.map(({ address }) => address.toLowerCase());
      simpleParser(stream)
        .then((parsed) => take(parsed, envelopeTo))
        .then(
          () => callback(),
          (error: unknown) => callback(error instanceof Error ? error : new Error(String(error))),
        );
    },
  });
  // A client that goes away in the middle of a message is its own affair.
  server.on('error', () => {});
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(port, '127.0.0.1', () => resolve());
  });
  const address = server.server.address();
  if (address === null || typeof address === 'string') throw new Error('the mail server has no port');

  function messages(wanted?: string): Mail[] {
    return store.filter(({ to }) => wanted === undefined || to.includes(wanted.toLowerCase()));
  }

  function control({ reset, ...change }: MailControl): void {
    if (reset) behaviour = { answerDelayMs: 0 };
    behaviour = {
      answerDelayMs: change.answerDelayMs ?? behaviour.answerDelayMs,
      refuse: change.refuse ?? behaviour.refuse,
    };
  }

  const clear = () => {
    store = [];
  };

  async function handle(request: IncomingMessage, response: ServerResponse): Promise<boolean> {
    const url = pathOf(request);
    const route = `${request.method} ${url.pathname}`;
    if (route === 'GET /_mail/messages') {
      sendJson(response, 200, { messages: messages(url.searchParams.get('to') ?? undefined) });
    } else if (route === 'DELETE /_mail') {
      clear();
      response.writeHead(204).end();
    } else if (route === 'POST /_mail/control') {
      control(await readJson(request, controlSchema));
      sendJson(response, 200, behaviour);
    } else return false;
    return true;
  }

  return {
    url: `smtp://127.0.0.1:${address.port}`,
    handle,
    messages,
    control,
    clear,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

function plain(parsed: ParsedMail): Omit<Mail, 'id' | 'to' | 'receivedAt'> {
  return {
    from: addressText(parsed.from),
    subject: parsed.subject ?? '',
    text: parsed.text ?? '',
    html: typeof parsed.html === 'string' ? parsed.html : null,
    headers: Object.fromEntries(
      parsed.headerLines.map(({ key, line }) => [
        key.toLowerCase(),
        line
          .slice(line.indexOf(':') + 1)
          .replace(/\r?\n[ \t]+/g, ' ')
          .trim(),
      ]),
    ),
    attachments: parsed.attachments.map(({ filename, contentType, content }) => ({
      name: filename ?? '',
      contentType,
      text: content.toString('utf8'),
    })),
  };
}

function addressText(address: AddressObject | undefined): string {
  return address?.text ?? '';
}
