import type { ToldFacts } from '@strikeboard/domain/told';
import { yd3ToM3 } from '@strikeboard/domain/units';
import type { Language } from '@strikeboard/domain/vocabulary';
import { formatClock, formatDay, isZone, siteDayOf, weekdayOf } from '@strikeboard/domain/zone';
import { offsetMsAt } from '@strikeboard/domain/zone-offset';
import { wordsOf } from './words/words.ts';

/** How facts are printed: for whom, and whether short (a text) or in full (an e-mail). */
export interface Style {
  language: Language;
  units: 'us' | 'metric';
  /** The reader's own zone: where its clock differs from the site's, times carry the name of the site's zone. */
  readerZone: string;
  length: 'short' | 'full';
}

/** Facts as texts ready to print, times by the site's clock. */
export interface FactsText {
  company: string;
  day: string;
  start: string;
  firstTruck: string | null;
  place: string;
  address: string;
  amount: string | null;
  finish: string | null;
  work: string;
}

/** Typed text as one printable line of at most `maxCharacters`; braces, which mark the link's place, become brackets. */
export function oneLine(text: string, maxCharacters: number): string {
  const line = text
    .replace(/[\p{Cc}\p{Zl}\p{Zp}\s]+/gu, ' ')
    // Marks that turn the direction of writing could make an address read as another.
    .replace(/[\u061C\u200E\u200F\u202A-\u202E\u2066-\u2069]/g, '')
    .replaceAll('{', '(')
    .replaceAll('}', ')')
    .trim();
  const characters = Array.from(line);
  return characters.length <= maxCharacters ? line : `${characters.slice(0, maxCharacters - 3).join('')}...`;
}

/** Prints the facts of a visit. */
export function factsText(facts: ToldFacts, style: Style): FactsText {
  const siteName = oneLine(facts.siteName, 60);
  const address = oneLine(facts.address, 120);
  return {
    company: oneLine(facts.companyName, 60),
    day: dayText(facts.day, style),
    start: timeText(facts.crewStartMs, facts, style),
    firstTruck: facts.firstLoadMs === null ? null : timeText(facts.firstLoadMs, facts, style),
    place: placeText(siteName, address),
    address: address === '' ? siteName : address,
    amount: facts.partYd3 === null ? null : amountText(facts.partYd3, style.units),
    finish: facts.finish === null ? null : wordsOf(style.language).finishes[facts.finish],
    work: oneLine(facts.title, 80),
  };
}

/** A time by the site's clock, with its day where that is not the visit's. */
export function timeText(
  ms: number,
  facts: Pick<ToldFacts, 'day' | 'zone'>,
  style: Style,
  always?: 'with-zone',
): string {
  const words = wordsOf(style.language);
  const clock = formatClock(ms, facts.zone, style.language);
  const isElsewhere =
    isZone(style.readerZone) && offsetMsAt(ms, style.readerZone) !== offsetMsAt(ms, facts.zone);
  const time = always || isElsewhere ? words.timeInZone(clock, zoneName(ms, facts.zone)) : clock;
  const day = siteDayOf(ms, facts.zone);
  return day === facts.day ? time : words.timeOnDay(time, dayText(day, style));
}

function dayText(day: string, { language, length }: Style): string {
  if (length === 'short') return formatDay(day, language);
  const words = wordsOf(language);
  const weekday = words.weekdays[weekdayOf(day) - 1] ?? '';
  const month = words.months[Number(day.slice(5, 7)) - 1] ?? '';
  return words.longDay(weekday, Number(day.slice(8, 10)), month);
}

function amountText(yd3: number, units: Style['units']): string {
  return units === 'us' ? `${Number(yd3.toFixed(3))} yd³` : `${Number(yd3ToM3(yd3).toFixed(2))} m³`;
}

function placeText(siteName: string, address: string): string {
  const parts = address.toLowerCase().includes(siteName.toLowerCase()) ? [address] : [siteName, address];
  return parts.filter((part) => part !== '').join(', ');
}

/** The zone's usual abbreviation at that instant, such as MST. */
function zoneName(ms: number, zone: string): string {
  const parts = new Intl.DateTimeFormat('en-US', { timeZone: zone, timeZoneName: 'short' }).formatToParts(ms);
  return parts.find(({ type }) => type === 'timeZoneName')?.value ?? zone;
}
