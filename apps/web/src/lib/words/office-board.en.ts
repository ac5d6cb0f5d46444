/** English words of the board: the trade's terms, the bar and lanes, cards, the panel and its forms, dialogs. */

import type { Severity } from '@strikeboard/domain/finding';
import type { Answer, Jointing, OrderState, VisitKind } from '@strikeboard/domain/vocabulary';
import { en } from './en.ts';

const kinds: Readonly<Record<VisitKind, string>> = { ...en.visitKinds, other: 'Other' };

const jointings: Readonly<Record<Jointing, string>> = {
  'saw-conventional': 'Conventional saw',
  'saw-early-entry': 'Early-entry saw',
  tooled: 'Tooled',
  none: 'None',
};

const orderStates: Readonly<Record<OrderState, string>> = {
  drafted: 'drafted',
  sent: 'sent',
  confirmed: 'confirmed',
  countered: 'countered',
  refused: 'refused',
  'called-off': 'called off',
};

const answers: Readonly<Record<Answer, string>> = { none: 'No answer yet', yes: 'Yes', no: 'No' };

/** What can differ in a visit that someone else has changed. */
const visitFields: Readonly<Record<string, string>> = {
  crewId: 'crew',
  during: 'time',
  state: 'state',
  wantedOn: 'day wanted',
  title: 'title',
  plannedMin: 'length',
  partYd3: 'yards',
};

/** Fields that a pour has wherever it is made or edited. */
const pourFields = {
  name: 'Name',
  finish: 'Finish',
  placing: 'Placing',
  wantedOn: 'Wanted on',
  mix: 'Mix',
  pump: 'Pump',
  notes: 'Notes',
  notChosen: 'Not chosen',
  blankIs: (value: number) => `Blank: ${value}`,
  blankReckoned: 'Blank: reckoned',
  expected: (what: string) => `Expected ${what}.`,
  reason: 'Why is this all right?',
};

export const boardWords = {
  terms: {
    severities: en.severities,
    finishes: en.finishes,
    methods: en.placingMethods,
    states: en.visitStates,
    kinds,
    jointings,
    orderStates,
    answers,
    /** "2 stops", "1 caution". */
    countOf: (severity: Severity, count: number) =>
      `${count} ${en.severities[severity].toLowerCase()}${count === 1 ? '' : 's'}`,
    /** Yards without idle zeros: 32, 9.25. */
    yards: (yd3: number) => `${Number(yd3.toFixed(2))} yd³`,
    untold: 'Not told yet',
  },

  board: {
    today: 'Today',
    earlier: 'Earlier week',
    later: 'Later week',
    until: (day: string) => `to ${day}`,
    daysShown: 'Days shown',
    dayCount: (days: number) => (days === 1 ? '1 day' : `${days} days`),
    undo: 'Undo',
    undone: 'Undone',
    newPour: 'New pour',
    crew: 'Crew',
    people: (count: number) => `${count} people`,
    live: 'Live',
    lost: 'Connection lost. What you see may be old; it catches up by itself.',
    loading: 'Reading the board…',
    failed: 'The board could not be read.',
    retry: 'Try again',
    label: 'Board: crews by days',
    noCrews: {
      none: 'No crews yet.',
      bringIn: 'Bring in your crews and pours',
      or: 'or',
      setUp: 'set them up',
    },
    waiting: 'Waiting',
    waitingLabel: 'Waiting strip',
    onOtherDays: (count: number) => `${count} on other days`,
    noDate: 'No date yet',
    handleHint:
      'Press space to pick up. Arrow left and right move by a slot, page up and page down by a day, arrow up and down by a crew. Space puts it down, escape leaves it where it was.',
    fits: 'Fits',
    pickedUp: (title: string) => `Picked up ${title}.`,
    over: (crew: string, when: string, verdict: string) => `${crew}, ${when}: ${verdict}.`,
    overWaiting: 'Back to the waiting strip.',
    dropped: (title: string, crew: string, when: string) => `${title} stands with ${crew}, ${when}.`,
    backToWaiting: (title: string) => `${title} waits again.`,
    cancelled: (title: string) => `${title} stays where it was.`,
    changedMeanwhile: (fields: readonly string[]) =>
      `Different now: ${fields.map((field) => visitFields[field] ?? field).join(', ')}.`,
    offlineMove: 'The move was not saved: no connection. The card is back where it was.',
    made: 'The pour waits on the strip.',
  },

  card: {
    overdue: 'Overdue',
    willCall: 'Will-call',
    /** "6:30a", "7p": a card has no room for more. */
    startsAt: (clock: string) => clock.replace(':00 ', ' ').replace(' AM', 'a').replace(' PM', 'p'),
    yesOf: (yes: number, asked: number) => `${yes} of ${asked} yes`,
    saidYesOf: (yes: number, asked: number) => `${yes} of ${asked} said yes`,
    fromTo: (from: string, to: string) => `from ${from} to ${to}`,
  },

  drop: {
    cannotStand: (title: string) => `${title} can't stand there`,
    needsReason: (title: string) => `${title}: accept with a reason`,
    reasonLabel: pourFields.reason,
    reasonHint: 'Kept with your name and the time.',
    reasonMissing: 'Write a reason, or cancel.',
    placeAnyway: 'Put it there',
    fitsInstead: 'Where it fits',
    noFit: 'No slot without a stop in the days shown.',
    withCaution: 'with a caution',
    withNothing: 'fits',
  },

  finding: {
    clearsIt: 'Clears it:',
    orElse: ', or ',
    reckoned: 'How it was reckoned',
    unknown: 'unknown',
    yes: 'yes',
    no: 'no',
    /** Rows that the board does not show. */
    unnamed: {
      visit: 'another visit',
      person: 'someone',
      crew: 'another crew',
      equipment: 'the equipment',
      plant: 'the plant',
      site: 'another site',
    },
  },

  panel: {
    close: 'Close the panel',
    parts: 'Parts of the panel',
    tabs: { plan: 'Plan', edit: 'Edit', people: 'People', history: 'History' },
    day: 'Day',
    crewThere: 'Crew there',
    firstTruck: 'First truck',
    lastLoadOut: 'Last load out',
    window: 'Window opens, closes',
    fromTo: (from: string, to: string) => `${from} to ${to}`,
    finishingEnds: 'Finishing ends',
    sawBetween: 'Saw between',
    between: (from: string, to: string) => `${from} and ${to}`,
    trucks: 'Trucks',
    loads: (loads: number, everyMin: number, trucks: number) =>
      `${loads} loads every ${everyMin} min, ${trucks} in rotation`,
    washedUp: 'Washed up',
    mix: pourFields.mix,
    notChosen: pourFields.notChosen,
    order: 'Order',
    pump: pourFields.pump,
    area: 'Area',
    areaFt2: (ft2: number) => `${Math.round(ft2).toLocaleString('en-US')} ft²`,
    unknown: 'Unknown',
    notes: pourFields.notes,
    access: 'Access',
    checks: 'Checks',
    advice:
      'Checks advise; people decide. Local codes, the engineer of record and licensed practice come first.',
    nothingAgainst: 'No check has anything against it.',
    followUps: 'Follow-ups',
    makeFirm: 'Make firm',
    firm: 'Firm. People are told once it has settled.',
    sendNow: 'Send now',
    onItsWay: 'On its way to everyone concerned.',
    nothingToTell: 'There is nothing to tell.',
    notSent: 'Not sent.',
    backToWaiting: 'Back to waiting',
    callOffAsk: 'Call off…',
    callOff: 'Call off',
    calledOff: 'Called off.',
    callOffReason: 'Why is it called off?',
    callOffWhy: 'Why?',
    nobody: 'Nobody is on it.',
    asked: 'Asked',
    nothingYet: 'Nothing yet.',
  },

  pourForm: {
    ...pourFields,
    ordered: 'Ordered, yd³',
    placingRate: 'Placing rate, yd³/h',
    anyPump: 'Any that suits',
    peopleToPlace: 'People to place',
    peopleToFinish: 'People to finish',
    concreteTemp: 'Concrete, °F',
    joints: 'Joints',
    willCall: 'Will-call',
    ready: 'Ready',
    readyItem: 'Another thing to be ready',
    readyExample: 'Base compacted, forms, steel, inspection…',
    add: 'Add',
    changedMeanwhile: (fields: readonly string[]) => `Changed meanwhile: ${fields.join(', ')}.`,
    keepMine: 'Keep what I typed and try again',
    takeTheirs: 'Take theirs',
    undoTyping: 'Undo typing',
    saved: 'Saved.',
    notANumber: (typed: string) => `"${typed}" is not a number; expected one such as 12.5.`,
    yardsMissing: 'Expected yards, such as 12.5.',
  },

  newPour: {
    ...pourFields,
    title: 'New pour',
    site: 'Site',
    choose: 'Choose…',
    newSite: { ask: 'A new site?', add: 'Add it in set-up', first: 'first.' },
    length: 'Length, ft',
    width: 'Width, ft',
    area: 'or area, ft²',
    thickness: 'Thickness, in',
    order: 'Order, yd³',
    blankIsWithWaste: (yd3: number, wastePercent: number) => `Blank: ${yd3}, with ${wastePercent} % waste`,
    add: 'Add to the strip',
    siteMissing: 'Choose a site.',
    nameMissing: 'Name it, such as "Garage slab".',
    areaMissing: 'Give length and width, or the area, as numbers over 0.',
    thicknessMissing: 'Give inches over 0, such as 4.',
    orderMissing: 'Give yards over 0, or leave it blank to reckon them.',
  },
};
