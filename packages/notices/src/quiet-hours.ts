import { MS_PER_HOUR } from '@strikeboard/domain/interval';
import { addDays, instantAt, minuteOfDay, siteDayOf } from '@strikeboard/domain/zone';

/** Part of the reader's day in which no text is sent, minutes of the day, half-open; it may run over midnight. */
export interface QuietHours {
  fromMin: number;
  untilMin: number;
}

/** A text held back until less than this before the start is no use to its reader. Common practice, no source. */
const LEAST_NOTICE_HOURS = 3;

/**
 * When a text may go: now, or at the end of the quiet hours of the reader's zone. It goes at once if it would come too
 * late for the start that it is about. The usual hours, 21:00 to 8:00, are those of 47 CFR 64.1200(c)(1) for telephone
 * solicitation (published), which a crew's work times are not; they are kept as a courtesy.
 */
export function sendAtMs(input: {
  nowMs: number;
  zone: string;
  quietHours: QuietHours | null;
  /** The earliest start still to come that the text is about; null: none. */
  startMs: number | null;
}): number {
  const { nowMs, zone, quietHours, startMs } = input;
  if (quietHours === null) return nowMs;
  const { fromMin, untilMin } = quietHours;
  const minute = minuteOfDay(nowMs, zone);
  const overMidnight = fromMin > untilMin;
  const isQuiet = overMidnight
    ? minute >= fromMin || minute < untilMin
    : minute >= fromMin && minute < untilMin;
  if (!isQuiet) return nowMs;
  const today = siteDayOf(nowMs, zone);
  const endDay = overMidnight && minute >= fromMin ? addDays(today, 1) : today;
  const endMs = Math.max(nowMs, instantAt(endDay, untilMin, zone));
  return startMs !== null && endMs > startMs - LEAST_NOTICE_HOURS * MS_PER_HOUR ? nowMs : endMs;
}
