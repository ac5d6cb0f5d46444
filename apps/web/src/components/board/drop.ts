/** A drop as the browser sees it before the server has answered. */

import { type BoardIndex, isActive, rowsOfVisit, type VisitRows } from '@strikeboard/domain/board-index';
import type { PlannedChange } from '@strikeboard/domain/plan-placement';

/** The rows that a placement will leave, with ids that stand only until the server's own come. */
export function rowsAfter(index: BoardIndex, change: PlannedChange): VisitRows | null {
  const rows = rowsOfVisit(index, change.visitId);
  if (!rows) return null;
  const own = (kind: string, id: string) => `unsaved-${kind}-${change.visitId}-${id}`;
  const { booking, mixOrder } = change;
  return {
    visit: { ...rows.visit, ...change.visit, untold: change.visit.state === 'firm' },
    shifts: change.shifts.map((shift) => {
      const before = rows.shifts.find((row) => row.personId === shift.personId && row.state === 'held');
      const unmoved =
        before?.during.startMs === shift.during.startMs && before.during.endMs === shift.during.endMs;
      return {
        id: before?.id ?? own('shift', shift.personId),
        visitId: change.visitId,
        personId: shift.personId,
        during: shift.during,
        held: shift.held,
        state: 'held',
        answer: unmoved ? before.answer : 'none',
        told: unmoved ? before.told : false,
      };
    }),
    offers: change.offers.map((offer) => ({
      id: own('offer', offer.personId),
      visitId: change.visitId,
      personId: offer.personId,
      during: offer.during,
      state: 'open',
    })),
    bookings: booking
      ? [{ id: own('booking', booking.equipmentId), visitId: change.visitId, state: 'drafted', ...booking }]
      : rows.bookings.filter((row) => !isActive(row.state)),
    mixOrders: mixOrder
      ? [{ id: own('order', mixOrder.mixId), visitId: change.visitId, state: 'drafted', ...mixOrder }]
      : rows.mixOrders.filter((row) => !isActive(row.state)),
  };
}
