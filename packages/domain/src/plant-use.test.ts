import { describe, expect, test } from 'vitest';
import { MS_PER_MIN } from './interval.ts';
import { drawsOfOrder, drawsOnPlant, type PlantDraw, peakHour } from './plant-use.ts';
import { at, day, ids, placed, sampleIndex, sampleSnapshot } from './testing/sample-board.ts';

const draw = (visitId: string, fromMin: number, untilMin: number, yd3PerHour: number): PlantDraw => ({
  visitId,
  startMs: fromMin * MS_PER_MIN,
  endMs: untilMin * MS_PER_MIN,
  yd3PerHour,
});

describe('the hour with most yards', () => {
  test.each([
    // Arithmetic, [visit, from, until, yd3/h] with minutes of the day.
    ['one order', [draw('a', 0, 180, 30)], 30, 0],
    ['shorter than an hour', [draw('a', 0, 20, 30)], 10, -40],
    ['two at once', [draw('a', 0, 180, 30), draw('b', 60, 120, 20)], 50, 60],
    ['touching', [draw('a', 0, 60, 30), draw('b', 60, 120, 20)], 30, 0],
    ['half an hour of each', [draw('a', 0, 30, 40), draw('b', 30, 60, 20)], 30, 0],
    ['an hour that begins between edges', [draw('a', 0, 60, 60), draw('b', 30, 45, 60)], 75, 0],
    ['another order elsewhere', [draw('a', 0, 60, 10), draw('b', 600, 900, 90)], 10, 0],
  ])('%s', (_name, draws, yd3, fromMin) => {
    const peak = peakHour(draws, 'a');
    expect(peak?.yd3).toBeCloseTo(yd3, 9);
    expect(peak?.hour.startMs).toBe(fromMin * MS_PER_MIN);
  });

  test('is none for a visit that takes nothing', () => {
    expect(peakHour([draw('a', 0, 60, 10)], 'b')).toBeNull();
    expect(peakHour([], 'a')).toBeNull();
  });
});

describe('an order at the plant', () => {
  const [plant] = sampleSnapshot().plants;
  if (!plant) throw new Error('The sample board has a plant');

  test('is spread over its spacing from the first batching, the short load last', () => {
    const draws = drawsOfOrder(sampleIndex(), plant, {
      visitId: ids.driveway,
      orderedYd3: 22.5,
      loadYd3: 9,
      spacingMin: 18,
      during: { startMs: at(day, 7), endMs: at(day, 8) },
    });
    // 10 min batch and check and 15 min haul (4.2 miles by the default rules, rounded up).
    expect(draws.map((one) => [one.startMs, one.endMs, one.yd3PerHour])).toEqual([
      [at(day, 6, 35), at(day, 7, 11), 30],
      [at(day, 7, 11), at(day, 7, 29), 15],
    ]);
  });

  test('nine yards every 18 min are 30 yd3/h, although four loads begin in some hours', () => {
    const draws = drawsOfOrder(sampleIndex(), plant, {
      visitId: ids.driveway,
      orderedYd3: 90,
      loadYd3: 9,
      spacingMin: 18,
      during: { startMs: at(day, 7), endMs: at(day, 10) },
    });
    expect(peakHour(draws, ids.driveway)?.yd3).toBeCloseTo(30, 9);
  });

  test('the rail shows every order of the plant by start', () => {
    let index = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 8));
    index = placed(index, ids.floor, ids.southCrew, at(day, 6));
    expect(drawsOnPlant(index, ids.plant).map((one) => one.visitId)).toEqual([
      ids.floor,
      ids.driveway,
      ids.driveway,
    ]);
    expect(drawsOnPlant(index, 'unknown')).toEqual([]);
  });
});
