import type { Language } from '@strikeboard/domain/vocabulary';
import type { ChangedFact } from './changes.ts';
import type { FactsText } from './facts-text.ts';
import { type NoticeKind, wordsOf } from './words/words.ts';

/** Stands in a stored message where the link belongs; its token is made at sending. */
export const LINK_PLACE = '{link}';

/** What a message says, as texts ready to print. */
export interface MessageInput {
  kind: NoticeKind;
  text: FactsText;
  changed: readonly ChangedFact[];
  /** One sentence for each changed fact. */
  changes: readonly string[];
  language: Language;
  name: string;
}

/** The text message, properly spelled. The link comes last, where phones make it one to tap. */
export function smsOf({ kind, text, changed, changes, language }: MessageInput): string {
  const words = wordsOf(language);
  if (kind === 'called-off' || kind === 'put-off' || kind === 'taken-off') {
    return words.smsEnding[kind](text.company, text);
  }
  const times = [
    changed.includes('start') ? null : words.beThere(text.start),
    changed.includes('first-truck') || text.firstTruck === null ? null : words.firstTruck(text.firstTruck),
  ];
  const sentences = [
    ...changes,
    listed(times),
    changed.includes('place') ? null : text.place,
    concrete(text, language, changed),
    text.amount === null && !changed.includes('work') ? text.work : null,
  ];
  const said = sentences.flatMap((part) => (part ? [`${capital(part)}.`] : []));
  const answer = kind === 'changed' ? words.howToAnswer : words.howToAnswerOrStop;
  return [words.smsOpening[kind](text.company, text.day), ...said, answer(LINK_PLACE)].join(' ');
}

/** The e-mail: subject and plain text, from which {@link mailHtml} makes the formatted part. */
export function mailOf({ kind, text, changes, language, name }: MessageInput): {
  subject: string;
  body: string;
} {
  const words = wordsOf(language);
  const labels = words.mailLabels;
  const isOff = kind === 'called-off' || kind === 'put-off' || kind === 'taken-off';
  const lines: [string, string | null][] = [
    [labels.day, text.day],
    [labels.start, text.start],
    [labels.firstLoad, isOff ? null : text.firstTruck],
    [labels.place, text.place],
    [labels.concrete, isOff ? null : concrete(text, language)],
    [labels.work, text.work],
  ];
  const printed = lines
    .filter(([, value]) => value !== null && value !== '')
    .map(([label, value]) => `${label}: ${value}`);
  const paragraphs = [
    words.greeting(name),
    words.mailOpening[kind](text.company),
    changes.length === 0
      ? null
      : [`${labels.changes}:`, ...changes.map((change) => `- ${change}`)].join('\n'),
    printed.join('\n'),
    ...(isOff ? [] : [words.mailAnswer(LINK_PLACE), words.safety, words.localCode]),
  ];
  return {
    subject: words.mailSubject[kind](text.company, text),
    body: paragraphs.filter((paragraph) => paragraph !== null).join('\n\n'),
  };
}

/**
 * The formatted part of an e-mail, from its plain text: paragraphs, and the link as a link.
 * @param input.link the address that stands in the text; null: none does
 */
export function mailHtml(input: { body: string; link: string | null; language: Language }): string {
  const link = input.link === null ? null : escapeHtml(input.link);
  const paragraphs = input.body.split('\n\n').map((paragraph) => {
    const html = escapeHtml(paragraph).replaceAll('\n', '<br>\n');
    const linked = link === null ? html : html.replaceAll(link, `<a href="${link}">${link}</a>`);
    return `<p>${linked}</p>`;
  });
  return [
    '<!doctype html>',
    `<html lang="${input.language}">`,
    '<head><meta charset="utf-8"><meta name="viewport" content="width=device-width"></head>',
    '<body style="font-family: sans-serif; font-size: 16px; line-height: 1.5; max-width: 40em">',
    ...paragraphs,
    '</body>',
    '</html>',
  ].join('\n');
}

/** Yards and finish, without what a sentence of its own has said. */
function concrete(
  { amount, finish }: FactsText,
  language: Language,
  changed: readonly ChangedFact[] = [],
): string | null {
  return listed([
    changed.includes('amount') ? null : amount,
    finish === null || changed.includes('finish') ? null : wordsOf(language).withFinish(finish),
  ]);
}

function listed(parts: readonly (string | null)[]): string | null {
  const present = parts.filter((part) => part !== null);
  return present.length === 0 ? null : present.join(', ');
}

function capital(text: string): string {
  const [first = '', ...rest] = Array.from(text);
  return first.toUpperCase() + rest.join('');
}

function escapeHtml(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}
