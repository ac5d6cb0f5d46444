import { randomBytes, randomUUID } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { setTimeout as sleep } from 'node:timers/promises';
import { pathOf, RequestError, readBody, readJson, sendJson } from './http.ts';
import { inboundForm, messageResource, statusForm } from './sms-forms.ts';
import { signWebhook } from './sms-signature.ts';
import { countSegments, repliesInTwiml } from './sms-text.ts';
import {
  type SmsControl,
  type SmsMessage,
  type SmsReply,
  smsControlSchema,
  smsReplySchema,
} from './sms-types.ts';

/**
 * A stand-in for the SMS provider, as its SDK speaks to it: send, read one, list, status callbacks,
 * inbound texts, opt-out. Error codes, JSON and callback fields follow the provider's documentation
 * of its Messages resource (published); the wording of its opt-out answers is from memory.
 */
export type FakeSms = {
  /** Answers the request if its path is one of the fake's; false if it is not. */
  handle(request: IncomingMessage, response: ServerResponse): Promise<boolean>;
  /** All texts, oldest first; with a number, those to or from it. */
  messages(number?: string): SmsMessage[];
  /** A person answers from their phone. Resolves once the application has taken it; null: not reached. */
  reply(reply: SmsReply): Promise<{ message: SmsMessage; answered: number | null }>;
  control(change: SmsControl): void;
  clear(): void;
  /** Posts nothing more to the application. */
  close(): void;
};

const E164 = /^\+[1-9]\d{1,14}$/;
const OPT_OUT = ['STOP', 'STOPALL', 'UNSUBSCRIBE', 'CANCEL', 'END', 'QUIT'];
const OPT_IN = ['START', 'YES', 'UNSTOP'];
const STOPPED_TEXT =
  'You have successfully been unsubscribed. You will not receive any more messages from this number. Reply START to resubscribe.';
const STARTED_TEXT =
  'You have successfully been re-subscribed to messages from this number. Reply HELP for help. Reply STOP to unsubscribe.';
const HTTP_STATUS: Record<number, number> = { 20003: 401, 20404: 404, 20429: 429, 20500: 500, 20503: 503 };
const CALLBACK_TIMEOUT_MS = 15_000;

type Behaviour = Required<Pick<SmsControl, 'answerDelayMs' | 'callbackDelayMs' | 'loseAnswers'>> &
  Pick<SmsControl, 'refuse' | 'undelivered'>;

class ProviderError extends Error {
  readonly code: number;
  constructor(code: number, message: string) {
    super(message);
    this.code = code;
  }
}

/**
 * @param options.numbers the account's own numbers; a text must come from one of them
 * @param options.callbackDelayMs the usual pause before each status callback
 */
export function createFakeSms(options: {
  accountSid: string;
  authToken: string;
  numbers: [string, ...string[]];
  inboundUrl?: string;
  callbackDelayMs?: number;
}): FakeSms {
  const { accountSid, authToken, numbers } = options;
  const usual = (): Behaviour => ({
    answerDelayMs: 0,
    callbackDelayMs: options.callbackDelayMs ?? 150,
    loseAnswers: 0,
    refuse: undefined,
    undelivered: undefined,
  });
  let inboundUrl = options.inboundUrl;
  let behaviour = usual();
  let store: SmsMessage[] = [];
  const optedOut = new Set<string>();
  const closing = new AbortController();

  function add(
    part: Pick<SmsMessage, 'direction' | 'from' | 'to' | 'body' | 'status'> & Partial<SmsMessage>,
  ) {
    const now = new Date().toISOString();
    const message: SmsMessage = {
      sid: `SM${randomBytes(16).toString('hex')}`,
      errorCode: null,
      segments: countSegments(part.body),
      createdAt: now,
      updatedAt: now,
      statusCallback: null,
      callbacks: [],
      ...part,
    };
    store.push(message);
    return message;
  }

  /** Posts a signed form; once again when the application cannot be reached. */
  async function post(url: string, form: Record<string, string>): Promise<Response | null> {
    const headers = {
      'content-type': 'application/x-www-form-urlencoded; charset=UTF-8',
      'x-twilio-signature': signWebhook(authToken, url, form),
      'i-twilio-idempotency-token': randomUUID(),
    };
    for (const pauseMs of [0, 500]) {
      try {
        await sleep(pauseMs, undefined, { signal: closing.signal });
        const signal = AbortSignal.any([closing.signal, AbortSignal.timeout(CALLBACK_TIMEOUT_MS)]);
        const body = new URLSearchParams(form);
        return await fetch(url, { method: 'POST', headers, body, redirect: 'manual', signal });
      } catch {
        if (closing.signal.aborted) return null;
      }
    }
    return null;
  }

  async function report(message: SmsMessage, status: SmsMessage['status']): Promise<void> {
    message.status = status;
    message.updatedAt = new Date().toISOString();
    if (message.statusCallback === null) return;
    const response = await post(message.statusCallback, statusForm(accountSid, message));
    message.callbacks.push({ status, answered: response?.status ?? null });
  }

  async function deliver(message: SmsMessage, failure: number | undefined): Promise<void> {
    for (const status of ['queued', 'sent', failure === undefined ? 'delivered' : 'undelivered'] as const) {
      try {
        await sleep(behaviour.callbackDelayMs, undefined, { signal: closing.signal });
      } catch {
        return;
      }
      if (status === 'undelivered') message.errorCode = failure ?? null;
      await report(message, status);
    }
  }

  function accept(form: URLSearchParams): SmsMessage {
    const to = form.get('To') ?? '';
    const from = form.get('From') ?? (form.has('MessagingServiceSid') ? numbers[0] : '');
    const body = form.get('Body') ?? '';
    if (to === '') throw new ProviderError(21604, "A 'To' phone number is required.");
    if (!isPossibleNumber(to))
      throw new ProviderError(21211, `The 'To' number ${to} is not a valid phone number.`);
    if (from === '') throw new ProviderError(21603, "A 'From' phone number is required.");
    if (!E164.test(from))
      throw new ProviderError(
        21212,
        `The 'From' number ${from} is not a valid phone number, shortcode, or alphanumeric sender ID.`,
      );
    if (!numbers.includes(from)) {
      throw new ProviderError(
        21606,
        `The 'From' phone number provided (${from}) is not a number of this account.`,
      );
    }
    if (to === from) throw new ProviderError(21266, "'To' and 'From' number cannot be the same.");
    if (body === '') throw new ProviderError(21602, 'Message body is required.');
    if (body.length > 1600)
      throw new ProviderError(21617, 'The message body exceeds the 1600 character limit.');
    if (optedOut.has(`${from} ${to}`))
      throw new ProviderError(21610, 'Attempt to send to unsubscribed recipient');
    const statusCallback = form.get('StatusCallback');
    if (statusCallback !== null && !URL.canParse(statusCallback)) {
      throw new ProviderError(21609, `Invalid 'StatusCallback' URL: ${statusCallback}`);
    }
    return add({ direction: 'outbound-api', from, to, body, status: 'queued', statusCallback });
  }

  async function send(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const form = new URLSearchParams(await readBody(request));
    await sleep(behaviour.answerDelayMs);
    const refusal = takeOne(behaviour, 'refuse');
    if (refusal !== undefined) throw new ProviderError(refusal, `Refused with ${refusal}, as a test asked.`);
    const message = accept(form);
    void deliver(message, takeOne(behaviour, 'undelivered'));
    if (behaviour.loseAnswers > 0) {
      behaviour.loseAnswers -= 1;
      response.destroy();
      return;
    }
    sendJson(response, 201, messageResource(accountSid, message));
  }

  async function handleProvider(request: IncomingMessage, response: ServerResponse, url: URL): Promise<void> {
    const expected = `Basic ${Buffer.from(`${accountSid}:${authToken}`).toString('base64')}`;
    if (request.headers.authorization !== expected) throw new ProviderError(20003, 'Authenticate');
    const messagesPath = `/2010-04-01/Accounts/${accountSid}/Messages`;
    if (url.pathname === `${messagesPath}.json` && request.method === 'POST')
      return await send(request, response);
    if (url.pathname === `${messagesPath}.json` && request.method === 'GET') {
      const found = store
        .filter((message) =>
          ['To', 'From'].every((name) => isWanted(message, name, url.searchParams.get(name))),
        )
        .toReversed();
      sendJson(response, 200, {
        messages: found.map((message) => messageResource(accountSid, message)),
        page: 0,
        page_size: found.length,
        next_page_uri: null,
        uri: url.pathname,
      });
      return;
    }
    const message = store.find(({ sid }) => url.pathname === `${messagesPath}/${sid}.json`);
    if (!message || request.method !== 'GET') {
      throw new ProviderError(20404, `The requested resource ${url.pathname} was not found`);
    }
    sendJson(response, 200, messageResource(accountSid, message));
  }

  async function reply({ from, to = numbers[0], body }: SmsReply) {
    const message = add({ direction: 'inbound', from, to, body, status: 'received' });
    const word = body.trim().toUpperCase();
    const pair = `${to} ${from}`;
    if (OPT_OUT.includes(word) && !optedOut.has(pair)) {
      optedOut.add(pair);
      add({ direction: 'outbound-reply', from: to, to: from, body: STOPPED_TEXT, status: 'delivered' });
    } else if (OPT_IN.includes(word) && optedOut.delete(pair)) {
      add({ direction: 'outbound-reply', from: to, to: from, body: STARTED_TEXT, status: 'delivered' });
    }
    if (inboundUrl === undefined) return { message, answered: null };
    const answer = await post(inboundUrl, inboundForm(accountSid, message));
    message.callbacks.push({ status: 'received', answered: answer?.status ?? null });
    if (answer?.ok && !optedOut.has(pair)) {
      for (const text of repliesInTwiml(await answer.text())) {
        add({ direction: 'outbound-reply', from: to, to: from, body: text, status: 'delivered' });
      }
    }
    return { message, answered: answer?.status ?? null };
  }

  function messages(number?: string): SmsMessage[] {
    return store.filter(({ from, to }) => number === undefined || from === number || to === number);
  }

  function control({ reset, inboundUrl: newUrl, ...change }: SmsControl): void {
    if (reset) {
      behaviour = usual();
      optedOut.clear();
    }
    inboundUrl = newUrl ?? inboundUrl;
    behaviour = { ...behaviour, ...definedOnly(change) };
  }

  async function handle(request: IncomingMessage, response: ServerResponse): Promise<boolean> {
    const url = pathOf(request);
    const route = `${request.method} ${url.pathname}`;
    if (url.pathname.startsWith('/2010-04-01/')) {
      try {
        await handleProvider(request, response, url);
      } catch (error) {
        if (error instanceof ProviderError) sendProviderError(response, error);
        else if (error instanceof RequestError)
          sendProviderError(response, new ProviderError(20001, error.message));
        else throw error;
      }
      return true;
    }
    if (route === 'GET /_inbox/messages') {
      // An unencoded + in a query reads as a space.
      const number = url.searchParams.get('to')?.replace(/^ /, '+');
      sendJson(response, 200, { messages: messages(number) });
    } else if (route === 'DELETE /_inbox') {
      store = [];
      response.writeHead(204).end();
    } else if (route === 'POST /_inbox/reply') {
      sendJson(response, 200, await reply(await readJson(request, smsReplySchema)));
    } else if (route === 'POST /_control') {
      control(await readJson(request, smsControlSchema));
      sendJson(response, 200, { ...behaviour, inboundUrl, optedOut: [...optedOut] });
    } else return false;
    return true;
  }

  return {
    handle,
    messages,
    reply,
    control,
    clear: () => {
      store = [];
    },
    close: () => closing.abort(),
  };
}

/** North American numbers have ten digits after the 1, and no area or exchange code begins with 0 or 1. */
function isPossibleNumber(number: string): boolean {
  return number.startsWith('+1') ? /^\+1[2-9]\d{2}[2-9]\d{6}$/.test(number) : E164.test(number);
}

function isWanted(message: SmsMessage, name: string, wanted: string | null): boolean {
  return wanted === null || (name === 'To' ? message.to : message.from) === wanted;
}

/** The error code to fail with, counting down its times. */
function takeOne(behaviour: Behaviour, kind: 'refuse' | 'undelivered'): number | undefined {
  const planned = behaviour[kind];
  if (!planned) return undefined;
  behaviour[kind] = planned.times > 1 ? { ...planned, times: planned.times - 1 } : undefined;
  return planned.code;
}

function definedOnly(change: Omit<SmsControl, 'reset' | 'inboundUrl'>): Partial<Behaviour> {
  return Object.fromEntries(Object.entries(change).filter(([, value]) => value !== undefined));
}

function sendProviderError(response: ServerResponse, { code, message }: ProviderError): void {
  const status = HTTP_STATUS[code] ?? 400;
  sendJson(response, status, {
    code,
    message,
    more_info: `https://www.twilio.com/docs/errors/${code}`,
    status,
  });
}
