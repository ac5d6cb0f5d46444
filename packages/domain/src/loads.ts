import { MS_PER_MIN } from './interval.ts';
import { InputProblem, requireFinite, requireInRange, requirePositive, requireWhole } from './problem.ts';
import { temperatureFactor } from './setting.ts';

/** One truck at the site. Instants in epoch milliseconds. */
export interface ScheduledLoad {
  readonly arriveMs: number;
  /** After `arriveMs` when the truck before is still discharging. */
  readonly dischargeStartMs: number;
  readonly dischargedMs: number;
  readonly yd3: number;
}

/** The minutes of one truck's round, from the plant and back. */
export interface Round {
  readonly batchAndCheckMin: number;
  readonly travelMin: number;
  readonly unloadMin: number;
  readonly washMin: number;
  readonly returnMin: number;
}

/** What a simulated rotation came to; minutes count from the first batching. */
export interface Rotation {
  /** From the first discharge's start to the last one's end. */
  readonly pourMin: number;
  /** Time within the pour in which no truck discharges. */
  readonly crewIdleMin: number;
  /** Oldest concrete at the end of its discharge. */
  readonly oldestMin: number;
  readonly loads: readonly {
    readonly truck: number;
    readonly batchMin: number;
    readonly arriveMin: number;
    readonly dischargeStartMin: number;
    readonly dischargedMin: number;
  }[];
}

const MAX_LOADS = 2000;
/** Absorbs binary rounding before a count is rounded up; far below any figure of the trade. */
const NOISE = 1e-9;

/**
 * Truck loads of an order, the short one last: 74 yd3 in tens is seven tens and a four. Nothing
 * ordered is no truck. Figures are kept to 1e-6 yd3, so decimals such as 12.6 in 4.2s come out even.
 * Throws InputProblem for a negative order or a load that is not above 0.
 */
export function loadsForOrder(orderedYd3: number, loadYd3: number): number[] {
  requireInRange('orderedYd3', orderedYd3, 0, 1e6);
  requireInRange('loadYd3', loadYd3, 0.01, 1e6);
  let leftMicro = Math.round(orderedYd3 * 1e6);
  const fullMicro = Math.round(loadYd3 * 1e6);
  if (leftMicro / fullMicro > MAX_LOADS) {
    throw new InputProblem('orderedYd3', orderedYd3, `at most ${MAX_LOADS} loads of ${loadYd3} yd3`);
  }
  const loads: number[] = [];
  for (; leftMicro > 0; leftMicro -= fullMicro) loads.push(Math.min(leftMicro, fullMicro) / 1e6);
  return loads;
}

/** Minutes between trucks that keep up a placing rate: 10 yd3 at 40 yd3/h is 15. Arithmetic. */
export function spacingMinForRate(loadYd3: number, placingRateYd3PerHour: number): number {
  requirePositive('loadYd3', loadYd3);
  requirePositive('placingRateYd3PerHour', placingRateYd3PerHour);
  return (60 * loadYd3) / placingRateYd3PerHour;
}

/** Minutes until the truck is back at the plant to load again. */
export function roundTripMin(round: Round): number {
  requireRound(round);
  return round.batchAndCheckMin + round.travelMin + round.unloadMin + round.washMin + round.returnMin;
}

/**
 * Trucks that keep a discharge going without a gap: the round trip over the unload interval, rounded
 * up, and never more than loads. Published planning example: 65 min over 10 is 7 trucks for 15 loads.
 */
export function trucksInRotation(input: {
  roundTripMin: number;
  unloadIntervalMin: number;
  loads: number;
}): number {
  requirePositive('roundTripMin', input.roundTripMin);
  requirePositive('unloadIntervalMin', input.unloadIntervalMin);
  requireWhole('loads', input.loads, 0, MAX_LOADS);
  return Math.min(input.loads, Math.ceil(input.roundTripMin / input.unloadIntervalMin - NOISE));
}

/**
 * Minutes from batching to the end of discharge. ASTM C94/C94M before 2021 set 90; since C94/C94M-21 the
 * limit is the order's own and stands on the ticket, so compare with that.
 */
export function ageAtDischargeMin(input: {
  batchAndCheckMin: number;
  travelMin: number;
  waitMin?: number;
  unloadMin: number;
}): number {
  const parts = [input.batchAndCheckMin, input.travelMin, input.waitMin ?? 0, input.unloadMin];
  for (const part of parts) requireInRange('minutes', part, 0, 1e5);
  return parts.reduce((sum, part) => sum + part, 0);
}

/** The instant the plant starts to batch a load that is wanted on site at `arriveMs`. */
export function batchAtMs(arriveMs: number, haul: { batchAndCheckMin: number; travelMin: number }): number {
  requireFinite('arriveMs', arriveMs);
  requireInRange('batchAndCheckMin', haul.batchAndCheckMin, 0, 1e5);
  requireInRange('travelMin', haul.travelMin, 0, 1e5);
  return arriveMs - (haul.batchAndCheckMin + haul.travelMin) * MS_PER_MIN;
}

/**
 * When each load arrives and is discharged: one every `spacingMin`, one discharging at a time, each for
 * `unloadMin` (a short load too, since the truck has to be placed and rinsed all the same).
 */
export function loadSchedule(input: {
  firstLoadMs: number;
  loadsYd3: readonly number[];
  spacingMin: number;
  unloadMin: number;
}): ScheduledLoad[] {
  requireFinite('firstLoadMs', input.firstLoadMs);
  requirePositive('spacingMin', input.spacingMin);
  requirePositive('unloadMin', input.unloadMin);
  requireWhole('loadsYd3.length', input.loadsYd3.length, 0, MAX_LOADS);
  const unloadMs = Math.round(input.unloadMin * MS_PER_MIN);
  let freeMs = input.firstLoadMs;
  return input.loadsYd3.map((yd3, index) => {
    requirePositive('loadsYd3', yd3);
    const arriveMs = Math.round(input.firstLoadMs + index * input.spacingMin * MS_PER_MIN);
    const dischargeStartMs = Math.max(arriveMs, freeMs);
    const dischargedMs = dischargeStartMs + unloadMs;
    freeMs = dischargedMs;
    return { arriveMs, dischargeStartMs, dischargedMs, yd3 };
  });
}

/** The longest stretch between one load's end and the next one's start, minutes; 0 for a single load. */
export function longestGapMin(loads: readonly ScheduledLoad[]): number {
  let longestMs = 0;
  let previousMs: number | null = null;
  for (const load of loads) {
    if (previousMs !== null) longestMs = Math.max(longestMs, load.dischargeStartMs - previousMs);
    previousMs = load.dischargedMs;
  }
  return longestMs / MS_PER_MIN;
}

/**
 * The spacing beyond which a placed edge is too stiff to knit with the next load, minutes: the company's
 * figure at 70 F, halved by each 20 F more and doubled by each 20 F less, as setting is. Common practice, no source.
 */
export function coldJointLimitMin(input: { limitAt70FMin: number; concreteTempF: number }): number {
  requirePositive('limitAt70FMin', input.limitAt70FMin);
  return input.limitAt70FMin * temperatureFactor(input.concreteTempF);
}

/**
 * A rotation of `trucks` hauling `loads`, one loading place at the plant and one discharging place at the
 * site. No truck is batched before its turn (one each `unloadMin`), so none arrives early.
 * `loadingMin` is the part of `batchAndCheckMin` that keeps the loading place busy.
 */
export function simulateRotation(input: {
  trucks: number;
  loads: number;
  round: Round;
  loadingMin: number;
}): Rotation {
  const { round } = input;
  requireRound(round);
  requireWhole('trucks', input.trucks, 1, MAX_LOADS);
  requireWhole('loads', input.loads, 1, MAX_LOADS);
  requireInRange('loadingMin', input.loadingMin, 0, round.batchAndCheckMin);

  const truckFreeMin = Array.from({ length: input.trucks }, () => 0);
  let plantFreeMin = 0;
  let siteFreeMin = 0;
  const loads = Array.from({ length: input.loads }, (_, index) => {
    const truck = index % input.trucks;
    const batchMin = Math.max(index * round.unloadMin, truckFreeMin[truck] ?? 0, plantFreeMin);
    plantFreeMin = batchMin + input.loadingMin;
    const arriveMin = batchMin + round.batchAndCheckMin + round.travelMin;
    const dischargeStartMin = Math.max(arriveMin, siteFreeMin);
    const dischargedMin = dischargeStartMin + round.unloadMin;
    siteFreeMin = dischargedMin;
    truckFreeMin[truck] = dischargedMin + round.washMin + round.returnMin;
    return { truck, batchMin, arriveMin, dischargeStartMin, dischargedMin };
  });

  const pourMin = siteFreeMin - (loads[0]?.dischargeStartMin ?? 0);
  const oldestMin = loads.reduce((oldest, load) => Math.max(oldest, load.dischargedMin - load.batchMin), 0);
  return { pourMin, crewIdleMin: pourMin - input.loads * round.unloadMin, oldestMin, loads };
}

function requireRound(round: Round): void {
  requireInRange('batchAndCheckMin', round.batchAndCheckMin, 0, 1e5);
  requireInRange('travelMin', round.travelMin, 0, 1e5);
  requirePositive('unloadMin', round.unloadMin);
  requireInRange('washMin', round.washMin, 0, 1e5);
  requireInRange('returnMin', round.returnMin, 0, 1e5);
}
