/**
 * A planned change as rows: what a board shows before the server has answered. The server writes its own ids and
 * versions; rows that it then sends replace these.
 */

import {
  type BoardIndex,
  isActive,
  rowsOfVisit,
  snapshotWithVisitRows,
  type VisitRows,
  withVisitRows,
} from './board-index.ts';
import type { Interval } from './interval.ts';
import type { PlannedChange, PlannedShift } from './plan-placement.ts';
import { InputProblem } from './problem.ts';
import type { Booking, MixOrder, Offer, Shift, Snapshot, Visit } from './snapshot.ts';

/**
 * Rows of the placed visit, then of every other visit that the change touches. New follow-ups are not among them:
 * they get their ids when they are written. Throws InputProblem for an unknown visit.
 */
export function rowsOfChange(index: BoardIndex, change: PlannedChange): VisitRows[] {
  const rows = new Map<string, VisitRows>();
  const own = rowsOfVisit(index, change.visitId);
  if (!own) throw new InputProblem('visitId', change.visitId, 'a visit of the board');
  rows.set(change.visitId, {
    visit: changedVisit(own.visit, change),
    shifts: changedShifts(own.shifts, change),
    offers: changedOffers(own.offers, change),
    bookings: changedBookings(index, own.bookings, change),
    mixOrders: changedOrders(own.mixOrders, change),
  });
  for (const { existingVisitId, window } of change.followUps) {
    const followUp = existingVisitId === null ? null : rowsOfVisit(index, existingVisitId);
    if (followUp) rows.set(followUp.visit.id, { ...followUp, visit: { ...followUp.visit, window } });
  }
  for (const { visitId, shiftId, held } of change.reheld) {
    const other = rows.get(visitId) ?? rowsOfVisit(index, visitId);
    if (!other) continue;
    const shifts = other.shifts.map((row) => (row.id === shiftId ? { ...row, held } : row));
    rows.set(visitId, { ...other, shifts });
  }
  return [...rows.values()];
}

/** The index as it is after a change. */
export function withChange(index: BoardIndex, change: PlannedChange): BoardIndex {
  return rowsOfChange(index, change).reduce(withVisitRows, index);
}

/** The snapshot as it is after a change; `index` is that of the snapshot. */
export function snapshotWithChange(snapshot: Snapshot, index: BoardIndex, change: PlannedChange): Snapshot {
  return rowsOfChange(index, change).reduce(snapshotWithVisitRows, snapshot);
}

/** Ids of the visits whose rows a change touches. */
export function visitsOfChange(change: PlannedChange): string[] {
  const ids = new Set([change.visitId]);
  for (const { existingVisitId } of change.followUps) if (existingVisitId !== null) ids.add(existingVisitId);
  for (const { visitId } of change.reheld) ids.add(visitId);
  return [...ids];
}

const same = (a: Interval, b: Interval): boolean => a.startMs === b.startMs && a.endMs === b.endMs;

function changedVisit(visit: Visit, change: PlannedChange): Visit {
  const { crewId, state, during } = change.visit;
  const stays = visit.crewId === crewId && visit.during !== null && same(visit.during, during);
  return {
    ...visit,
    crewId,
    state,
    during,
    acceptedCodes: stays ? visit.acceptedCodes : [],
    untold: stays && visit.state === state ? visit.untold : state === 'firm',
  };
}

function changedShifts(rows: readonly Shift[], change: PlannedChange): Shift[] {
  const next: Shift[] = rows
    .filter((row) => !change.shifts.some((planned) => planned.personId === row.personId))
    .map((row) => ({ ...row, state: 'released' }));
  for (const { personId, during, held } of change.shifts) {
    const mine = rows.filter((row) => row.personId === personId);
    const row = mine.find((one) => one.state === 'held') ?? mine[0];
    next.push(...mine.filter((one) => one !== row).map((one): Shift => ({ ...one, state: 'released' })));
    const stays = row?.state === 'held' && same(row.during, during);
    next.push({
      id: row?.id ?? `${change.visitId}:${personId}`,
      visitId: change.visitId,
      personId,
      during,
      held,
      state: 'held',
      answer: stays ? row.answer : 'none',
      told: stays ? row.told : false,
    });
  }
  return next;
}

function changedOffers(rows: readonly Offer[], change: PlannedChange): Offer[] {
  const isOpenFor = (row: Offer, planned: PlannedShift): boolean =>
    row.state === 'open' && row.personId === planned.personId && same(row.during, planned.during);
  const kept = rows.map((row): Offer => {
    if (row.state !== 'open' || change.offers.some((planned) => isOpenFor(row, planned))) return row;
    return { ...row, state: 'withdrawn' };
  });
  const added = change.offers
    .filter((planned) => !rows.some((row) => isOpenFor(row, planned)))
    .map(
      ({ personId, during }): Offer => ({
        id: `${change.visitId}:${personId}:${during.startMs}`,
        visitId: change.visitId,
        personId,
        during,
        state: 'open',
      }),
    );
  return [...kept, ...added];
}

function changedBookings(index: BoardIndex, rows: readonly Booking[], change: PlannedChange): Booking[] {
  const { booking, visitId } = change;
  const isPump = (row: Booking): boolean => index.equipment.get(row.equipmentId)?.kind === 'pump';
  const current = rows.find((row) => isActive(row.state) && row.equipmentId === booking?.equipmentId);
  const next = rows
    .filter((row) => row !== current)
    .map((row): Booking => (isPump(row) && isActive(row.state) ? { ...row, state: 'called-off' } : row));
  if (!booking) return next;
  const stays = current !== undefined && same(current.during, booking.during);
  next.push({
    id: current?.id ?? `${visitId}:${booking.equipmentId}`,
    visitId,
    ...booking,
    state: stays ? current.state : 'drafted',
  });
  return next;
}

function changedOrders(rows: readonly MixOrder[], change: PlannedChange): MixOrder[] {
  const { mixOrder, visitId } = change;
  const current = rows.find(
    (row) => isActive(row.state) && row.plantId === mixOrder?.plantId && row.mixId === mixOrder.mixId,
  );
  const next = rows
    .filter((row) => row !== current)
    .map((row): MixOrder => (isActive(row.state) ? { ...row, state: 'called-off' } : row));
  if (!mixOrder) return next;
  const stays =
    current !== undefined &&
    same(current.during, mixOrder.during) &&
    current.orderedYd3 === mixOrder.orderedYd3 &&
    current.loadYd3 === mixOrder.loadYd3 &&
    current.spacingMin === mixOrder.spacingMin;
  next.push({
    id: current?.id ?? `${visitId}:${mixOrder.mixId}`,
    visitId,
    ...mixOrder,
    state: stays ? current.state : 'drafted',
  });
  return next;
}
