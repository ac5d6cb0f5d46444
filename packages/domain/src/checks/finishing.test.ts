import { describe, expect, test } from 'vitest';
import type { Pour } from '../snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  sampleIndex,
  sampleSnapshot,
} from '../testing/sample-board.ts';

const base = sampleSnapshot();

/** Drops the floor on the north crew of three with any of its figures changed. */
function drop(pour: Partial<Pour>, rules: Partial<typeof base.rules> = {}) {
  const pours = changed(base.pours, ids.floorPour, { peopleToPlace: 1, ...pour });
  const visits = changed(base.visits, ids.floor, { partYd3: pour.orderedYd3 ?? 60 });
  const index = sampleIndex({ pours, visits, rules: { ...base.rules, ...rules } });
  return dropped(index, ids.floor, ids.northCrew, at(day, 6));
}

describe('people against the set', () => {
  test.each([
    // N >= w A / (D + W), arithmetic on ACI 302.1R's window: w 1/120, 20 min between 10 yd3 loads.
    // A 3,200, D 3 h 10 min, W 2 h at 70 F: 26.67 person-hours over 5.17 h, 5.16.
    ['3,200 ft2 at 70 F', { areaFt2: 3200, concreteTempF: 70 }, 6],
    // W 1 h at 90 F (halved by each 20 F): 26.67 over 4.17, 6.4.
    ['hotter concrete asks for more', { areaFt2: 3200, concreteTempF: 90 }, 7],
    // W 4 h at 50 F: 26.67 over 7.17, 3.72.
    ['colder concrete for fewer', { areaFt2: 3200, concreteTempF: 50 }, 4],
    // 15.5 person-hours over 5.17 h are 3.0: 1,860 ft2 is just what three can do.
    ['just what three can do', { areaFt2: 1860, concreteTempF: 70 }, null],
    ['a little more', { areaFt2: 1861, concreteTempF: 70 }, 4],
    ['area unknown', { areaFt2: 0, concreteTempF: 70 }, null],
    ['the pour states its own number', { areaFt2: 3200, peopleToFinish: 3 }, null],
  ] as const)('%s', (_name, pour, peopleNeeded) => {
    // 10 loads, the last discharged 9 x 20 + 10 min after the first.
    const planned = drop(
      { orderedYd3: 100, placingRateYd3PerHour: 30, finish: 'broom', ...pour },
      { workRatesPersonHoursPerFt2: { broom: 1 / 120 } },
    );
    if (peopleNeeded === null) expect(codesOf(planned.findings)).not.toContain('caution set-outruns-crew');
    else {
      const [outrun] = findingsWith(planned, 'set-outruns-crew');
      expect(outrun.severity).toBe('caution');
      expect(outrun.facts).toMatchObject({ peopleNeeded, peoplePresent: 3 });
      expect(outrun.formula).toBe('N >= w A / (D + W)');
      expect(outrun.clears[0]).toEqual({ kind: 'more-people', people: peopleNeeded - 3 });
    }
  });

  test('every figure behind it is there to be opened', () => {
    const [outrun] = findingsWith(drop({}), 'set-outruns-crew');
    expect(Object.keys(outrun.facts)).toEqual(
      expect.arrayContaining([
        'areaFt2',
        'personHoursPerFt2',
        'placingHours',
        'windowHours',
        'concreteTempF',
      ]),
    );
    for (const value of Object.values(outrun.facts)) expect(value).not.toBeNaN();
  });

  test('the placing rate that it offers does clear it, and a faster one does not', () => {
    const pour = { orderedYd3: 100, areaFt2: 2200, finish: 'broom' as const, placingRateYd3PerHour: 40 };
    const [outrun] = findingsWith(drop(pour), 'set-outruns-crew');
    const slower = outrun.clears.find((one) => one.kind === 'placing-rate-under');
    expect(slower).toBeDefined();
    const yd3PerHour = slower?.kind === 'placing-rate-under' ? slower.yd3PerHour : 0;
    const at = (rate: number) => codesOf(drop({ ...pour, placingRateYd3PerHour: rate }).findings);
    expect(at(yd3PerHour)).not.toContain('caution set-outruns-crew');
    expect(at(yd3PerHour + 0.2)).toContain('caution set-outruns-crew');
  });

  test('no rate is offered that would leave cold joints, or for a single load', () => {
    for (const pour of [{ orderedYd3: 60, areaFt2: 6000 }, { orderedYd3: 10 }]) {
      const [outrun] = findingsWith(drop({ ...pour, placingRateYd3PerHour: 40 }), 'set-outruns-crew');
      expect(outrun.clears.map((one) => one.kind)).toEqual(['more-people', 'other-crew']);
    }
  });
});
