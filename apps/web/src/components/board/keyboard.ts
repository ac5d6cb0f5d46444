/** Moving a held card by the keyboard, in slots, lanes and days instead of pixels. */

import type { KeyboardCoordinateGetter } from '@dnd-kit/core';
import { addDays } from '@strikeboard/domain/zone';
import { type Scale, type Slot, slotAt, stepSlot, xOfSlot } from './scale.ts';

/** Where a held card is: a lane and a slot, or null over the waiting strip. */
export type Spot = { crewId: string; slot: Slot } | null;

/** What the keyboard needs to know of the board as it is drawn now. */
export interface BoardGeometry {
  scale: Scale;
  crewIds: readonly string[];
  spot: Spot;
  /** Where a card from the waiting strip goes first. */
  firstSlot: Slot;
  /** Screen position of the board's left edge, and of the middle of a lane or of the waiting strip. */
  leftPx: number;
  laneMiddlePx: (crewId: string) => number;
  waitingMiddlePx: number;
  heightPx: number;
}

/** The spot after a key, or undefined for a key that moves nothing. */
export function spotAfter(code: string, geometry: BoardGeometry): Spot | undefined {
  const { scale, crewIds, spot, firstSlot } = geometry;
  if (spot === null) {
    const last = crewIds.at(-1);
    return code === 'ArrowUp' && last !== undefined ? { crewId: last, slot: firstSlot } : undefined;
  }
  const lane = crewIds.indexOf(spot.crewId);
  const lastDay = addDays(scale.from, scale.days - 1);
  switch (code) {
    case 'ArrowRight':
      return { ...spot, slot: stepSlot(spot.slot, 1, scale) };
    case 'ArrowLeft':
      return { ...spot, slot: stepSlot(spot.slot, -1, scale) };
    case 'PageDown':
      return spot.slot.day < lastDay
        ? { ...spot, slot: { ...spot.slot, day: addDays(spot.slot.day, 1) } }
        : spot;
    case 'PageUp':
      return spot.slot.day > scale.from
        ? { ...spot, slot: { ...spot.slot, day: addDays(spot.slot.day, -1) } }
        : spot;
    case 'ArrowUp': {
      const above = crewIds[lane - 1];
      return above === undefined ? spot : { ...spot, crewId: above };
    }
    case 'ArrowDown': {
      const below = crewIds[lane + 1];
      return below === undefined ? null : { ...spot, crewId: below };
    }
    default:
      return undefined;
  }
}

/** dnd-kit's way to ask where a key takes the held card. */
export function coordinatesFor(geometryNow: () => BoardGeometry | null): KeyboardCoordinateGetter {
  return (event, { currentCoordinates }) => {
    const geometry = geometryNow();
    if (!geometry) return undefined;
    const spot = spotAfter(event.code, geometry);
    if (spot === undefined) return undefined;
    event.preventDefault();
    const half = geometry.heightPx / 2;
    if (spot === null) return { x: currentCoordinates.x, y: geometry.waitingMiddlePx - half };
    // Half a pixel inside the slot, so that rounding on the way back cannot fall into the one before.
    return {
      x: geometry.leftPx + xOfSlot(spot.slot, geometry.scale) + 0.5,
      y: geometry.laneMiddlePx(spot.crewId) - half,
    };
  };
}

/** The slot under a card's left edge. */
export function slotUnder(cardLeftPx: number, boardLeftPx: number, scale: Scale): Slot {
  return slotAt(cardLeftPx - boardLeftPx, scale);
}
