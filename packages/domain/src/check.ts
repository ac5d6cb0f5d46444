/** Findings of the whole board, kept up to date at the cost of what a change can touch. */

import { type BoardIndex, isActive, isPlaced, type PlacedVisit } from './board-index.ts';
import { findingsOf } from './checks/run.ts';
import type { Finding } from './finding.ts';
import { MS_PER_HOUR, MS_PER_MIN } from './interval.ts';
import { basisOf, standingPlan } from './plan.ts';
import { needsPump } from './plan-pump.ts';

/** Visits of a crew further apart than this share neither a day nor the way between them. */
const NEAR_MS = 96 * MS_PER_HOUR;
/** A plant's sliding hour, and as much to spare. */
const PLANT_MS = 2 * MS_PER_HOUR;
/** A workweek with a day at either end. */
const WEEK_MS = 9 * 24 * MS_PER_HOUR;

/** Findings of every pencilled or firm visit as it stands; a visit with none has an empty list. */
export function check(index: BoardIndex, nowMs: number): Map<string, Finding[]> {
  const findings = new Map<string, Finding[]>();
  for (const visit of index.visits.values())
    if (isChecked(visit)) findings.set(visit.id, findingsOf(standingPlan(index, visit, nowMs)));
  return findings;
}

/**
 * Ids of the checked visits whose findings can differ between two states of a board, given the visits whose rows
 * do. Never too few; a few too many.
 */
export function affectedBy(before: BoardIndex, after: BoardIndex, visitIds: Iterable<string>): Set<string> {
  const affected = new Set<string>();
  for (const visitId of visitIds) {
    for (const touched of [traceOf(before, visitId), traceOf(after, visitId)]) {
      if (!touched) continue;
      for (const visit of after.visits.values())
        if (isChecked(visit) && !affected.has(visit.id) && isTouched(after, visit, touched))
          affected.add(visit.id);
    }
  }
  return affected;
}

/**
 * The findings after a change, from those before it. Equal to {@link check} of the board afterwards at the same
 * `nowMs`; lists of visits that the change cannot touch are kept as they are.
 */
export function recheck(input: {
  before: BoardIndex;
  after: BoardIndex;
  previous: ReadonlyMap<string, Finding[]>;
  visitIds: Iterable<string>;
  nowMs: number;
}): Map<string, Finding[]> {
  const { before, after, nowMs } = input;
  const visitIds = [...input.visitIds];
  const findings = new Map(input.previous);
  for (const visitId of visitIds) findings.delete(visitId);
  for (const visitId of affectedBy(before, after, visitIds)) {
    const visit = after.visits.get(visitId);
    if (visit && isChecked(visit)) findings.set(visitId, findingsOf(standingPlan(after, visit, nowMs)));
  }
  return findings;
}

function isChecked(visit: Parameters<typeof isPlaced>[0]): visit is PlacedVisit {
  return isPlaced(visit) && visit.state !== 'done';
}

/** What a visit's rows take at one time, and from whom. */
interface Trace {
  readonly visitId: string;
  readonly causeId: string | null;
  readonly siteId: string;
  readonly crewId: string | null;
  readonly startMs: number;
  readonly endMs: number;
  readonly people: ReadonlySet<string>;
  readonly plants: ReadonlySet<string>;
  readonly takesPump: boolean;
  readonly leadMs: number;
}

function traceOf(index: BoardIndex, visitId: string): Trace | null {
  const visit = index.visits.get(visitId);
  if (!visit) return null;
  const shifts = (index.shiftsByVisit.get(visitId) ?? []).filter((row) => row.state === 'held');
  const orders = (index.ordersByVisit.get(visitId) ?? []).filter((row) => isActive(row.state));
  const bookings = (index.bookingsByVisit.get(visitId) ?? []).filter((row) => isActive(row.state));
  const times = [visit.during, ...[...shifts, ...orders, ...bookings].map((row) => row.during)];
  const known = times.filter((time) => time !== null);
  return {
    visitId,
    causeId: visit.causedByVisitId,
    siteId: visit.siteId,
    crewId: visit.crewId,
    startMs: Math.min(...known.map((time) => time.startMs)),
    endMs: Math.max(...known.map((time) => time.endMs)),
    people: new Set(shifts.map((row) => row.personId)),
    plants: new Set(orders.map((row) => row.plantId)),
    takesPump: bookings.length > 0,
    leadMs: leadMs(index, visitId),
  };
}

function isTouched(index: BoardIndex, visit: PlacedVisit, trace: Trace): boolean {
  if (visit.id === trace.visitId || visit.siteId === trace.siteId) return true;
  if (visit.causedByVisitId === trace.visitId || visit.id === trace.causeId) return true;
  const apartMs = Math.max(visit.during.startMs - trace.endMs, trace.startMs - visit.during.endMs);
  if (apartMs > WEEK_MS) return false;
  if (trace.people.size > 0) {
    for (const shift of index.shiftsByVisit.get(visit.id) ?? [])
      if (shift.state === 'held' && trace.people.has(shift.personId)) return true;
  }
  if (apartMs > NEAR_MS) return false;
  if (visit.crewId === trace.crewId) return true;
  if (visit.kind !== 'pour' || apartMs > PLANT_MS + trace.leadMs + leadMs(index, visit.id)) return false;
  return sharesSupply(index, visit, trace);
}

/** How long before and after a visit its concrete is batched and its pump is held, at most. */
function leadMs(index: BoardIndex, visitId: string): number {
  const haulMin = basisOf(index, visitId).pour?.shape.haulMin ?? 0;
  let minutes = index.rules.batchAndCheckMin + haulMin;
  for (const pump of index.pumps)
    minutes = Math.max(minutes, pump.travelMin + pump.setUpMin + pump.washOutMin);
  return minutes * MS_PER_MIN;
}

function sharesSupply(index: BoardIndex, visit: PlacedVisit, trace: Trace): boolean {
  const pour = basisOf(index, visit.id).pour;
  if (trace.takesPump && pour) {
    const booked = (index.bookingsByVisit.get(visit.id) ?? []).length > 0;
    if (booked || pour.pour.pumpId !== null || needsPump(pour.pour.placingMethod)) return true;
  }
  if (pour?.plant && trace.plants.has(pour.plant.id)) return true;
  return (index.ordersByVisit.get(visit.id) ?? []).some((row) => trace.plants.has(row.plantId));
}
