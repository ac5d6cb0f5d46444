import { addDays, daysBetween, isSiteDay, type SiteDay, weekdayOf } from '../zone.ts';
import { type Parsed, parsed, type Reason, refused } from './reason.ts';
import { withoutMarks } from './text.ts';
import { parseTimeOfDay } from './times.ts';

/** Whether `12/8` in a file is the 8th of December (the US way) or the 12th of August. */
export type DateOrder = 'month-first' | 'day-first';

export interface DateOptions {
  readonly order: DateOrder;
  /** The day that year-less dates are near to, 'YYYY-MM-DD'. */
  readonly referenceDay: SiteDay;
}
export interface ReadDate {
  readonly day: SiteDay;
  /** Minute of the day when the cell also held a time other than midnight. */
  readonly minute: number | null;
}

const MONTHS: readonly (readonly string[])[] = [
  ['january', 'jan', 'enero', 'ene'],
  ['february', 'feb', 'febrero'],
  ['march', 'mar', 'marzo'],
  ['april', 'apr', 'abril', 'abr'],
  ['may', 'mayo'],
  ['june', 'jun', 'junio'],
  ['july', 'jul', 'julio'],
  ['august', 'aug', 'agosto', 'ago'],
  ['september', 'sept', 'sep', 'septiembre', 'setiembre', 'set'],
  ['october', 'oct', 'octubre'],
  ['november', 'nov', 'noviembre'],
  ['december', 'dec', 'diciembre', 'dic'],
];
const MONTH_OF = new Map(MONTHS.flatMap((names, index) => names.map((name) => [name, index + 1] as const)));

const WEEKDAYS: readonly (readonly string[])[] = [
  ['monday', 'mon', 'mo', 'lunes', 'lun'],
  ['tuesday', 'tues', 'tue', 'tu', 'martes'],
  ['wednesday', 'wednes', 'wed', 'we', 'miercoles', 'mie'],
  ['thursday', 'thurs', 'thur', 'thu', 'th', 'jueves', 'jue'],
  ['friday', 'fri', 'fr', 'viernes', 'vie'],
  ['saturday', 'sat', 'sa', 'sabado', 'sab'],
  ['sunday', 'sun', 'su', 'domingo', 'dom'],
];
const WEEKDAY_OF = new Map(
  WEEKDAYS.flatMap((names, index) => names.map((name) => [name, index + 1] as const)),
);

/** Excel's day 0 in the 1900 system, right for every serial after its invented 1900-02-29. */
const SERIAL_ZERO: SiteDay = '1899-12-30';
const FIRST_SERIAL = 36_526;
const LAST_SERIAL = 73_050;

interface DayParts {
  readonly year: number | null;
  readonly month: number;
  readonly day: number;
}

/**
 * A day as typed: `12/8/2026`, `12/8/26`, `12/8`, `2026-12-08`, `20261208`, `8 Dec 2026`, `Dec 8`, `8-dic-2026`, `8 de diciembre`,
 * a weekday before it, a time after it, or a spreadsheet's serial of the years 2000 to 2099. A date without a
 * year is the one nearest to `referenceDay` and carries a warning. A weekday that disagrees is refused.
 */
export function parseDate(text: string, options: DateOptions): Parsed<ReadDate> {
  const plain = withoutMarks(text).toLowerCase().replace(/\s+/g, ' ').trim();
  const serial = readSerial(plain);
  if (serial) return parsed(serial);
  const { rest: undated, minute, ok } = splitTime(plain);
  const weekday = /^([a-z]+)\.?,? (?=\S)/.exec(undated);
  const weekdayNumber = WEEKDAY_OF.get(weekday?.[1] ?? '');
  const rest = weekdayNumber === undefined ? undated : undated.slice(weekday?.[0].length);
  const parts = ok ? readParts(rest, options.order) : null;
  if (parts === null) return refused({ code: 'date' });
  const day = resolve(parts, options.referenceDay);
  if (day === null) return refused({ code: wrongOrder(rest, options) ?? 'date' });
  if (weekdayNumber !== undefined && weekdayOf(day) !== weekdayNumber) {
    return refused({ code: 'weekday-disagrees', day });
  }
  const warnings: Reason[] = [];
  if (parts.year === null) warnings.push({ code: 'year-assumed', day });
  else if (Math.abs(daysBetween(options.referenceDay, day)) > 400) warnings.push({ code: 'day-far', day });
  return parsed({ day, minute }, warnings);
}

/**
 * The order that numeric dates of one file follow. `mixed`: some cells can only be month-first and others only
 * day-first, so the US order stands and the others are refused. `proven`: at least one cell decides.
 */
export function detectDateOrder(cells: Iterable<string>): {
  readonly order: DateOrder;
  readonly proven: boolean;
  readonly mixed: boolean;
} {
  let monthFirst = false;
  let dayFirst = false;
  for (const cell of cells) {
    const match = /(?<!\d)(\d{1,2})[/.-](\d{1,2})(?:[/.-]\d{2,4})?(?!\d)/.exec(cell);
    if (!match || /\d{4}[/.-]\d/.test(cell)) continue;
    const [first, second] = [Number(match[1]), Number(match[2])];
    if (first > 12 && second <= 12 && first <= 31) dayFirst = true;
    if (second > 12 && first <= 12 && second <= 31) monthFirst = true;
  }
  const order = dayFirst && !monthFirst ? 'day-first' : 'month-first';
  return { order, proven: dayFirst || monthFirst, mixed: dayFirst && monthFirst };
}

function readSerial(text: string): ReadDate | null {
  const match = /^(\d{5})(\.\d{1,15})?$/.exec(text);
  const serial = Number(match?.[1] ?? Number.NaN);
  if (!match || !(serial >= FIRST_SERIAL && serial <= LAST_SERIAL)) return null;
  const minutes = Math.round(Number(match[2] ?? 0) * 1440);
  const day = addDays(SERIAL_ZERO, serial + Math.floor(minutes / 1440));
  return { day, minute: minutes % 1440 === 0 ? null : minutes % 1440 };
}

/** Cuts a time from the end: "2026-12-08 06:30", "2026-12-08T06:30:00", "12/8 @ 6:30 am". */
function splitTime(text: string): { rest: string; minute: number | null; ok: boolean } {
  const match = /(?:t| |, | @ ?)(\d{1,2}:\d{2}(?::\d{2}(?:\.\d+)?)?(?: ?[ap]\.? ?m\.?)?)(z?)$/.exec(text);
  if (!match) return { rest: text.replace(/ @$/, ''), minute: null, ok: true };
  const time = parseTimeOfDay((match[1] ?? '').replace(/\.\d+$/, ''));
  const rest = text.slice(0, match.index).replace(/[ ,@]+$/, '');
  const minute = time.ok ? time.value : 0;
  // An instant in UTC is no wall-clock time of the site; only its midnight is surely meant as a plain day.
  const ok = time.ok && (match[2] !== 'z' || minute === 0);
  return { rest, minute: minute === 0 ? null : minute, ok };
}

function readParts(text: string, order: DateOrder): DayParts | null {
  const yearFirst = /^(\d{4})([/.-]?)(\d{2}|(?<=[/.-])\d)\2(\d{2}|(?<=[/.-])\d)$/.exec(text);
  if (yearFirst)
    return { year: Number(yearFirst[1]), month: Number(yearFirst[3]), day: Number(yearFirst[4]) };
  const numeric = /^(\d{1,2})([/.-])(\d{1,2})(?:\2(\d{4}|\d{2}))?$/.exec(text);
  if (numeric) {
    const [first, second] = [Number(numeric[1]), Number(numeric[3])];
    const [month, day] = order === 'month-first' ? [first, second] : [second, first];
    return { year: yearOf(numeric[4]), month, day };
  }
  const words = text
    .replace(/[,./-]+/g, ' ')
    .replace(/ de(?:l)? /g, ' ')
    .replace(/\s+/g, ' ')
    .trim();
  const dayBefore = /^(\d{1,2})(?:st|nd|rd|th|o)? ?([a-z]+)(?: ?(\d{4}|\d{2}))?$/.exec(words);
  const dayAfter = /^([a-z]+) ?(\d{1,2})(?:st|nd|rd|th)?(?: (\d{4}|\d{2}))?$/.exec(words);
  const month = MONTH_OF.get(dayBefore?.[2] ?? dayAfter?.[1] ?? '');
  if (month === undefined) return null;
  return {
    year: yearOf(dayBefore?.[3] ?? dayAfter?.[3]),
    month,
    day: Number(dayBefore?.[1] ?? dayAfter?.[2]),
  };
}

function yearOf(text: string | undefined): number | null {
  if (text === undefined) return null;
  return text.length === 2 ? 2000 + Number(text) : Number(text);
}

/** The reason when the text would be a day in the other order; null when it would not. */
function wrongOrder(text: string, options: DateOptions): 'date-month-first' | 'date-day-first' | null {
  const other = options.order === 'month-first' ? 'day-first' : 'month-first';
  const parts = readParts(text, other);
  if (parts === null || resolve(parts, options.referenceDay) === null) return null;
  return options.order === 'month-first' ? 'date-month-first' : 'date-day-first';
}

function resolve(parts: DayParts, referenceDay: SiteDay): SiteDay | null {
  if (parts.year !== null)
    return parts.year >= 2000 && parts.year <= 2099 ? dayText(parts.year, parts) : null;
  const year = Number(referenceDay.slice(0, 4));
  const candidates = [year, year + 1, year - 1].flatMap((one) => dayText(one, parts) ?? []);
  const distance = (day: SiteDay): number => Math.abs(daysBetween(referenceDay, day));
  return candidates.reduce<SiteDay | null>(
    (best, day) => (best === null || distance(day) < distance(best) ? day : best),
    null,
  );
}

function dayText(year: number, parts: DayParts): SiteDay | null {
  const text = `${year}-${String(parts.month).padStart(2, '0')}-${String(parts.day).padStart(2, '0')}`;
  return isSiteDay(text) ? text : null;
}
