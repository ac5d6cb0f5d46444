import type { Finish, Language } from '@strikeboard/domain/vocabulary';
import { wordsEn } from './en.ts';
import { wordsEs } from './es.ts';

/** Where and when a visit is, as texts ready to print. */
export interface PlaceAndTime {
  day: string;
  start: string;
  place: string;
}

/** What a message says has changed: both values as texts ready to print. */
export interface FromTo {
  from: string;
  to: string;
}

/** Why a message is written. */
export type NoticeKind = 'assigned' | 'offered' | 'changed' | 'called-off' | 'put-off' | 'taken-off';

/** Labels of the lines of an e-mail. */
export interface MailLabels {
  day: string;
  start: string;
  firstLoad: string;
  place: string;
  concrete: string;
  work: string;
  changes: string;
}

/** The sentences of one language, properly spelled; a text message leaves off the accents that GSM 7-bit lacks. */
export interface Words {
  /** From Monday (ISO 8601). */
  weekdays: readonly [string, string, string, string, string, string, string];
  months: readonly string[];
  /** A day in full for e-mail. */
  longDay: (weekday: string, dayOfMonth: number, month: string) => string;
  /** A time of another day than the one the message is about. */
  timeOnDay: (time: string, day: string) => string;
  /** A clock time with the name of its zone, for someone who lives in another. */
  timeInZone: (time: string, zoneName: string) => string;
  finishes: Readonly<Record<Finish, string>>;
  withFinish: (finish: string) => string;

  /** How a text message opens. */
  smsOpening: Readonly<Record<'assigned' | 'offered' | 'changed', (company: string, day: string) => string>>;
  smsEnding: Readonly<
    Record<'called-off' | 'put-off' | 'taken-off', (company: string, where: PlaceAndTime) => string>
  >;
  beThere: (time: string) => string;
  firstTruck: (time: string) => string;
  howToAnswer: (link: string) => string;
  /** For the first text about a visit: how to answer, and how to end texts. */
  howToAnswerOrStop: (link: string) => string;

  dayMoved: (change: FromTo) => string;
  startMoved: (change: FromTo) => string;
  firstTruckMoved: (change: FromTo) => string;
  firstTruckNow: (time: string) => string;
  firstTruckGone: () => string;
  placeChanged: (change: FromTo) => string;
  amountChanged: (change: FromTo) => string;
  finishChanged: (change: FromTo) => string;
  workChanged: (change: FromTo) => string;

  mailSubject: Readonly<Record<NoticeKind, (company: string, where: PlaceAndTime) => string>>;
  mailOpening: Readonly<Record<NoticeKind, (company: string) => string>>;
  greeting: (name: string) => string;
  mailLabels: MailLabels;
  mailAnswer: (link: string) => string;
  /** Shown on whatever reaches someone who will handle fresh concrete. */
  safety: string;
  localCode: string;

  /** Answers to texts that people send. */
  replies: {
    yes: (company: string, where: PlaceAndTime) => string;
    no: (company: string, where: PlaceAndTime) => string;
    notFree: (company: string, where: PlaceAndTime) => string;
    notAsked: (company: string, where: PlaceAndTime) => string;
    unclear: (company: string, where: PlaceAndTime) => string;
    nothingAsked: string;
    help: string;
    stopped: string;
    started: string;
  };

  /** Why a message did not arrive, for the board and the list of notices. */
  deliveryProblems: Readonly<Record<DeliveryProblem, string>>;
}

export const deliveryProblemKinds = [
  'bad-address',
  'not-a-mobile',
  'said-stop',
  'unreachable',
  'filtered',
  'not-allowed-there',
  'sender-set-up',
  'try-later',
  'gave-up',
  'interrupted',
  'no-answer',
  'superseded',
  'no-link',
  'other',
] as const;
export type DeliveryProblem = (typeof deliveryProblemKinds)[number];

const catalogue: Readonly<Record<Language, Words>> = { en: wordsEn, es: wordsEs };

/** The sentences of a language. */
export function wordsOf(language: Language): Words {
  return catalogue[language];
}
