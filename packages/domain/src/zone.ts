import { type Interval, MS_PER_HOUR, MS_PER_MIN } from './interval.ts';
import { InputProblem, requireInRange } from './problem.ts';
import type { Language } from './vocabulary.ts';
import { offsetMsAt } from './zone-offset.ts';

export { isZone } from './zone-offset.ts';

/** A calendar day at a site, 'YYYY-MM-DD'. It is an instant only together with the site's IANA zone. */
export type SiteDay = string;

/** Part of an interval that falls on one day of the site. */
export interface DayPart {
  readonly day: SiteDay;
  readonly interval: Interval;
}

const MS_PER_DAY = 86_400_000;
const MAX_TEXTS_KEPT = 20_000;
const dayNumbers = new Map<SiteDay, number>();
const dayTexts = new Map<number, SiteDay>();

/** The site's day that the instant falls on. */
export function siteDayOf(ms: number, zone: string): SiteDay {
  return dayText(Math.floor((ms + offsetMsAt(ms, zone)) / MS_PER_DAY));
}

/** Wall-clock minutes since the site's midnight (0 up to 1440, with a fraction for seconds). */
export function minuteOfDay(ms: number, zone: string): number {
  const local = ms + offsetMsAt(ms, zone);
  return (local - Math.floor(local / MS_PER_DAY) * MS_PER_DAY) / MS_PER_MIN;
}

/**
 * The instant at which the site's clock shows `minuteOfDay` on `day`; 1440 and more run into the
 * following days, negative ones into those before. Both odd cases are read with the offset before
 * the change, as RFC 5545 section 3.3.5 has it: a time that is skipped moves forward by the length
 * of the gap (02:30 becomes 03:30), a time that comes twice means the first.
 */
export function instantAt(day: SiteDay, minuteOfDay: number, zone: string): number {
  requireInRange('minuteOfDay', minuteOfDay, -1440 * 400, 1440 * 400);
  const localMs = dayNumber(day) * MS_PER_DAY + Math.round(minuteOfDay * MS_PER_MIN);
  const earlier = offsetMsAt(localMs - MS_PER_DAY, zone);
  const later = offsetMsAt(localMs + MS_PER_DAY, zone);
  if (earlier === later) return localMs - earlier;
  const withEarlier = localMs - earlier;
  if (offsetMsAt(withEarlier, zone) === earlier) return withEarlier;
  const withLater = localMs - later;
  return offsetMsAt(withLater, zone) === later ? withLater : withEarlier;
}

/** Whether the site's clock skips this time (spring change), so that a screen can say what it was moved to. */
export function isSkipped(day: SiteDay, minuteOfDay: number, zone: string): boolean {
  const ms = instantAt(day, minuteOfDay, zone);
  return ms + offsetMsAt(ms, zone) !== dayNumber(day) * MS_PER_DAY + Math.round(minuteOfDay * MS_PER_MIN);
}

/** The whole day of the site: 23, 24 or 25 hours. Throws InputProblem for a day the zone left out (Apia, 2011-12-30). */
export function dayInterval(day: SiteDay, zone: string): Interval {
  const startMs = dayStart(day, zone);
  const endMs = dayStart(addDays(day, 1), zone);
  if (endMs <= startMs) throw new InputProblem('day', day, `a day that exists in ${zone}`);
  return { startMs, endMs };
}

/**
 * The interval between two wall-clock times of the site. An end before the start means the next
 * day (a night pour, 22:00 to 06:00); equal ends are refused rather than read as 24 hours.
 */
export function wallInterval(day: SiteDay, startMinute: number, endMinute: number, zone: string): Interval {
  if (startMinute === endMinute)
    throw new InputProblem('endMinute', endMinute, 'a time other than the start');
  const startMs = instantAt(day, startMinute, zone);
  const endMs = instantAt(day, endMinute < startMinute ? endMinute + 1440 : endMinute, zone);
  if (endMs <= startMs) throw new InputProblem('endMinute', endMinute, 'a time after the start on that day');
  return { startMs, endMs };
}

/** The parts of an interval by day of the site, in order. Ten years at most. */
export function splitByDay(interval: Interval, zone: string): DayPart[] {
  requireInRange('endMs', interval.endMs, interval.startMs + 1, interval.startMs + 3660 * MS_PER_DAY);
  const parts: DayPart[] = [];
  for (let startMs = interval.startMs; startMs < interval.endMs; ) {
    const day = siteDayOf(startMs, zone);
    const endMs = Math.min(dayInterval(day, zone).endMs, interval.endMs);
    parts.push({ day, interval: { startMs, endMs } });
    startMs = endMs;
  }
  return parts;
}

/** The calendar day `count` days later (earlier when negative); no clock is involved. */
export function addDays(day: SiteDay, count: number): SiteDay {
  return dayText(dayNumber(day) + count);
}

/** Whole days from one day to another; negative when `to` is earlier. */
export function daysBetween(from: SiteDay, to: SiteDay): number {
  return dayNumber(to) - dayNumber(from);
}

/** 1 for Monday to 7 for Sunday (ISO 8601). */
export function weekdayOf(day: SiteDay): number {
  // Day 0, 1970-01-01, was a Thursday.
  return ((((dayNumber(day) + 3) % 7) + 7) % 7) + 1;
}

/** The Monday of the day's week. */
export function mondayOf(day: SiteDay): SiteDay {
  return addDays(day, 1 - weekdayOf(day));
}

/** Whether the text is a real calendar day, 'YYYY-MM-DD'. */
export function isSiteDay(text: string): boolean {
  return parseDay(text) !== null;
}

// No accents: one letter outside GSM-7 (the a of "sábado") would cut a text message from 160 to 70 characters.
const WEEKDAYS: Record<Language, readonly string[]> = {
  en: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'],
  es: ['lun', 'mar', 'mie', 'jue', 'vie', 'sab', 'dom'],
};
const MONTHS: Record<Language, readonly string[]> = {
  en: ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'],
  es: ['ene', 'feb', 'mar', 'abr', 'may', 'jun', 'jul', 'ago', 'sep', 'oct', 'nov', 'dic'],
};

/** The site's wall clock in plain ASCII: "6:30 AM" in English, "6:30" of 24 hours in Spanish. Seconds are cut off. */
export function formatClock(ms: number, zone: string, locale: Language): string {
  const minute = Math.floor(minuteOfDay(ms, zone));
  const hour = Math.floor(minute / 60);
  const minutes = String(minute % 60).padStart(2, '0');
  if (locale === 'es') return `${hour}:${minutes}`;
  return `${hour % 12 === 0 ? 12 : hour % 12}:${minutes} ${hour < 12 ? 'AM' : 'PM'}`;
}

/** The day in plain ASCII: "Tue Dec 8" in English, "mar 8 dic" in Spanish. */
export function formatDay(day: SiteDay, locale: Language): string {
  const weekday = WEEKDAYS[locale][weekdayOf(day) - 1];
  const month = MONTHS[locale][Number(day.slice(5, 7)) - 1];
  const dayOfMonth = Number(day.slice(8, 10));
  return locale === 'es' ? `${weekday} ${dayOfMonth} ${month}` : `${weekday} ${month} ${dayOfMonth}`;
}

function dayStart(day: SiteDay, zone: string): number {
  const ms = instantAt(day, 0, zone);
  if (minuteOfDay(ms, zone) === 0) return ms;
  // Midnight itself is skipped: the day begins where the gap ends.
  let lowMs = ms - 24 * MS_PER_HOUR;
  let highMs = ms;
  while (highMs - lowMs > 1) {
    const middleMs = Math.floor((lowMs + highMs) / 2);
    if (siteDayOf(middleMs, zone) < day) lowMs = middleMs;
    else highMs = middleMs;
  }
  return highMs;
}

function dayNumber(day: SiteDay): number {
  const known = dayNumbers.get(day);
  if (known !== undefined) return known;
  const parsed = parseDay(day);
  if (parsed === null) throw new InputProblem('day', day, 'a calendar day as YYYY-MM-DD');
  if (dayNumbers.size >= MAX_TEXTS_KEPT) dayNumbers.clear();
  dayNumbers.set(day, parsed);
  return parsed;
}

function parseDay(text: string): number | null {
  if (!/^\d{4}-\d{2}-\d{2}$/.test(text)) return null;
  const ms = Date.parse(`${text}T00:00:00Z`);
  if (!Number.isFinite(ms) || new Date(ms).toISOString().slice(0, 10) !== text) return null;
  return ms / MS_PER_DAY;
}

function dayText(number: number): SiteDay {
  const known = dayTexts.get(number);
  if (known !== undefined) return known;
  const date = new Date(number * MS_PER_DAY);
  const year = date.getUTCFullYear();
  if (!(year >= 0 && year <= 9999)) throw new InputProblem('day', number, 'a day in the years 0000 to 9999');
  const text = date.toISOString().slice(0, 10);
  if (dayTexts.size >= MAX_TEXTS_KEPT) dayTexts.clear();
  dayTexts.set(number, text);
  return text;
}
