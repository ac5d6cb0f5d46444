/**
 * Where an instant stands on the board. A column is a day of the site, so a card stands at its site's clock whatever
 * the zone of the office or of the reader. The hour rule takes nearly all of a column; the night hours before and
 * after it share a narrow margin, so that night work is never out of sight.
 */

import {
  addDays,
  daysBetween,
  instantAt,
  minuteOfDay,
  type SiteDay,
  siteDayOf,
} from '@strikeboard/domain/zone';

export interface Scale {
  /** First day shown. */
  readonly from: SiteDay;
  readonly days: number;
  readonly dayWidthPx: number;
  /** The hour rule, minutes of the site's day. */
  readonly dayFromMin: number;
  readonly dayUntilMin: number;
  /** Minutes between the places where a card can be put down. */
  readonly stepMin: number;
}

/** Share of a column for the hours before, and for those after, the hour rule. */
const NIGHT_SHARE = 0.06;

/** Share of the column (0 to 1) at a minute of the day. */
export function shareOfDay(minute: number, { dayFromMin, dayUntilMin }: Scale): number {
  const before = dayFromMin > 0 ? NIGHT_SHARE : 0;
  const after = dayUntilMin < 1440 ? NIGHT_SHARE : 0;
  if (minute < dayFromMin) return (before * minute) / dayFromMin;
  if (minute <= dayUntilMin)
    return before + ((1 - before - after) * (minute - dayFromMin)) / (dayUntilMin - dayFromMin);
  return 1 - after + (after * (minute - dayUntilMin)) / (1440 - dayUntilMin);
}

/** Minute of the day at a share of the column: the inverse of `shareOfDay`. */
export function minuteAtShare(share: number, { dayFromMin, dayUntilMin }: Scale): number {
  const before = dayFromMin > 0 ? NIGHT_SHARE : 0;
  const after = dayUntilMin < 1440 ? NIGHT_SHARE : 0;
  if (share < before) return (share / before) * dayFromMin;
  if (share <= 1 - after)
    return dayFromMin + ((share - before) / (1 - before - after)) * (dayUntilMin - dayFromMin);
  return dayUntilMin + ((share - 1 + after) / after) * (1440 - dayUntilMin);
}

/** Pixels from the board's left edge; negative or past its width for what is out of view. */
export function xOf(ms: number, zone: string, scale: Scale): number {
  const column = daysBetween(scale.from, siteDayOf(ms, zone));
  return (column + shareOfDay(minuteOfDay(ms, zone), scale)) * scale.dayWidthPx;
}

/** A place where a card can be put down: a day of the site and its minute. */
export interface Slot {
  readonly day: SiteDay;
  readonly minute: number;
}

/** The nearest place to put a card down at a distance from the board's left edge, kept within the board. */
export function slotAt(x: number, scale: Scale): Slot {
  const column = Math.min(Math.max(Math.floor(x / scale.dayWidthPx), 0), scale.days - 1);
  const share = Math.min(Math.max(x / scale.dayWidthPx - column, 0), 1);
  const minute = Math.round(minuteAtShare(share, scale) / scale.stepMin) * scale.stepMin;
  return { day: addDays(scale.from, column), minute: Math.min(minute, 1440 - scale.stepMin) };
}

/** The slot some steps later (earlier when negative), over midnight and kept within the board. */
export function stepSlot(slot: Slot, steps: number, scale: Scale): Slot {
  const minutes = daysBetween(scale.from, slot.day) * 1440 + slot.minute + steps * scale.stepMin;
  const kept = Math.min(Math.max(minutes, 0), scale.days * 1440 - scale.stepMin);
  return { day: addDays(scale.from, Math.floor(kept / 1440)), minute: kept % 1440 };
}

/** Pixels from the board's left edge of a slot. */
export function xOfSlot(slot: Slot, scale: Scale): number {
  return (daysBetween(scale.from, slot.day) + shareOfDay(slot.minute, scale)) * scale.dayWidthPx;
}

/** The instant of a slot on the site's clock. */
export function instantOfSlot(slot: Slot, zone: string): number {
  return instantAt(slot.day, slot.minute, zone);
}

/** Every slot of the days shown, in order, as instants on the site's clock. */
export function slotInstants(scale: Scale, zone: string): number[] {
  const instants: number[] = [];
  for (let column = 0; column < scale.days; column += 1) {
    const day = addDays(scale.from, column);
    for (let minute = 0; minute < 1440; minute += scale.stepMin) instants.push(instantAt(day, minute, zone));
  }
  return instants;
}

/** Whole hours to mark in a column, every second one where columns are narrow. */
export function hourMarks(scale: Scale): number[] {
  const perHourPx = ((1 - 2 * NIGHT_SHARE) * scale.dayWidthPx * 60) / (scale.dayUntilMin - scale.dayFromMin);
  const every = [1, 2, 4, 6].find((hours) => hours * perHourPx >= 30) ?? 12;
  const marks: number[] = [];
  for (let hour = Math.ceil(scale.dayFromMin / 60); hour * 60 <= scale.dayUntilMin; hour += 1)
    if (hour % every === 0) marks.push(hour);
  return marks;
}
