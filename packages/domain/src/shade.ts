import type { BoardIndex } from './board-index.ts';
import { worstOf } from './checks/run.ts';
import { planAt } from './plan.ts';

/** What a slot of a shaded lane says. */
export const shades = { fits: 0, caution: 1, stop: 2 } as const;

/**
 * What would happen if the crew were to be there at each of the instants: 0 fits (or only notes), 1 caution, 2 stop,
 * in the order given. Says exactly what planPlacement would say of the same drop.
 * Throws InputProblem for an unknown visit or crew.
 */
export function shadeLane(
  index: BoardIndex,
  visitId: string,
  crewId: string,
  slotStartsMs: readonly number[],
  nowMs: number,
): Uint8Array {
  const shaded = new Uint8Array(slotStartsMs.length);
  slotStartsMs.forEach((crewStartMs, slot) => {
    shaded[slot] = worstOf(planAt({ index, visitId, crewId, crewStartMs, nowMs }));
  });
  return shaded;
}
