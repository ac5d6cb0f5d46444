import { requireInRange, requirePositive } from './problem.ts';
import type { Finish, PlacingMethod } from './vocabulary.ts';

/** What a finish costs in work, and where the figure comes from. */
export interface WorkRate {
  readonly personHoursPerFt2: number;
  /** One finisher's day that the figure is derived from. */
  readonly ft2PerDay: number;
  readonly source: string;
}

/** One slab, placed evenly. */
export interface EvenPour {
  readonly areaFt2: number;
  /** From the first to the last concrete placed, hours. */
  readonly placingHours: number;
  readonly personHoursPerFt2: number;
}

export interface PeopleToFinish {
  /** Whole people. */
  readonly people: number;
  /** The same before rounding up. */
  readonly exact: number;
  /** With that many, the finishing front goes as fast as the placing, however narrow the window. */
  readonly keepsPace: boolean;
}

const HOURS_PER_DAY = 8;
/** Absorbs binary rounding before people are rounded up; far below any figure of the trade. */
const NOISE = 1e-9;

/**
 * Default work by finish; a company's own rates replace them. Common practice, no source: the upper end
 * of a finisher's usual day (float or broom 500 to 800 ft2, hard trowel 300 to 500, exposed aggregate 200
 * to 350, stamped 150 to 300) over 8 hours. The upper end, because part of such a day is waiting for the set,
 * which is no work; it agrees with one finisher per 500 to 600 ft2 of exterior slab over a five-hour run.
 * `trowel` stands halfway between broom and hard trowel.
 */
export const workRates: Readonly<Record<Finish, WorkRate>> = {
  float: workRate(800),
  broom: workRate(800),
  trowel: workRate(650),
  'hard-trowel': workRate(500),
  exposed: workRate(350),
  stamped: workRate(300),
};

/**
 * People per 10 yd3/h placed. Common practice, no source: 3 to 4 by chute, of which the lower end; buggies
 * take one more to wheel, a boom spares one.
 */
export const placersPer10Yd3PerHour: Readonly<Record<PlacingMethod, number>> = {
  chute: 3,
  buggy: 4,
  'line-pump': 3,
  'boom-pump': 2,
};

/** What one crew finishes in a day, ft2, by tool (published: Concrete Construction, matching power trowels). */
export const toolOutputFt2PerDay = { hand: 600, 'walk-behind': 1500, 'ride-on': 3000 } as const;

/** Crew-days that an area takes with a tool: 1,200 ft2 by hand is 2.0. */
export function crewDays(areaFt2: number, tool: keyof typeof toolOutputFt2PerDay): number {
  return requirePositive('areaFt2', areaFt2) / toolOutputFt2PerDay[tool];
}

/** Person-hours per ft2 of a finish: the company's own figure where it has one. */
export function workRateFor(finish: Finish, overrides: Partial<Record<Finish, number>> = {}): number {
  return requirePositive(
    'workRatesPersonHoursPerFt2',
    overrides[finish] ?? workRates[finish].personHoursPerFt2,
  );
}

/**
 * People needed to finish a slab that is placed evenly, each patch workable for `windowH` hours: the work
 * available between the opening of the first patch and the closing of the last, first in first out, gives
 * N >= w A / (D + W), rounded up. That bound is also enough: behind an even placing the front's lateness grows
 * evenly, so it is worst at the last patch. Arithmetic on ACI 302.1R's window of finishability.
 */
export function peopleToFinish(input: EvenPour & { windowH: number }): PeopleToFinish {
  requireEvenPour(input);
  requireInRange('windowH', input.windowH, 0, 1000);
  const exact = (input.personHoursPerFt2 * input.areaFt2) / (input.placingHours + input.windowH);
  const people = Math.max(1, Math.ceil(exact - NOISE));
  return { people, exact, keepsPace: keepsPace({ ...input, people }) };
}

/**
 * Whether the finishing front is as fast as the placing (N / w >= A / D); then no window is too narrow.
 * 3 people at 1/120 person-hour per ft2 finish 360 ft2/h against 300 placed.
 */
export function keepsPace(input: EvenPour & { people: number }): boolean {
  requireEvenPour(input);
  requirePositive('people', input.people);
  const finishedFt2PerHour = input.people / input.personHoursPerFt2;
  return finishedFt2PerHour >= input.areaFt2 / input.placingHours - NOISE;
}

/**
 * Hours from the opening of the first patch until all is finished, for an even placing: as long as the placing
 * where the front keeps pace, else as long as the work takes. The first patch opens at its initial set.
 */
export function finishingHours(input: EvenPour & { people: number }): number {
  requireEvenPour(input);
  requirePositive('people', input.people);
  return Math.max(input.placingHours, (input.personHoursPerFt2 * input.areaFt2) / input.people);
}

/**
 * People who place at a rate, rounded up, at least 2 (one on the chute or hose, one on the rake). They join
 * the finishers only after the last load. Common practice, no source.
 */
export function peopleToPlace(
  placingRateYd3PerHour: number,
  method: PlacingMethod,
  overridesPer10Yd3PerHour: Partial<Record<PlacingMethod, number>> = {},
): number {
  requirePositive('placingRateYd3PerHour', placingRateYd3PerHour);
  const per10 = requirePositive(
    'placersPer10Yd3PerHour',
    overridesPer10Yd3PerHour[method] ?? placersPer10Yd3PerHour[method],
  );
  return Math.max(2, Math.ceil((placingRateYd3PerHour * per10) / 10 - NOISE));
}

function workRate(ft2PerDay: number): WorkRate {
  return {
    personHoursPerFt2: HOURS_PER_DAY / ft2PerDay,
    ft2PerDay,
    source: `common practice, no source: ${HOURS_PER_DAY} h over ${ft2PerDay} ft2 per finisher per day`,
  };
}

function requireEvenPour(input: EvenPour): void {
  requirePositive('areaFt2', input.areaFt2);
  requirePositive('placingHours', input.placingHours);
  requirePositive('personHoursPerFt2', input.personHoursPerFt2);
}
