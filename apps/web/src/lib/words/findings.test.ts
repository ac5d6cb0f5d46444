import { type Clearing, type Finding, findingCodes } from '@strikeboard/domain/finding';
import { describe, expect, it } from 'vitest';
import * as english from './findings.en.ts';
import * as spanish from './findings.es.ts';

// Site in Denver, office in Chicago, machine wherever it is: 2026-03-09 13:30 UTC is 7:30 at the site.
const zone = 'America/Denver';
const atMs = Date.UTC(2026, 2, 9, 13, 30);

/** Every fact that the checks give, so that no sentence lacks one. */
const facts: Finding['facts'] = {
  ...{
    samePeople: 2,
    visits: 1,
    takenBy: 'same-crew',
    fromMs: atMs,
    untilMs: atMs,
    travelOnly: true,
    leftOff: false,
  },
  ...{ peopleNeeded: 6, peoplePresent: 4, peopleOffered: 1, peopleToPlace: 3, finish: 'broom' },
  ...{ areaFt2: 4800, windowHours: 2.5, concreteTempF: 90, gapMin: 10, travelMin: 35, neighbour: 'before' },
  ...{ rule: 'shift', shiftHours: 15, maxShiftHours: 14, weekHours: 47, straightHours: 40 },
  ...{ restHours: 6, leastRestHours: 8, closedThatDay: false, loads: 9, loadsOutside: 2, firstBatchMs: atMs },
  ...{
    lastBatchMs: atMs,
    otherOrders: 2,
    peakYd3PerHour: 91,
    maxYd3PerHour: 80,
    mix: '4500A',
    spacingMin: 50,
  },
  ...{
    limitMin: 32,
    ageMin: 99,
    haulMin: 40,
    waitMin: 12,
    lastLoadYd3: 1.5,
    shortLoadYd3: 4,
    pumpName: 'Boom 38',
  },
  ...{ takenUntilMs: atMs, heldFromMs: atMs, reachFt: 120, neededFt: 140, outputYd3PerHour: 40 },
  ...{
    placingRateYd3PerHour: 60,
    ageHours: 12,
    releaseHours: 24,
    use: 'foot',
    releasedMs: atMs,
    what: 'placing',
  },
  ...{ permittedFromMin: 420, permittedUntilMin: 1080, itemsUndone: 2, items: 5, hoursToStart: 20 },
  ...{ finishingFromMs: atMs, finishingUntilMs: atMs, civilDawnMs: atMs, civilDuskMs: atMs, airTempF: 31 },
  ...{ limitF: 40, atMs, protectionHours: 48, evaporationLbPerFt2H: 0.21, humidityPercent: 20, windMph: 31 },
  ...{ actionLbPerFt2H: 0.2, rainChancePercent: 70, finalSetMs: atMs, limitMph: 30, heatIndexF: 104 },
  ...{ windowFromMs: atMs, windowUntilMs: atMs, standsOutside: false },
};

const clears: Clearing[] = [
  { kind: 'more-people', people: 2 },
  { kind: 'placing-rate-under', yd3PerHour: 22.5 },
  { kind: 'start-by', atMs },
  { kind: 'start-after', atMs },
  { kind: 'other-crew' },
  { kind: 'other-pump' },
  { kind: 'other-plant' },
  { kind: 'choose-mix' },
  { kind: 'spacing-under', minutes: 30 },
  { kind: 'spacing-over', minutes: 12 },
  { kind: 'order-at-least', yd3: 14.25 },
  { kind: 'man-follow-up', window: { startMs: atMs, endMs: atMs } },
  { kind: 'make-ready', items: ['forms inspected'] },
];

function finding(code: Finding['code']): Finding {
  const against = (['visit', 'person', 'crew', 'equipment', 'plant', 'site'] as const).map((kind) => ({
    kind,
    id: kind,
  }));
  const source = { title: 'Arithmetic', status: 'arithmetic' } as const;
  const during = { startMs: atMs, endMs: atMs + 3_600_000 };
  return { code, severity: 'caution', visitId: 'v', against, during, facts, formula: null, source, clears };
}

const names = (kind: string) => `<${kind}>`;

describe.each([
  ['en', english.wordsOfFinding],
  ['es', spanish.wordsOfFinding],
] as const)('findings in %s (common practice, no source)', (language, words) => {
  it.each(findingCodes)('%s says what and why, with its numbers', (code) => {
    const said = words(finding(code), names, zone);
    expect(said.what).not.toBe('');
    expect(`${said.what} ${said.why}`).not.toMatch(/\?|undefined|null|NaN|\[object/);
    expect(said.clears).toHaveLength(clears.length);
    expect(said.clears.join()).not.toMatch(/undefined|null|NaN/);
  });

  it("gives times by the site's clock", () => {
    const [, , startBy] = words(finding('travel-gap'), names, zone).clears;
    expect(startBy).toContain(language === 'en' ? 'Mon Mar 9, 7:30 AM' : 'lun 9 mar, 7:30');
  });
});

describe('findings that say different things by their facts (common practice, no source)', () => {
  it('names the other visit where it is known, and only that the time is taken where it is not', () => {
    const taken = { ...finding('person-overlap'), facts: { ...facts, takenBy: 'other-company' } };
    const unnamed = { ...taken, against: taken.against.filter(({ kind }) => kind !== 'visit') };
    expect(english.wordsOfFinding(unnamed, names, zone).why).toMatch(/is not free/);
    expect(english.wordsOfFinding(taken, names, zone).why).toMatch(/is on <visit>/);
  });

  it('tells a missing mix from one that the plant does not carry', () => {
    const none = { ...finding('mix-not-carried'), facts: { mix: null } };
    expect(english.wordsOfFinding(none, names, zone).what).toBe('No mix chosen');
    expect(english.wordsOfFinding(finding('mix-not-carried'), names, zone).why).toContain('4500A');
  });
});
