import type { BoardIndex } from './board-index.ts';
import { findingsOf, worstOf } from './checks/run.ts';
import { type Finding, type Severity, worstSeverity } from './finding.ts';
import { MS_PER_HOUR, MS_PER_MIN } from './interval.ts';
import { basisOf, planAt } from './plan.ts';
import { requireFinite, requireInRange } from './problem.ts';
import type { Site } from './snapshot.ts';
import { minuteOfDay, siteDayOf } from './zone.ts';

/** A place on the board that no stop forbids. */
export interface Fit {
  readonly crewId: string;
  readonly crewStartMs: number;
  readonly worst: Severity | null;
  readonly findings: Finding[];
}

export interface FitOptions {
  /** The crew to look at first; left out: the one that the visit stands on, if any. */
  readonly crewId?: string;
  /** The crews to look at; left out: all. */
  readonly crewIds?: readonly string[];
  /** Minutes between the starts that are tried; 30 unless given. */
  readonly stepMin?: number;
  /** Starts before this are not tried; left out: now, or the instant asked for when that is past. */
  readonly sinceMs?: number;
  /** Starts from this on are not tried; left out: two weeks after the instant asked for, within the snapshot. */
  readonly untilMs?: number;
  /** How many to return; 3 unless given. */
  readonly limit?: number;
  /** Take only places with nothing worse than a note. */
  readonly withoutCautions?: boolean;
  readonly nowMs: number;
}

const LOOK_MS = 14 * 24 * MS_PER_HOUR;
/** A search is ended after this many plans, so that a wide one cannot hold up a page. */
const MAX_PLANS = 20_000;

/**
 * The nearest places for a visit without a stop, nearest in time to `fromMs` first; at the same distance the later
 * start, and of two crews the preferred one. One place per crew and day. Starts lie within the hours that the board
 * shows, unless the one asked for does not. Empty when nothing fits. Throws InputProblem for unknown ids and impossible options.
 */
export function nearestFit(index: BoardIndex, visitId: string, fromMs: number, options: FitOptions): Fit[] {
  requireFinite('fromMs', fromMs);
  const stepMs = requireInRange('stepMin', options.stepMin ?? 30, 1, 1440) * MS_PER_MIN;
  const limit = requireInRange('limit', options.limit ?? 3, 1, 1000);
  const { visit, site } = basisOf(index, visitId);
  const crewIds = preferredFirst(index, options.crewIds, options.crewId ?? visit.crewId);
  const sinceMs = options.sinceMs ?? Math.min(fromMs, options.nowMs);
  const untilMs = options.untilMs ?? Math.min(fromMs + LOOK_MS, index.range.endMs);
  const worstAllowed = options.withoutCautions ? 0 : 1;
  const anyHour = !isShown(index, site, fromMs);
  const fits: Fit[] = [];
  const taken = new Set<string>();
  let plans = 0;
  for (const crewStartMs of outwards(fromMs, stepMs, sinceMs, untilMs)) {
    if (!anyHour && !isShown(index, site, crewStartMs)) continue;
    const day = siteDayOf(crewStartMs, site.zone);
    for (const crewId of crewIds) {
      if (taken.has(`${crewId} ${day}`)) continue;
      if (++plans > MAX_PLANS) return fits;
      const plan = planAt({ index, visitId, crewId, crewStartMs, nowMs: options.nowMs });
      if (worstOf(plan) > worstAllowed) continue;
      taken.add(`${crewId} ${day}`);
      const findings = findingsOf(plan);
      fits.push({ crewId, crewStartMs, worst: worstSeverity(findings), findings });
      if (fits.length >= limit) return fits;
    }
  }
  return fits;
}

/** Instants at steps from one, nearest first, the later of two equally near ones first. */
function* outwards(fromMs: number, stepMs: number, sinceMs: number, untilMs: number): Generator<number> {
  if (fromMs >= sinceMs && fromMs < untilMs) yield fromMs;
  for (let byMs = stepMs; fromMs + byMs < untilMs || fromMs - byMs >= sinceMs; byMs += stepMs) {
    const later = fromMs + byMs;
    const earlier = fromMs - byMs;
    if (later >= sinceMs && later < untilMs) yield later;
    if (earlier >= sinceMs && earlier < untilMs) yield earlier;
  }
}

function isShown(index: BoardIndex, site: Site, ms: number): boolean {
  const minute = minuteOfDay(ms, site.zone);
  return index.rules.dayFromMin <= minute && minute < index.rules.dayUntilMin;
}

function preferredFirst(
  index: BoardIndex,
  crewIds: readonly string[] | undefined,
  preferredId: string | null,
): string[] {
  return [...index.crews.values()]
    .filter((crew) => crewIds === undefined || crewIds.includes(crew.id))
    .sort((a, b) => Number(b.id === preferredId) - Number(a.id === preferredId) || a.sortOrder - b.sortOrder)
    .map((crew) => crew.id);
}
