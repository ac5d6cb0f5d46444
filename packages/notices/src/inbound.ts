import { InputProblem } from '@strikeboard/domain/problem';
import type { Language } from '@strikeboard/domain/vocabulary';
import twilio from 'twilio';
import { factsText } from './facts-text.ts';
import { toGsm7 } from './gsm-7.ts';
import type { InboundStore, OpenQuestion } from './ports.ts';
import { isCarrierWord, languageOfReply, parseReply } from './reply.ts';
import { type PlaceAndTime, wordsOf } from './words/words.ts';

/**
 * Whether a webhook comes from the provider: its signature is the base64 of HMAC-SHA1, keyed with the account's token,
 * over the full address and the posted names and values in order of the names (provider's documentation, published).
 * @param input.signature header `X-Twilio-Signature`; null: absent
 * @param input.url the public address that the provider posted to, with its query: {@link publicUrl}
 */
export function verifySignature(input: {
  authToken: string;
  signature: string | null;
  url: string;
  form: Readonly<Record<string, string>>;
}): boolean {
  const { authToken, signature, url, form } = input;
  return signature !== null && twilio.validateRequest(authToken, signature, url, { ...form });
}

/** The address under which the provider knows a webhook, whatever host or port a proxy passes on. */
export function publicUrl(appOrigin: string, url: Readonly<{ pathname: string; search: string }>): string {
  return `${appOrigin}${url.pathname}${url.search}`;
}

/** What came of a text that someone sent. */
export interface InboundResult {
  /** Answer to the provider, of type text/xml. */
  twiml: string;
  kind: 'yes' | 'no' | 'stop' | 'start' | 'help' | 'other';
  /** The visit that was answered, for the log; null: none. */
  answered: Pick<OpenQuestion, 'companyId' | 'visitId' | 'personId'> | null;
}

/**
 * Takes a text that someone sent to our number: silences or frees the number, or records the answer to what it was last
 * asked, and says so in that language. A number that has said STOP gets no reply; its YES or NO still counts.
 * @param input.form the posted form; `From` and `Body` are read
 * @throws InputProblem when `From` is missing or no number of ITU-T E.164
 */
export async function receiveText(input: {
  store: InboundStore;
  form: Readonly<Record<string, string>>;
  nowMs: number;
}): Promise<InboundResult> {
  const { store, form, nowMs } = input;
  const phoneE164 = form.From ?? '';
  if (!/^\+[1-9]\d{1,14}$/.test(phoneE164)) {
    throw new InputProblem('From', phoneE164, 'a number such as +13035550123');
  }
  const text = form.Body ?? '';
  const kind = parseReply(text);
  const question = await store.latestForPhone({ phoneE164, nowMs });
  const language = question?.language ?? languageOfReply(text) ?? 'en';
  const { replies } = wordsOf(language);
  const saying = (reply: string | null, answered: InboundResult['answered'] = null): InboundResult => ({
    twiml: twimlOf(reply),
    kind,
    answered,
  });

  if (kind === 'stop') {
    await store.silence({ phoneE164, nowMs });
    return saying(isCarrierWord(text) ? null : replies.stopped);
  }
  if (kind === 'start') {
    await store.unsilence({ phoneE164 });
    return saying(isCarrierWord(text) ? null : replies.started);
  }
  if (kind === 'help') return saying(replies.help);

  const isSilenced = await store.isSilenced({ phoneE164 });
  if (question === null) return saying(isSilenced ? null : replies.nothingAsked);
  const { company, where } = printed(question, language);
  if (kind === 'other') return saying(isSilenced ? null : replies.unclear(company, where));
  const { companyId, visitId, personId } = question;
  const outcome = await store.answer({ companyId, visitId, personId, answer: kind, nowMs });
  const reply = {
    recorded: replies[kind],
    'not-free': replies.notFree,
    'not-asked': replies.notAsked,
  }[outcome];
  const answered = outcome === 'recorded' ? { companyId, visitId, personId } : null;
  return saying(isSilenced ? null : reply(company, where), answered);
}

function printed(question: OpenQuestion, language: Language): { company: string; where: PlaceAndTime } {
  const { facts } = question;
  const text = factsText(facts, { language, units: 'us', readerZone: facts.zone, length: 'short' });
  return { company: text.company, where: text };
}

function twimlOf(reply: string | null): string {
  const response = new twilio.twiml.MessagingResponse();
  if (reply !== null) response.message(toGsm7(reply));
  return response.toString();
}
