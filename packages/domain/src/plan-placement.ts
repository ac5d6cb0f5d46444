/**
 * What a drop does. The board calls it while a card is held, the server calls it again inside its transaction and
 * writes the change that it returns.
 */

import { type BoardIndex, isPlaced, type PlacedVisit, withVisitRows } from './board-index.ts';
import type { Chain } from './chain.ts';
import { rowsOfChange } from './change-rows.ts';
import { findingsOf } from './checks/run.ts';
import type { Finding, FindingCode } from './finding.ts';
import { followUpsOf, type PlannedFollowUp } from './follow-ups.ts';
import type { Interval } from './interval.ts';
import { heldOf, type Plan, type PlannedOrder, planAt } from './plan.ts';
import type { Placement } from './snapshot.ts';
import { daysBetween, siteDayOf } from './zone.ts';

/** A person's time as it is to be written. */
export interface PlannedShift {
  readonly personId: string;
  readonly during: Interval;
  readonly held: Interval;
}

/** Another visit's shift whose travel changed, because what comes before it did. */
export interface Reheld {
  readonly visitId: string;
  readonly shiftId: string;
  readonly held: Interval;
}

/** Every row that a placement writes. */
export interface PlannedChange {
  readonly visitId: string;
  readonly visit: {
    readonly crewId: string;
    readonly state: 'pencilled' | 'firm';
    readonly during: Interval;
  };
  /** All who hold a shift afterwards; a shift of anyone else is released. */
  readonly shifts: readonly PlannedShift[];
  /** All who are asked afterwards; any other open offer is withdrawn. Offers hold no time until they are accepted. */
  readonly offers: readonly PlannedShift[];
  /** The pump; null: none, and one booked before is called off. */
  readonly booking: {
    readonly equipmentId: string;
    readonly during: Interval;
    readonly held: Interval;
  } | null;
  /** null: none, and one ordered before is called off. */
  readonly mixOrder: PlannedOrder | null;
  readonly followUps: readonly PlannedFollowUp[];
  /** To be written before this visit's own shifts, so that no held times overlap in between. */
  readonly reheld: readonly Reheld[];
}

export interface PlannedPlacement {
  readonly change: PlannedChange;
  /** null for kinds without one. */
  readonly chain: Chain | null;
  readonly findings: Finding[];
}

/**
 * Places a visit on a crew's lane: the rows that it writes, its chain, and everything that does not fit. A stop does
 * not keep the change from being returned; the caller refuses it. Throws InputProblem for an unknown visit, crew or
 * pump and for an instant that is none.
 */
export function planPlacement(index: BoardIndex, placement: Placement, nowMs: number): PlannedPlacement {
  const plan = planAt({ index, ...placement, nowMs });
  const change = changeOf(plan);
  return { change, chain: plan.pour?.chain ?? null, findings: findingsOf(plan) };
}

/** Codes of the cautions that have not been accepted with a reason yet; empty when a drop may go ahead. */
export function needsReason(findings: readonly Finding[], acceptedCodes: readonly string[]): FindingCode[] {
  const codes = new Set<FindingCode>();
  for (const { code, severity } of findings)
    if (severity === 'caution' && !acceptedCodes.includes(code)) codes.add(code);
  return [...codes];
}

/**
 * The shifts of visits after a changed one whose held time is another now: of the crew's visit that followed it
 * before, and of the one that follows it afterwards. Also for a visit that was taken off the board.
 */
export function reheldAfter(before: BoardIndex, after: BoardIndex, visitId: string): Reheld[] {
  const found: Reheld[] = [];
  for (const id of new Set([nextOf(before, visitId), nextOf(after, visitId)])) {
    const visit = id === null ? undefined : after.visits.get(id);
    if (!visit || !isPlaced(visit)) continue;
    for (const shift of after.shiftsByVisit.get(visit.id) ?? []) {
      if (shift.state !== 'held') continue;
      const held = heldOf(after, visit, shift);
      if (held.startMs !== shift.held.startMs || held.endMs !== shift.held.endMs)
        found.push({ visitId: visit.id, shiftId: shift.id, held });
    }
  }
  return found;
}

function changeOf(plan: Plan): PlannedChange {
  const { index, visit, during, held, pump, order, pour } = plan;
  const shifts: PlannedShift[] = [];
  const offers: PlannedShift[] = [];
  for (const { personId, standing } of plan.people) {
    if (standing === 'present') shifts.push({ personId, during, held });
    else if (standing === 'offered') offers.push({ personId, during, held });
  }
  const booking = pump?.booking ?? null;
  const own = {
    visitId: visit.id,
    visit: { crewId: plan.crewId, state: stateOf(plan), during },
    shifts,
    offers,
    booking: booking && { equipmentId: booking.pump.id, during: booking.during, held: booking.held },
    mixOrder: order,
    followUps: pour ? followUpsOf(index, visit.id, pour.chain) : [],
    reheld: [],
  };
  const after = rowsOfChange(index, own).reduce(withVisitRows, index);
  return { ...own, reheld: reheldAfter(index, after, visit.id) };
}

/** Within the telling horizon, by days of the site, a visit is firm; one that people know of stays so. */
function stateOf({ index, visit, site, during, nowMs }: Plan): 'pencilled' | 'firm' {
  if (visit.state === 'firm' || visit.state === 'done') return 'firm';
  const daysAhead = daysBetween(siteDayOf(nowMs, site.zone), siteDayOf(during.startMs, site.zone));
  return daysAhead <= index.rules.tellingHorizonDays ? 'firm' : 'pencilled';
}

function nextOf(index: BoardIndex, visitId: string): string | null {
  const visit = index.visits.get(visitId);
  if (!visit || !isPlaced(visit)) return null;
  const later = (index.visitsByCrew.get(visit.crewId) ?? []).find(
    (other: PlacedVisit) => other.id !== visitId && other.during.startMs >= visit.during.endMs,
  );
  return later?.id ?? null;
}
