/** The board's snapshot in the browser: fetched once, then patched as changes come in over the stream. */

import type { Interval } from '@strikeboard/domain/interval';
import type { Snapshot } from '@strikeboard/domain/snapshot';
import type { BoardPatch } from '../../lib/api/schemas/snapshot.ts';

export type { BoardPatch };

/**
 * The snapshot after a patch. A patch that the snapshot already contains changes nothing, so the answer to one's own
 * move and the same change over the stream may come in either order.
 */
export function mergePatch(snapshot: Snapshot, patch: BoardPatch): Snapshot {
  if (patch.revision <= snapshot.revision) return snapshot;
  const touched = new Set(patch.visitIds);
  const ofTouched = (row: { visitId: string }) => touched.has(row.visitId);
  const replaced = <T extends { visitId: string }>(rows: T[], added: T[]): T[] => [
    ...rows.filter((row) => !ofTouched(row)),
    ...added,
  ];
  const upserted = <T extends { id: string }>(rows: T[], changed: T[]): T[] => {
    if (changed.length === 0) return rows;
    const ids = new Set(changed.map((row) => row.id));
    return [...rows.filter((row) => !ids.has(row.id)), ...changed];
  };
  return {
    ...snapshot,
    revision: patch.revision,
    visits: [...snapshot.visits.filter((visit) => !touched.has(visit.id)), ...patch.visits],
    pours: upserted(snapshot.pours, patch.pours),
    slabs: upserted(snapshot.slabs, patch.slabs),
    shifts: replaced(snapshot.shifts, patch.shifts),
    offers: replaced(snapshot.offers, patch.offers),
    mixOrders: replaced(snapshot.mixOrders, patch.mixOrders),
    bookings: replaced(snapshot.bookings, patch.bookings),
  };
}

/** Whether a patch follows the snapshot without a gap; after a gap the board is read anew. */
export function follows(snapshot: Snapshot, patch: BoardPatch): boolean {
  return patch.revision <= snapshot.revision + 1;
}

/** Answers of those who are concerned, for the card's "6 of 7 said yes". */
export function answersOf(
  snapshot: Pick<Snapshot, 'shifts' | 'offers'>,
  visitId: string,
): { yes: number; asked: number } {
  const held = snapshot.shifts.filter((shift) => shift.visitId === visitId && shift.state === 'held');
  const open = snapshot.offers.filter((offer) => offer.visitId === visitId && offer.state === 'open');
  return { yes: held.filter((shift) => shift.answer === 'yes').length, asked: held.length + open.length };
}

/** Whether two intervals share time; touching is not sharing. */
export function shareTime(a: Interval, b: Interval): boolean {
  return a.startMs < b.endMs && b.startMs < a.endMs;
}
