/** Words of the board. Kept apart from the components so that they can be read, and later translated, in one place. */

import type { Severity } from '@strikeboard/domain/finding';
import type {
  Answer,
  Finish,
  Jointing,
  OrderState,
  PlacingMethod,
  VisitKind,
  VisitState,
} from '@strikeboard/domain/vocabulary';

export const finishWords: Record<Finish, string> = {
  float: 'Float',
  broom: 'Broom',
  trowel: 'Trowel',
  'hard-trowel': 'Hard trowel',
  exposed: 'Exposed',
  stamped: 'Stamped',
};

export const methodWords: Record<PlacingMethod, string> = {
  chute: 'Chute',
  buggy: 'Buggy',
  'line-pump': 'Line pump',
  'boom-pump': 'Boom pump',
};

export const jointingWords: Record<Jointing, string> = {
  'saw-conventional': 'Conventional saw',
  'saw-early-entry': 'Early-entry saw',
  tooled: 'Tooled',
  none: 'None',
};

export const kindWords: Record<VisitKind, string> = {
  prep: 'Prep',
  pour: 'Pour',
  saw: 'Saw cut',
  strip: 'Strip forms',
  protect: 'Protect',
  seal: 'Seal',
  other: 'Other',
};

export const stateWords: Record<VisitState, string> = {
  waiting: 'Waiting',
  pencilled: 'Pencilled',
  firm: 'Firm',
  done: 'Done',
  'called-off': 'Called off',
};

export const orderStateWords: Record<OrderState, string> = {
  drafted: 'drafted',
  sent: 'sent',
  confirmed: 'confirmed',
  countered: 'countered',
  refused: 'refused',
  'called-off': 'called off',
};

export const answerWords: Record<Answer, string> = { none: 'No answer yet', yes: 'Yes', no: 'No' };

export const severityWords: Record<Severity, string> = { stop: 'Stop', caution: 'Caution', note: 'Note' };

/** "2 stops", "1 caution". */
export function countOf(severity: Severity, count: number): string {
  return `${count} ${severityWords[severity].toLowerCase()}${count === 1 ? '' : 's'}`;
}

/** What can differ in a visit that someone else has changed. */
const visitFieldWords: Readonly<Record<string, string>> = {
  crewId: 'crew',
  during: 'time',
  state: 'state',
  wantedOn: 'day wanted',
  title: 'title',
  plannedMin: 'length',
  partYd3: 'yards',
};

export const words = {
  today: 'Today',
  earlier: 'Earlier week',
  later: 'Later week',
  week: 'Week',
  day: 'Day',
  daysShown: 'Days shown',
  undo: 'Undo',
  undone: 'Undone',
  newPour: 'New pour',
  crew: 'Crew',
  waiting: 'Waiting',
  noDate: 'No date yet',
  willCall: 'Will-call',
  overdue: 'Overdue',
  noneWaiting: 'Nothing waits',
  live: 'Live',
  lost: 'Connection lost. What you see may be old; it catches up by itself.',
  loading: 'Reading the board…',
  failed: 'The board could not be read.',
  retry: 'Try again',
  untold: 'Not told yet',
  night: 'night',
  boardLabel: 'Board: crews by days',
  waitingLabel: 'Waiting strip',
  handleHint:
    'Press space to pick up. Arrow left and right move by a slot, page up and page down by a day, arrow up and down by a crew. Space puts it down, escape leaves it where it was.',
  fits: 'Fits',
  pickedUp: (title: string) => `Picked up ${title}.`,
  over: (crew: string, when: string, verdict: string) => `${crew}, ${when}: ${verdict}.`,
  overWaiting: 'Back to the waiting strip.',
  dropped: (title: string, crew: string, when: string) => `${title} stands with ${crew}, ${when}.`,
  backToWaiting: (title: string) => `${title} waits again.`,
  cancelled: (title: string) => `${title} stays where it was.`,
  cannotStand: (title: string) => `${title} can't stand there`,
  needsReason: (title: string) => `${title}: accept with a reason`,
  reasonLabel: 'Why is this all right?',
  reasonHint: 'Kept with your name and the time.',
  reasonMissing: 'Write a reason, or cancel.',
  placeAnyway: 'Put it there',
  cancel: 'Cancel',
  fitsInstead: 'Where it fits',
  noFit: 'No slot without a stop in the days shown.',
  changedMeanwhile: (fields: readonly string[]) =>
    `Different now: ${fields.map((field) => visitFieldWords[field] ?? field).join(', ')}.`,
  offlineMove: 'The move was not saved: no connection. The card is back where it was.',
} as const;
