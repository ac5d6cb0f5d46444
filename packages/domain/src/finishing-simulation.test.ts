import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { peopleToFinish } from './finishing.ts';
import { type Hands, type Patch, simulateFinishing } from './finishing-simulation.ts';

/** 3,200 ft2 placed evenly over 3 h, open 4 h after placing for 2 h: needs 5.333 people (arithmetic). */
const slab: Patch = {
  placedFromH: 0,
  placedUntilH: 3,
  areaFt2: 3200,
  personHoursPerFt2: 1 / 120,
  opensAfterH: 4,
  windowH: 2,
};
const allDay = (people: number): Hands[] => [{ fromH: 0, untilH: 24, people }];

describe('simulateFinishing against the closed form', () => {
  it('six are enough for 3,200 ft2 and five are not', () => {
    const six = simulateFinishing({ patches: [slab], hands: allDay(6) });
    expect(six).toMatchObject({ inTime: true, missedFt2: 0, firstMissedH: null, worstLateH: 0 });
    expect(six.finishedH).toBeCloseTo(4 + 3200 / 120 / 6, 1);
    const five = simulateFinishing({ patches: [slab], hands: allDay(5) });
    expect(five.inTime).toBe(false);
    // 5 people are done 5.333 h after the first opening; the last patch closes after 5 h.
    expect(five.worstLateH).toBeCloseTo(1 / 3, 1);
    expect(five.missedFt2).toBeGreaterThan(0);
  });

  it('flips from late to in time at w A / (D + W), for any even placing', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 200, max: 15_000, noNaN: true }),
        fc.double({ min: 0.5, max: 8, noNaN: true }),
        fc.double({ min: 0.004, max: 0.04, noNaN: true }),
        fc.double({ min: 0.5, max: 4, noNaN: true }),
        fc.double({ min: 0.5, max: 8, noNaN: true }),
        (areaFt2, placingHours, personHoursPerFt2, windowH, opensAfterH) => {
          const { exact } = peopleToFinish({ areaFt2, placingHours, personHoursPerFt2, windowH });
          const patch = {
            placedFromH: 0,
            placedUntilH: placingHours,
            areaFt2,
            personHoursPerFt2,
            opensAfterH,
            windowH,
          };
          const run = (people: number) =>
            simulateFinishing({ patches: [patch], hands: allDay(people), stepMin: 0.5 }).inTime;
          expect(run(exact * 1.05)).toBe(true);
          expect(run(exact * 0.95)).toBe(false);
        },
      ),
      { numRuns: 150 },
    );
  });

  it('comes nearer to the closed form as the step shrinks (arithmetic: 3.5556 h after the opening)', () => {
    const error = (stepMin: number) => {
      const { finishedH } = simulateFinishing({ patches: [slab], hands: allDay(7.5), stepMin });
      return Math.abs((finishedH ?? Number.NaN) - (4 + 3200 / 120 / 7.5));
    };
    expect(error(0.5)).toBeLessThan(error(10));
    expect(error(0.5)).toBeLessThan(0.02);
  });

  it('people as fast as the placing keep pace in the narrowest window', () => {
    // 3 people finish 360 ft2/h against 300 placed.
    const narrow = { ...slab, areaFt2: 1200, placedUntilH: 4, windowH: 0.1 };
    expect(simulateFinishing({ patches: [narrow], hands: allDay(3) }).inTime).toBe(true);
    expect(simulateFinishing({ patches: [narrow], hands: allDay(2) }).inTime).toBe(false);
  });
});

describe('where the closed form ends (arithmetic unless said)', () => {
  it('those who place join after the last load (common practice, no source)', () => {
    // By 3 h nothing is open yet at 4 h, so four finishers and three late ones are seven.
    const joining: Hands[] = [
      { fromH: 0, untilH: 24, people: 4 },
      { fromH: 3, untilH: 24, people: 3 },
    ];
    expect(simulateFinishing({ patches: [slab], hands: joining })).toEqual(
      simulateFinishing({ patches: [slab], hands: allDay(7) }),
    );
    const quick = { ...slab, opensAfterH: 0.5, windowH: 1 };
    expect(simulateFinishing({ patches: [quick], hands: allDay(7) }).inTime).toBe(true);
    expect(simulateFinishing({ patches: [quick], hands: joining }).inTime).toBe(false);
  });

  it('a break counts: work stops and goes on after it', () => {
    const withBreak: Hands[] = [
      { fromH: 0, untilH: 5, people: 6 },
      { fromH: 5.5, untilH: 24, people: 6 },
    ];
    const whole = simulateFinishing({ patches: [slab], hands: allDay(6) });
    const broken = simulateFinishing({ patches: [slab], hands: withBreak });
    expect(broken.finishedH).toBeCloseTo((whole.finishedH ?? Number.NaN) + 0.5, 6);
    expect(broken.inTime).toBe(true);
    expect(
      simulateFinishing({
        patches: [slab],
        hands: [
          { fromH: 0, untilH: 5, people: 6 },
          { fromH: 6, untilH: 24, people: 6 },
        ],
      }).inTime,
    ).toBe(false);
  });

  it('two slabs one after another share the people', () => {
    const second = { ...slab, placedFromH: 3, placedUntilH: 6 };
    // Together 6,400 ft2 over 6 h: w A / (D + W) = 6.667.
    expect(simulateFinishing({ patches: [slab, second], hands: allDay(6) }).inTime).toBe(false);
    expect(simulateFinishing({ patches: [slab, second], hands: allDay(7) }).inTime).toBe(true);
    const apart = { ...slab, placedFromH: 10, placedUntilH: 13 };
    expect(simulateFinishing({ patches: [slab, apart], hands: allDay(6) }).inTime).toBe(true);
    expect(simulateFinishing({ patches: [apart, slab], hands: allDay(6) })).toEqual(
      simulateFinishing({ patches: [slab, apart], hands: allDay(6) }),
    );
  });

  it('a burst of placing needs more than the same area evenly', () => {
    const slow = { ...slab, placedUntilH: 2, areaFt2: 400 };
    const burst = { ...slab, placedFromH: 2, areaFt2: 2800 };
    expect(simulateFinishing({ patches: [slab], hands: allDay(6) }).inTime).toBe(true);
    expect(simulateFinishing({ patches: [slow, burst], hands: allDay(6) }).inTime).toBe(false);
    // The burst alone sets the number: w A / (D + W) = 2,800 / 120 / 3 = 7.78.
    expect(simulateFinishing({ patches: [slow, burst], hands: allDay(8) }).inTime).toBe(true);
  });

  it('people who leave before the end leave it unfinished', () => {
    const early = simulateFinishing({ patches: [slab], hands: [{ fromH: 0, untilH: 6, people: 6 }] });
    expect(early).toMatchObject({ inTime: false, finishedH: null, worstLateH: Number.POSITIVE_INFINITY });
    const nobody = simulateFinishing({ patches: [slab], hands: [] });
    expect(nobody.missedFt2).toBeCloseTo(3200, 6);
    expect(nobody.firstMissedH).toBeCloseTo(6, 6);
  });

  it('never does worse with one more person', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 12 }),
        fc.double({ min: 0.2, max: 4, noNaN: true }),
        (people, windowH) => {
          const run = (count: number) =>
            simulateFinishing({ patches: [{ ...slab, windowH }], hands: allDay(count), stepMin: 2 });
          expect(run(people + 1).missedFt2).toBeLessThanOrEqual(run(people).missedFt2 + 1e-9);
          expect(run(people + 1).worstLateH).toBeLessThanOrEqual(run(people).worstLateH + 1e-9);
        },
      ),
      { numRuns: 60 },
    );
  });

  it.each([
    ['no patches', [], allDay(3), 'patches'],
    ['a patch that ends before it begins', [{ ...slab, placedUntilH: 0 }], allDay(3), 'placedUntilH'],
    ['a patch of no area', [{ ...slab, areaFt2: 0 }], allDay(3), 'areaFt2'],
    ['hands the wrong way round', [slab], [{ fromH: 3, untilH: 2, people: 1 }], 'untilH'],
    ['fewer than no people', [slab], [{ fromH: 0, untilH: 2, people: -1 }], 'people'],
    ['an endless pour', [{ ...slab, placedUntilH: 90_000 }], allDay(3), 'stepMin'],
  ])('refuses %s', (_name, patches, hands, field) => {
    expect(() => simulateFinishing({ patches, hands })).toThrow(
      expect.objectContaining({ name: 'InputProblem', field }),
    );
  });
});
