/** Which pump a pour would take, and whether it is free. */

import { type BoardIndex, isActive } from './board-index.ts';
import type { Chain } from './chain.ts';
import { type Interval, overlaps, widen } from './interval.ts';
import { InputProblem } from './problem.ts';
import type { Booking, Equipment, Pour, Visit } from './snapshot.ts';
import type { PlacingMethod } from './vocabulary.ts';

export interface PlannedPump {
  /** null: the method needs one and none that suits is free. */
  readonly booking: {
    readonly pump: Equipment;
    readonly during: Interval;
    /** With travel and set-up before and wash-out after. */
    readonly held: Interval;
  } | null;
  /** Another visit's booking that holds the pump then. */
  readonly clash: Booking | null;
  /** Pumps that suit the method, by name. */
  readonly suitable: readonly Equipment[];
}

/** Whether a placing method takes a pump. */
export function needsPump(method: PlacingMethod): boolean {
  return method === 'line-pump' || method === 'boom-pump';
}

/** Whether the pump is of the method's kind. */
export function suits(pump: Equipment, method: PlacingMethod): boolean {
  return method === 'boom-pump' ? pump.boom : method === 'line-pump' ? !pump.boom : true;
}

/** The time that a pump is held for a chain. */
export function pumpHeld(pump: Equipment, chain: Pick<Chain, 'placing'>): Interval {
  return widen(chain.placing, pump.travelMin + pump.setUpMin, pump.washOutMin);
}

/** Another visit's booking that holds the pump during an interval. */
export function pumpClash(
  index: BoardIndex,
  pumpId: string,
  visitId: string,
  held: Interval,
): Booking | null {
  for (const booking of index.bookingsByEquipment.get(pumpId) ?? []) {
    if (booking.held.startMs >= held.endMs) break;
    if (booking.visitId !== visitId && overlaps(booking.held, held)) return booking;
  }
  return null;
}

/**
 * The pump of a pour: as booked where it stands, else the one asked for, else the pour's own, else the one it
 * has now, else the first by name, that suits and is free. null where none is needed and none is asked for. Throws InputProblem for an unknown pump.
 */
export function planPump(input: {
  index: BoardIndex;
  visit: Visit;
  pour: Pour;
  chain: Chain;
  pumpId: string | null;
  standing?: Booking | undefined;
}): PlannedPump | null {
  const { index, visit, pour, chain, standing } = input;
  const suitable = needsPump(pour.placingMethod)
    ? index.pumps.filter((pump) => suits(pump, pour.placingMethod))
    : [];
  const booked = standing && index.equipment.get(standing.equipmentId);
  if (standing && booked) {
    const clash = pumpClash(index, booked.id, visit.id, standing.held);
    return { booking: { pump: booked, during: standing.during, held: standing.held }, clash, suitable };
  }
  const chosen = chosenPump(index, pour, input.pumpId);
  if (chosen) {
    const held = pumpHeld(chosen, chain);
    const clash = pumpClash(index, chosen.id, visit.id, held);
    return { booking: { pump: chosen, during: chain.placing, held }, clash, suitable };
  }
  if (!needsPump(pour.placingMethod)) return null;
  const current = index.bookingsByVisit.get(visit.id)?.find((row) => isActive(row.state))?.equipmentId;
  for (const pump of currentFirst(suitable, current)) {
    const held = pumpHeld(pump, chain);
    if (!pumpClash(index, pump.id, visit.id, held))
      return { booking: { pump, during: chain.placing, held }, clash: null, suitable };
  }
  return { booking: null, clash: null, suitable };
}

/** A visit that is moved keeps its pump where it can. */
function currentFirst(pumps: readonly Equipment[], currentId: string | undefined): readonly Equipment[] {
  const current = pumps.find((pump) => pump.id === currentId);
  return current ? [current, ...pumps.filter((pump) => pump !== current)] : pumps;
}

function chosenPump(index: BoardIndex, pour: Pour, pumpId: string | null): Equipment | null {
  if (pumpId !== null) {
    const asked = index.equipment.get(pumpId);
    if (asked?.kind !== 'pump') throw new InputProblem('pumpId', pumpId, 'a pump of the company');
    return asked;
  }
  // A pump that the company no longer has leaves the choice open.
  const own = pour.pumpId === null ? null : index.equipment.get(pour.pumpId);
  return own?.kind === 'pump' ? own : null;
}
