import { InputProblem, requireInRange } from './problem.ts';

/**
 * A stretch of time in epoch milliseconds, half-open: it holds `startMs` and not `endMs`, so
 * [8, 10) and [10, 12) touch without overlapping. Never empty when made by {@link makeInterval}.
 */
export interface Interval {
  readonly startMs: number;
  readonly endMs: number;
}

/** An interval that takes `amount` of something limited, such as yd3 per hour of a plant. */
export interface Use extends Interval {
  readonly amount: number;
}

/** The highest simultaneous total, and the first stretch in which it is reached (null when nothing is used). */
export interface Peak {
  readonly amount: number;
  readonly interval: Interval | null;
}

export const MS_PER_MIN = 60_000;
export const MS_PER_HOUR = 3_600_000;

/** Makes an interval; throws InputProblem when it would be empty, reversed or not finite. */
export function makeInterval(startMs: number, endMs: number): Interval {
  if (!Number.isFinite(startMs))
    throw new InputProblem('startMs', startMs, 'an instant in epoch milliseconds');
  if (!Number.isFinite(endMs) || endMs <= startMs)
    throw new InputProblem('endMs', endMs, 'an instant after the start');
  return { startMs, endMs };
}

/** Whether two intervals share any instant. Touching ends do not. */
export function overlaps(a: Interval, b: Interval): boolean {
  return a.startMs < b.endMs && b.startMs < a.endMs;
}

/** Whether the instant lies in the interval; the end does not. */
export function contains(a: Interval, ms: number): boolean {
  return a.startMs <= ms && ms < a.endMs;
}

/** Whether `inner` lies wholly in `outer`; equal ends are inside. */
export function covers(outer: Interval, inner: Interval): boolean {
  return outer.startMs <= inner.startMs && inner.endMs <= outer.endMs;
}

/** What two intervals share, or null when they only touch or lie apart. */
export function intersection(a: Interval, b: Interval): Interval | null {
  const startMs = Math.max(a.startMs, b.startMs);
  const endMs = Math.min(a.endMs, b.endMs);
  return startMs < endMs ? { startMs, endMs } : null;
}

/** The interval with elapsed minutes (each at least 0) added before and after, such as travel and wash-out. */
export function widen(interval: Interval, beforeMin: number, afterMin: number): Interval {
  requireInRange('beforeMin', beforeMin, 0, Number.POSITIVE_INFINITY);
  requireInRange('afterMin', afterMin, 0, Number.POSITIVE_INFINITY);
  return {
    startMs: interval.startMs - beforeMin * MS_PER_MIN,
    endMs: interval.endMs + afterMin * MS_PER_MIN,
  };
}

/** Elapsed minutes from start to end. */
export function lengthMin(interval: Interval): number {
  return (interval.endMs - interval.startMs) / MS_PER_MIN;
}

/**
 * The highest total of amounts that run at the same time. Touching intervals do not add up.
 * Amounts must be finite and at least 0; totals are kept to 1e-6 so that decimals cancel exactly.
 */
export function peakUse(uses: readonly Use[]): Peak {
  const changes: { ms: number; micro: number }[] = [];
  for (const use of uses) {
    makeInterval(use.startMs, use.endMs);
    requireInRange('amount', use.amount, 0, Number.MAX_SAFE_INTEGER / 1e6);
    const micro = Math.round(use.amount * 1e6);
    changes.push({ ms: use.startMs, micro }, { ms: use.endMs, micro: -micro });
  }
  changes.sort((a, b) => a.ms - b.ms);

  let running = 0;
  let best = 0;
  let bestStartMs: number | null = null;
  let bestEndMs: number | null = null;
  for (let i = 0; i < changes.length; ) {
    const ms = changes[i]?.ms ?? 0;
    let next = running;
    for (; changes[i]?.ms === ms; i++) next += changes[i]?.micro ?? 0;
    if (bestStartMs !== null && bestEndMs === null && next !== running) bestEndMs = ms;
    if (next > best) {
      best = next;
      bestStartMs = ms;
      bestEndMs = null;
    }
    running = next;
  }
  const interval =
    bestStartMs === null || bestEndMs === null ? null : { startMs: bestStartMs, endMs: bestEndMs };
  return { amount: best / 1e6, interval };
}
