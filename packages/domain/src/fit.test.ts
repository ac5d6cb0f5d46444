import { describe, expect, test } from 'vitest';
import { nearestFit } from './fit.ts';
import { InputProblem } from './problem.ts';
import { at, codesOf, day, ids, nowMs, placed, sampleIndex } from './testing/sample-board.ts';

// The north crew is on the driveway from 6:00 to 14:15, at the patio's own site.
const index = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));

describe('the nearest fit', () => {
  test('is the instant asked for when nothing stops there, the asked crew before the others', () => {
    const [first, second] = nearestFit(index, ids.patio, at('2026-06-11', 7), {
      nowMs,
      crewId: ids.southCrew,
    });
    expect(first).toMatchObject({ crewId: ids.southCrew, crewStartMs: at('2026-06-11', 7), worst: null });
    expect(second).toMatchObject({ crewId: ids.northCrew, crewStartMs: at('2026-06-11', 7) });
  });

  test('is one per crew and day, nearest first, and never a stop', () => {
    const fits = nearestFit(index, ids.walk, at(day, 9), { nowMs, crewId: ids.northCrew, limit: 6 });
    expect(fits).toHaveLength(6);
    const distances = fits.map((fit) => Math.abs(fit.crewStartMs - at(day, 9)));
    expect([...distances].sort((a, b) => a - b)).toEqual(distances);
    for (const fit of fits)
      expect(codesOf(fit.findings).filter((code) => code.startsWith('stop'))).toEqual([]);
    // The north crew has to come over from the orchard: half an hour after 14:15, at the next step.
    expect(fits.find((fit) => fit.crewId === ids.northCrew)?.crewStartMs).toBe(at(day, 15));
  });

  test('keeps to the hours shown, unless night was asked for', () => {
    const evening = nearestFit(index, ids.patio, at(day, 19, 30), {
      nowMs,
      crewIds: [ids.northCrew],
      sinceMs: at(day, 19, 45),
    });
    for (const fit of evening) expect(fit.crewStartMs).toBeGreaterThanOrEqual(at('2026-06-10', 4));
    expect(evening.length).toBeGreaterThan(0);
  });

  test('goes neither before now nor past the end', () => {
    const fits = nearestFit(index, ids.patio, at('2026-06-08', 8), {
      nowMs,
      limit: 50,
      untilMs: at('2026-06-10', 0),
    });
    for (const fit of fits) {
      expect(fit.crewStartMs).toBeGreaterThanOrEqual(nowMs);
      expect(fit.crewStartMs).toBeLessThan(at('2026-06-10', 0));
    }
    expect(fits.length).toBeGreaterThan(1);
  });

  test('can be without cautions', () => {
    const fits = nearestFit(index, ids.walk, at(day, 7), { nowMs, withoutCautions: true });
    // 800 ft2 in one load take four finishers, and each crew has three.
    expect(fits).toEqual([]);
    const patio = nearestFit(index, ids.patio, at('2026-06-11', 7), {
      nowMs,
      withoutCautions: true,
      limit: 1,
    });
    expect(patio).toHaveLength(1);
  });

  test('is nothing where nothing fits', () => {
    const closed = sampleIndex({
      plants: index.plants.size
        ? [...index.plants.values()].map((one) => ({
            ...one,
            hours: [null, null, null, null, null, null, null],
          }))
        : [],
    });
    expect(nearestFit(closed, ids.patio, at(day, 7), { nowMs })).toEqual([]);
    expect(nearestFit(index, ids.patio, at(day, 7), { nowMs, crewIds: [] })).toEqual([]);
  });

  test('refuses impossible options by name', () => {
    expect(() => nearestFit(index, ids.patio, at(day, 7), { nowMs, stepMin: 0 })).toThrow(InputProblem);
    expect(() => nearestFit(index, 'x', at(day, 7), { nowMs })).toThrow(/visitId/);
    expect(() => nearestFit(index, ids.patio, Number.NaN, { nowMs })).toThrow(/fromMs/);
  });
});
