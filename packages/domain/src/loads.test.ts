import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  ageAtDischargeMin,
  batchAtMs,
  coldJointLimitMin,
  loadSchedule,
  loadsForOrder,
  longestGapMin,
  roundTripMin,
  simulateRotation,
  spacingMinForRate,
  trucksInRotation,
} from './loads.ts';
import { InputProblem } from './problem.ts';
import { formatClock, instantAt } from './zone.ts';

/** A cement producer's published planning note: load 5, check 5, travel 20, unload 10, wash 5, return 20. */
const near = { batchAndCheckMin: 10, travelMin: 20, unloadMin: 10, washMin: 5, returnMin: 20 };
/** The same with 30 minutes of road each way. */
const far = { ...near, travelMin: 30, returnMin: 30 };

describe('loadsForOrder', () => {
  const rows: [name: string, orderedYd3: number, loadYd3: number, loads: number[]][] = [
    ['74 in tens is seven tens and a four (arithmetic)', 74, 10, [10, 10, 10, 10, 10, 10, 10, 4]],
    ['150 in tens (published: planning note, 15 loads)', 150, 10, Array.from({ length: 15 }, () => 10)],
    ['less than one truck', 3.75, 10, [3.75]],
    ['decimals come out even', 12.6, 4.2, [4.2, 4.2, 4.2]],
    ['nothing ordered is no truck', 0, 10, []],
    ['quarter left over', 10.25, 10, [10, 0.25]],
  ];
  it.each(rows)('%s', (_name, orderedYd3, loadYd3, loads) => {
    expect(loadsForOrder(orderedYd3, loadYd3)).toEqual(loads);
  });
  it('adds up to the order, short load last (arithmetic)', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 4000 }), fc.integer({ min: 10, max: 60 }), (ordered, load) => {
        const loads = loadsForOrder(ordered / 4, load / 4);
        expect(loads.reduce((sum, yd3) => sum + yd3, 0)).toBe(ordered / 4);
        expect(loads.slice(0, -1).every((yd3) => yd3 === load / 4)).toBe(true);
        expect(loads.length).toBe(Math.ceil(ordered / load));
      }),
    );
  });
  it.each([
    ['negative', -1, 10],
    ['no number', Number.NaN, 10],
    ['empty trucks', 10, 0],
    ['endless', 1e6, 0.25],
  ])('refuses %s', (_name, orderedYd3, loadYd3) => {
    expect(() => loadsForOrder(orderedYd3, loadYd3)).toThrow(InputProblem);
  });
});

describe('spacing, trucks and age', () => {
  it.each([
    [10, 40, 15],
    [9, 30, 18],
    [10, 60, 10],
    [8, 25, 19.2],
    [9, 45, 12],
  ])('%d yd3 loads at %d yd3/h (arithmetic)', (loadYd3, rate, spacingMin) => {
    expect(spacingMinForRate(loadYd3, rate)).toBeCloseTo(spacingMin, 9);
  });

  it('published planning note: 65 min round trip, 7 trucks', () => {
    expect(roundTripMin(near)).toBe(65);
    expect(trucksInRotation({ roundTripMin: 65, unloadIntervalMin: 10, loads: 15 })).toBe(7);
  });
  it.each([
    ['30 min of road: 8.5 is 9', 85, 10, 15, 9],
    ['6.5 is never 6', 65, 10, 15, 7],
    ['even division is not one more', 60, 10, 15, 6],
    ['never more trucks than loads', 65, 10, 3, 3],
    ['no loads, no trucks', 65, 10, 0, 0],
  ])('%s (arithmetic)', (_name, trip, interval, loads, trucks) => {
    expect(trucksInRotation({ roundTripMin: trip, unloadIntervalMin: interval, loads })).toBe(trucks);
  });

  it('oldest concrete of the planning note is 40 min (arithmetic)', () => {
    expect(ageAtDischargeMin({ batchAndCheckMin: 10, travelMin: 20, unloadMin: 10 })).toBe(40);
    expect(ageAtDischargeMin({ batchAndCheckMin: 10, travelMin: 20, waitMin: 25, unloadMin: 10 })).toBe(65);
  });
  it('batches at 06:30 for 07:00 on site (arithmetic)', () => {
    const arriveMs = instantAt('2026-06-10', 420, 'America/Denver');
    expect(formatClock(batchAtMs(arriveMs, near), 'America/Denver', 'en')).toBe('6:30 AM');
  });
  it('refuses rates and intervals that are not above 0', () => {
    expect(() => spacingMinForRate(10, 0)).toThrow(/placingRateYd3PerHour/);
    expect(() => trucksInRotation({ roundTripMin: 65, unloadIntervalMin: 0, loads: 3 })).toThrow(
      InputProblem,
    );
    expect(() => ageAtDischargeMin({ batchAndCheckMin: 10, travelMin: -1, unloadMin: 10 })).toThrow(
      InputProblem,
    );
  });
});

describe('simulateRotation (published planning note; own event simulation)', () => {
  const rows: [name: string, round: typeof near, trucks: number, pourMin: number, crewIdleMin: number][] = [
    ['7 trucks', near, 7, 150, 0],
    ['6 trucks', near, 6, 160, 10],
    ['5 trucks', near, 5, 180, 30],
    ['30 min of road, 9 trucks', far, 9, 150, 0],
    ['30 min of road, 8 trucks', far, 8, 155, 5],
    ['30 min of road, 7 trucks', far, 7, 180, 30],
  ];
  it.each(rows)('%s', (_name, round, trucks, pourMin, crewIdleMin) => {
    expect(simulateRotation({ trucks, loads: 15, round, loadingMin: 5 })).toMatchObject({
      pourMin,
      crewIdleMin,
    });
  });
  it('oldest concrete is 40 min, the first load of 30 min on the road', () => {
    const rotation = simulateRotation({ trucks: 7, loads: 15, round: near, loadingMin: 5 });
    expect(rotation.oldestMin).toBe(40);
    expect(rotation.loads[0]).toMatchObject({ batchMin: 0, arriveMin: 30, dischargedMin: 40 });
  });
  it('the closed form is the least number of trucks that never leaves the crew idle', () => {
    const minutes = fc.integer({ min: 5, max: 60 });
    fc.assert(
      fc.property(
        minutes,
        minutes,
        fc.integer({ min: 5, max: 30 }),
        fc.integer({ min: 1, max: 30 }),
        (travel, back, unload, loads) => {
          const round = { ...near, travelMin: travel, returnMin: back, unloadMin: unload };
          const trucks = trucksInRotation({
            roundTripMin: roundTripMin(round),
            unloadIntervalMin: unload,
            loads,
          });
          const idle = (count: number) =>
            simulateRotation({ trucks: count, loads, round, loadingMin: 5 }).crewIdleMin;
          expect(idle(trucks)).toBe(0);
          if (trucks > 1) expect(idle(trucks - 1)).toBeGreaterThan(0);
        },
      ),
    );
  });
  it('refuses no trucks', () => {
    expect(() => simulateRotation({ trucks: 0, loads: 15, round: near, loadingMin: 5 })).toThrow(/trucks/);
  });
});

describe('loadSchedule', () => {
  const first = instantAt('2026-10-31', 1380, 'America/Chicago');
  const clock = (ms: number) => formatClock(ms, 'America/Chicago', 'en');

  it('runs through the autumn change of clocks in elapsed minutes (arithmetic)', () => {
    const loads = loadSchedule({
      firstLoadMs: first,
      loadsYd3: [10, 10, 10, 4],
      spacingMin: 60,
      unloadMin: 10,
    });
    expect(loads.map((load) => clock(load.arriveMs))).toEqual(['11:00 PM', '12:00 AM', '1:00 AM', '1:00 AM']);
    expect(loads.map((load) => (load.dischargedMs - first) / 60_000)).toEqual([10, 70, 130, 190]);
    expect(longestGapMin(loads)).toBe(50);
  });
  it('lets a truck wait while the one before discharges', () => {
    const loads = loadSchedule({ firstLoadMs: 0, loadsYd3: [10, 10], spacingMin: 10, unloadMin: 15 });
    expect(loads[1]).toEqual({
      arriveMs: 600_000,
      dischargeStartMs: 900_000,
      dischargedMs: 1_800_000,
      yd3: 10,
    });
    expect(longestGapMin(loads)).toBe(0);
    expect(longestGapMin(loads.slice(0, 1))).toBe(0);
  });
  it('refuses spacing 0 and empty loads', () => {
    expect(() => loadSchedule({ firstLoadMs: 0, loadsYd3: [10], spacingMin: 0, unloadMin: 10 })).toThrow(
      /spacingMin/,
    );
    expect(() => loadSchedule({ firstLoadMs: 0, loadsYd3: [0], spacingMin: 10, unloadMin: 10 })).toThrow(
      /loadsYd3/,
    );
  });
});

describe('coldJointLimitMin (common practice, no source; scaled as setting is)', () => {
  it.each([
    [70, 45],
    [90, 22.5],
    [50, 90],
  ])('45 min at 70 F is, at %d F', (concreteTempF, limitMin) => {
    expect(coldJointLimitMin({ limitAt70FMin: 45, concreteTempF })).toBeCloseTo(limitMin, 9);
  });
});
