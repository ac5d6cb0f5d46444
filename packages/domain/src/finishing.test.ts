import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  crewDays,
  finishingHours,
  keepsPace,
  peopleToFinish,
  peopleToPlace,
  workRateFor,
  workRates,
} from './finishing.ts';
import { InputProblem } from './problem.ts';
import { windowOfFinishabilityH } from './setting.ts';
import { finishes } from './vocabulary.ts';

const slab = { areaFt2: 3200, placingHours: 3, personHoursPerFt2: 1 / 120 };

describe('peopleToFinish (arithmetic on the window of finishability, ACI 302.1R)', () => {
  const rows: [name: string, input: typeof slab & { windowH: number }, exact: number, people: number][] = [
    ['3,200 ft2 over 3 h, window 2 h', { ...slab, windowH: 2 }, 5.333, 6],
    ['the same at 90 F, window 1 h', { ...slab, windowH: windowOfFinishabilityH(90) }, 6.667, 7],
    ['no window at all: as many as the placing', { ...slab, windowH: 0 }, 8.889, 9],
    ['an even division is not one more', { ...slab, areaFt2: 3000, windowH: 2 }, 5, 5],
    [
      'binary noise (2.0000000000000004) is not a third person',
      { areaFt2: 272, placingHours: 1, personHoursPerFt2: 1 / 80, windowH: 0.7 },
      2,
      2,
    ],
    ['a stoop still needs one', { ...slab, areaFt2: 20, windowH: 2 }, 0.033, 1],
  ];
  it.each(rows)('%s', (_name, input, exact, people) => {
    const answer = peopleToFinish(input);
    expect(answer.exact).toBeCloseTo(exact, 3);
    expect(answer.people).toBe(people);
  });

  it('six finishers cannot close 3,200 ft2 at 92 F', () => {
    expect(peopleToFinish({ ...slab, windowH: windowOfFinishabilityH(92) }).people).toBeGreaterThan(6);
  });

  it('3 people on 1,200 ft2 over 4 h keep pace: 360 ft2/h against 300', () => {
    const even = { areaFt2: 1200, placingHours: 4, personHoursPerFt2: 1 / 120 };
    expect(keepsPace({ ...even, people: 3 })).toBe(true);
    expect(keepsPace({ ...even, people: 2 })).toBe(false);
    expect(peopleToFinish({ ...even, windowH: 0.01 })).toMatchObject({ people: 3, keepsPace: true });
    expect(peopleToFinish({ ...even, windowH: 2 })).toMatchObject({ people: 2, keepsPace: false });
  });

  it('hotter concrete, more area and less placing time never need fewer', () => {
    const area = fc.double({ min: 50, max: 20_000, noNaN: true });
    const hours = fc.double({ min: 0.25, max: 12, noNaN: true });
    const tempF = fc.double({ min: 40, max: 110, noNaN: true });
    fc.assert(
      fc.property(area, hours, tempF, tempF, (areaFt2, placingHours, one, other) => {
        const at = (temp: number) =>
          peopleToFinish({ ...slab, areaFt2, placingHours, windowH: windowOfFinishabilityH(temp) }).people;
        expect(at(Math.max(one, other))).toBeGreaterThanOrEqual(at(Math.min(one, other)));
        const base = { ...slab, areaFt2, placingHours, windowH: windowOfFinishabilityH(one) };
        expect(peopleToFinish({ ...base, areaFt2: areaFt2 * 1.2 }).people).toBeGreaterThanOrEqual(
          peopleToFinish(base).people,
        );
        expect(peopleToFinish({ ...base, placingHours: placingHours / 2 }).people).toBeGreaterThanOrEqual(
          peopleToFinish(base).people,
        );
      }),
    );
  });

  it('the people it names are done before the last patch closes', () => {
    const people = peopleToFinish({ ...slab, windowH: 2 }).people;
    expect(finishingHours({ ...slab, people })).toBeCloseTo(4.444, 3);
    expect(finishingHours({ ...slab, people })).toBeLessThanOrEqual(3 + 2);
    expect(finishingHours({ ...slab, people: people - 1 })).toBeGreaterThan(3 + 2);
    expect(finishingHours({ ...slab, people: 40 })).toBe(3);
  });

  it.each([
    ['no area', { areaFt2: 0 }, 'areaFt2'],
    ['no placing time', { placingHours: 0 }, 'placingHours'],
    ['no work', { personHoursPerFt2: 0 }, 'personHoursPerFt2'],
    ['negative window', { windowH: -1 }, 'windowH'],
    ['no number', { areaFt2: Number.NaN }, 'areaFt2'],
  ])('refuses %s', (_name, bad, field) => {
    expect(() => peopleToFinish({ ...slab, windowH: 2, ...bad })).toThrow(
      expect.objectContaining({ name: 'InputProblem', field }),
    );
  });
});

describe('work by finish (common practice, no source)', () => {
  it.each([
    ['float', 500, 800],
    ['broom', 500, 800],
    ['hard-trowel', 300, 500],
    ['exposed', 200, 350],
    ['stamped', 150, 300],
  ] as const)('%s is within the usual %d to %d ft2 per finisher per 8-hour day', (finish, low, high) => {
    const ft2PerDay = 8 / workRates[finish].personHoursPerFt2;
    expect(ft2PerDay).toBeGreaterThanOrEqual(low);
    expect(ft2PerDay).toBeLessThanOrEqual(high + 1e-9);
  });
  it('costs more the finer the finish, and says where each figure is from', () => {
    const order = (['broom', 'trowel', 'hard-trowel', 'exposed', 'stamped'] as const).map(
      (finish) => workRates[finish].personHoursPerFt2,
    );
    expect(order).toEqual(order.toSorted((a, b) => a - b));
    for (const finish of finishes) expect(workRates[finish].source).toContain('common practice, no source');
  });
  it('agrees with one finisher per 500 to 600 ft2 of exterior slab over 3 h of placing and a 2 h window', () => {
    const exact = peopleToFinish({
      areaFt2: 5500,
      placingHours: 3,
      windowH: 2,
      personHoursPerFt2: workRateFor('broom'),
    }).exact;
    expect(5500 / exact).toBeGreaterThanOrEqual(500);
    expect(5500 / exact).toBeLessThanOrEqual(600);
  });
  it('lets the company say otherwise, and refuses nonsense', () => {
    expect(workRateFor('broom', { broom: 1 / 120 })).toBe(1 / 120);
    expect(workRateFor('stamped', { broom: 1 / 120 })).toBe(workRates.stamped.personHoursPerFt2);
    expect(() => workRateFor('broom', { broom: 0 })).toThrow(InputProblem);
  });
});

describe('crewDays (published: Concrete Construction, matching power trowels)', () => {
  it.each([
    ['hand', 2],
    ['walk-behind', 0.8],
    ['ride-on', 0.4],
  ] as const)('1,200 ft2 by %s', (tool, days) => {
    expect(crewDays(1200, tool)).toBeCloseTo(days, 9);
  });
});

describe('peopleToPlace (common practice, no source: 3 to 4 per 10 yd3/h by chute)', () => {
  it.each([
    [10, 'chute', 3],
    [20, 'chute', 6],
    [10, 'buggy', 4],
    [30, 'boom-pump', 6],
    [10.5, 'chute', 4],
    [2, 'chute', 2],
  ] as const)('%d yd3/h by %s', (rate, method, people) => {
    expect(peopleToPlace(rate, method)).toBe(people);
  });
  it('takes a company figure and refuses a rate of 0', () => {
    expect(peopleToPlace(30, 'chute', { chute: 2 })).toBe(6);
    expect(() => peopleToPlace(0, 'chute')).toThrow(/placingRateYd3PerHour/);
  });
});
