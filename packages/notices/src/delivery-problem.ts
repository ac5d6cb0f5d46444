import type { Language, NoticeState } from '@strikeboard/domain/vocabulary';
import { type DeliveryProblem, deliveryProblemKinds, wordsOf } from './words/words.ts';

/**
 * Error codes by what they mean to a dispatcher. Five digits: the SMS provider's dictionary of error codes (published;
 * read from memory). Three digits: replies of a mail server, RFC 5321 section 4.2.3 and RFC 4954 section 6 (published).
 */
const PROBLEMS: Readonly<Record<string, DeliveryProblem>> = {
  '21211': 'bad-address',
  '21217': 'bad-address',
  '21265': 'bad-address',
  '21604': 'bad-address',
  '30005': 'bad-address',
  '550': 'bad-address',
  '551': 'bad-address',
  '553': 'bad-address',
  EENVELOPE: 'bad-address',
  '21614': 'not-a-mobile',
  '30006': 'not-a-mobile',
  '21610': 'said-stop',
  '30003': 'unreachable',
  '30008': 'unreachable',
  '30017': 'unreachable',
  '30004': 'filtered',
  '30007': 'filtered',
  '21408': 'not-allowed-there',
  '21612': 'not-allowed-there',
  '20003': 'sender-set-up',
  '20404': 'sender-set-up',
  '21212': 'sender-set-up',
  '21603': 'sender-set-up',
  '21606': 'sender-set-up',
  '21659': 'sender-set-up',
  '21660': 'sender-set-up',
  '30032': 'sender-set-up',
  '30034': 'sender-set-up',
  '530': 'sender-set-up',
  '534': 'sender-set-up',
  '535': 'sender-set-up',
  EAUTH: 'sender-set-up',
};

/** Codes of what might have gone better later: the network's, the way's, a busy service's. */
const TEMPORARY = /^(?:E[A-Z_]+|http-\d+|4\d\d|20(?:429|5\d\d)|30001|no-answer)$/;

/** What an error code of a notice in that state means to a dispatcher. */
export function problemOf(state: NoticeState, code: string): DeliveryProblem {
  const own = deliveryProblemKinds.find((kind) => kind === code);
  if (own !== undefined) return own;
  if (state === 'unsure') return 'no-answer';
  const known = PROBLEMS[code];
  if (state === 'queued') return known === 'sender-set-up' ? known : 'try-later';
  return known ?? (TEMPORARY.test(code) ? 'gave-up' : 'other');
}

/** Why a notice has not arrived, as a sentence in the reader's language; null for one without an error. */
export function deliveryProblem(
  { state, errorCode }: { state: NoticeState; errorCode: string | null },
  language: Language,
): string | null {
  return errorCode === null ? null : wordsOf(language).deliveryProblems[problemOf(state, errorCode)];
}
