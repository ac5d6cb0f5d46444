import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  contains,
  covers,
  intersection,
  lengthMin,
  makeInterval,
  overlaps,
  peakUse,
  widen,
} from './interval.ts';
import { InputProblem } from './problem.ts';

const HOUR = 3_600_000;
const between = (startHour: number, endHour: number) => makeInterval(startHour * HOUR, endHour * HOUR);

describe('half-open intervals', () => {
  // Arithmetic: follows from [start, end).
  const rows: [name: string, a: [number, number], b: [number, number], overlap: boolean][] = [
    ['touching ends do not overlap', [8, 10], [10, 12], false],
    ['touching starts do not overlap', [10, 12], [8, 10], false],
    ['a shared hour overlaps', [8, 11], [10, 12], true],
    ['one inside the other', [8, 16], [10, 11], true],
    ['equal', [8, 10], [8, 10], true],
    ['apart', [8, 9], [10, 11], false],
    ['across midnight', [20, 27], [26, 30], true],
  ];
  it.each(rows)('%s', (_name, a, b, overlap) => {
    expect(overlaps(between(...a), between(...b))).toBe(overlap);
    expect(intersection(between(...a), between(...b)) !== null).toBe(overlap);
  });

  it('a travel buffer turns touching into overlapping', () => {
    expect(overlaps(widen(between(8, 10), 0, 1), between(10, 12))).toBe(true);
    expect(widen(between(8, 10), 30, 45)).toEqual({ startMs: 7.5 * HOUR, endMs: 10.75 * HOUR });
  });

  it('holds its start and not its end', () => {
    expect(contains(between(8, 10), 8 * HOUR)).toBe(true);
    expect(contains(between(8, 10), 10 * HOUR)).toBe(false);
    expect(covers(between(8, 10), between(8, 10))).toBe(true);
    expect(covers(between(8, 10), between(8, 11))).toBe(false);
    expect(lengthMin(between(8, 10))).toBe(120);
  });

  it.each([
    ['zero length', 8, 8],
    ['reversed', 10, 8],
    ['not a number', Number.NaN, 8],
    ['endless', 8, Number.POSITIVE_INFINITY],
  ])('refuses %s', (_name, start, end) => {
    expect(() => makeInterval(start, end)).toThrow(InputProblem);
  });

  it('refuses to shrink by widening', () => {
    expect(() => widen(between(8, 10), -1, 0)).toThrow(/beforeMin/);
  });
});

describe('peakUse', () => {
  const use = (startHour: number, endHour: number, amount: number) => ({
    ...between(startHour, endHour),
    amount,
  });

  it('adds what runs together and not what touches', () => {
    expect(peakUse([])).toEqual({ amount: 0, interval: null });
    expect(peakUse([use(7, 9, 40), use(9, 11, 40)]).amount).toBe(40);
    expect(peakUse([use(7, 10, 40), use(8, 9, 30), use(9, 12, 20)])).toEqual({
      amount: 70,
      interval: between(8, 9),
    });
  });

  it('keeps decimals exact (0.1 + 0.2 is 0.3)', () => {
    expect(peakUse([use(7, 9, 0.1), use(7, 9, 0.2)]).amount).toBe(0.3);
  });

  it('refuses negative amounts', () => {
    expect(() => peakUse([use(7, 9, -1)])).toThrow(/amount/);
  });

  it('equals the highest total over all starts (arithmetic)', () => {
    const one = fc.record({
      start: fc.integer({ min: 0, max: 20 }),
      length: fc.integer({ min: 1, max: 8 }),
      amount: fc.integer({ min: 0, max: 60 }),
    });
    fc.assert(
      fc.property(fc.array(one, { maxLength: 12 }), (list) => {
        const uses = list.map((item) => use(item.start, item.start + item.length, item.amount));
        const totalAt = (ms: number) =>
          uses.reduce((sum, item) => sum + (contains(item, ms) ? item.amount : 0), 0);
        const peak = peakUse(uses);
        expect(peak.amount).toBe(Math.max(0, ...uses.map((item) => totalAt(item.startMs))));
        if (peak.interval) {
          expect(totalAt(peak.interval.startMs)).toBe(peak.amount);
          expect(totalAt(peak.interval.endMs - 1)).toBe(peak.amount);
          expect(totalAt(peak.interval.endMs)).not.toBe(peak.amount);
        }
      }),
    );
  });
});
