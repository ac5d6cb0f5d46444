import { type Parsed, parsed, refused } from './reason.ts';
import { withoutMarks } from './text.ts';

/** Half-open part of a day, minutes since midnight; `untilMin` is at most 1440 and may be below `fromMin` (a night). */
export interface MinuteRange {
  readonly fromMin: number;
  readonly untilMin: number;
}

/**
 * Minute of the day: `6:30`, `6:30 AM`, `630a`, `0630`, `6`, `6a`, `18:30`, "noon", or a spreadsheet's day fraction.
 * Minutes are whole; seconds are dropped. A time from 1:00 to 4:59 written without am, pm or a leading zero is
 * taken as written, with a warning. `24:00` is 1440.
 */
export function parseTimeOfDay(text: string): Parsed<number> {
  const plain = plainTime(text);
  if (/^(?:12 ?)?(?:noon|mediodia)$/.test(plain)) return parsed(720);
  if (/^(?:12 ?)?(?:midnight|medianoche)$/.test(plain)) return parsed(0);
  const fraction = /^0?\.\d{2,15}$/.exec(plain);
  if (fraction) return parsed(Math.round(Number(plain) * 1440) % 1440);
  const match =
    /^(\d{1,2})(?:[:.h](\d{2}))?(?::\d{2})? ?(?:([ap])m?)?$/.exec(plain) ??
    /^(\d{1,2})(\d{2}) ?(?:([ap])m?)?$/.exec(plain);
  if (!match) return refused({ code: 'time' });
  const half = match[3];
  const hour = Number(match[1]);
  const past = Number(match[2] ?? 0);
  if (past > 59 || hour > 24 || (hour === 24 && past > 0)) return refused({ code: 'time' });
  if (half !== undefined && (hour < 1 || hour > 12)) return refused({ code: 'time' });
  if (half !== undefined) return parsed((hour % 12) * 60 + past + (half === 'p' ? 720 : 0));
  const minute = hour * 60 + past;
  const unsure = hour >= 1 && hour < 5 && !plain.startsWith('0');
  return parsed(minute, unsure ? [{ code: 'half-day-assumed', minute }] : []);
}

/**
 * Permitted hours in one cell: `7am-5pm`, `7:00 - 17:00`, `7 to 5`, "de 7 a 17". Without am or pm an end that is not
 * after the start and at most 12:00 is meant in the afternoon. Equal ends are refused.
 */
export function parseTimeRange(text: string): Parsed<MinuteRange> {
  const plain = plainTime(text).replace(/^(?:de|from|between) /, '');
  const ends = plain.split(/ ?(?:-|\bto\b|\btil\b|\buntil\b|\bthru\b|\ba\b|\bhasta\b|\band\b) ?/);
  const [from, until] = [parseTimeOfDay(ends[0] ?? ''), parseTimeOfDay(ends[1] ?? '')];
  if (ends.length !== 2 || !from.ok || !until.ok) return refused({ code: 'time-range' });
  const bare = !/[ap]m?$/.test(ends[1] ?? '') && /^[1-9]/.test(ends[1] ?? '');
  const untilMin = bare && until.value <= from.value && until.value <= 720 ? until.value + 720 : until.value;
  if (untilMin === from.value) return refused({ code: 'time-range' });
  return parsed({ fromMin: from.value % 1440, untilMin: untilMin === 0 ? 1440 : untilMin });
}

function plainTime(text: string): string {
  return withoutMarks(text)
    .toLowerCase()
    .replace(/[–—−]/g, '-')
    .replace(/([ap])\. ?m\.?/g, '$1m')
    .replace(/([ap]) m\b/g, '$1m')
    .replace(/ ?(?:hrs?|hours?|horas?|h)\.?$/, '')
    .replace(/\s+/g, ' ')
    .trim();
}
