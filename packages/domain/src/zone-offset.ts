import { IANAZone } from 'luxon';
import { InputProblem } from './problem.ts';

const MS_PER_DAY = 86_400_000;
/** Bounds the memory of a process that sees many days; about 50 years of days in one zone. */
const MAX_DAYS_KEPT = 20_000;
/** What a JavaScript Date can hold, with a day to spare at each end. */
const MAX_MS = 8.64e15 - 2 * MS_PER_DAY;

/** The offset through one UTC day: `beforeMs` until `changeMs`, `afterMs` from then on. */
interface UtcDay {
  readonly beforeMs: number;
  readonly changeMs: number;
  readonly afterMs: number;
}

interface ZoneCache {
  readonly zone: IANAZone;
  readonly days: Map<number, UtcDay>;
}

const zones = new Map<string, ZoneCache>();

/** Whether the text names an IANA time zone ("America/Chicago"). Bare offsets ("+05:30") are not zones. */
export function isZone(zone: string): boolean {
  return /^[A-Za-z]/.test(zone) && IANAZone.isValidZone(zone);
}

/**
 * Milliseconds to add to the instant to read the zone's wall clock. Remembered per zone and UTC
 * day, because a formatter call for each of thousands of visits is too slow while a card is held.
 * Throws InputProblem for an unknown zone or an instant outside the calendar.
 */
export function offsetMsAt(ms: number, zone: string): number {
  const cache = zones.get(zone) ?? openZone(zone);
  if (!(Math.abs(ms) <= MAX_MS)) throw new InputProblem('ms', ms, 'an instant in epoch milliseconds');
  const dayNumber = Math.floor(ms / MS_PER_DAY);
  let day = cache.days.get(dayNumber);
  if (!day) {
    day = readUtcDay(cache.zone, dayNumber * MS_PER_DAY);
    if (cache.days.size >= MAX_DAYS_KEPT) cache.days.clear();
    cache.days.set(dayNumber, day);
  }
  return ms < day.changeMs ? day.beforeMs : day.afterMs;
}

function openZone(name: string): ZoneCache {
  if (typeof name !== 'string' || !isZone(name)) {
    throw new InputProblem('zone', name, 'an IANA time zone such as America/Chicago');
  }
  const cache = { zone: IANAZone.create(name), days: new Map<number, UtcDay>() };
  zones.set(name, cache);
  return cache;
}

function readUtcDay(zone: IANAZone, startMs: number): UtcDay {
  const offsetAt = (ms: number): number => Math.round(zone.offset(ms) * 60_000);
  const beforeMs = offsetAt(startMs);
  const afterMs = offsetAt(startMs + MS_PER_DAY);
  if (beforeMs === afterMs) return { beforeMs, changeMs: Number.POSITIVE_INFINITY, afterMs };
  // Clocks change on whole seconds; the change is the first second with another offset.
  let lowS = startMs / 1000;
  let highS = lowS + MS_PER_DAY / 1000;
  while (highS - lowS > 1) {
    const middleS = Math.floor((lowS + highS) / 2);
    if (offsetAt(middleS * 1000) === beforeMs) lowS = middleS;
    else highS = middleS;
  }
  return { beforeMs, changeMs: highS * 1000, afterMs };
}
