import { clockText } from './clock-text.ts';
import { fieldLabel } from './field-labels.ts';
import type { ReasonWords } from './words.ts';

const fields = (names: readonly string[]): string =>
  names.map((name) => fieldLabel(name, 'en').toLowerCase()).join(', ');

/** English sentences. */
export const reasonWordsEn: ReasonWords = {
  number: () => 'Expected a number, such as 1,250 or 12.5.',
  'number-comma-style': () =>
    'The other numbers of this file use a comma for decimals: expected one such as 1.250,5.',
  'number-point-style': () => 'Expected a number with a point for decimals, such as 1,250.5.',
  thickness: () => 'Expected one thickness, such as 4", 4 in, 0\'-4" or 100 mm.',
  length: () => "Expected a length, such as 22', 22'6\" or 6.7 m.",
  dimensions: () => "Expected length by width, such as 22' x 40' or 6.7 m x 12.2 m.",
  yards: () => 'Expected yards of concrete, such as 32, 32 yd or 24.5 m3.',
  area: () => 'Expected an area, such as 880 sf or 82 m2.',
  'placing-rate': () => 'Expected yards per hour, such as 30 or 30 yd/hr.',
  date: () => 'Expected a day, such as 12/8/2026, 2026-12-08 or Dec 8.',
  'date-month-first': () => 'Expected month before day, such as 12/28/2026, as the rest of the file has it.',
  'date-day-first': () => 'Expected day before month, such as 28/12/2026, as the rest of the file has it.',
  time: () => 'Expected a time, such as 6:30, 6:30 AM or 0630.',
  'time-range': () => 'Expected two different times, such as 7:00 to 17:00.',
  phone: () => 'Expected a phone number that exists, such as (970) 555-0123 or +52 and its number.',
  'phone-area-code': () => 'Expected the area code too, such as (970) 555-0123.',
  'phone-only-one': () => 'Expected one phone number only: the one that takes texts.',
  email: () => 'Expected an e-mail address, such as ana@example.com.',
  'yes-no': () => 'Expected yes or no.',
  language: () => 'Expected English or Spanish.',
  role: () => 'Expected owner, dispatcher, foreman, finisher or sub.',
  finish: () => 'Expected one finish: float, broom, trowel, hard trowel, exposed or stamped.',
  'placing-method': () => 'Expected chute, buggy, line pump or boom pump.',
  'which-pump': () => 'Expected which pump: line pump or boom pump.',
  cement: () => 'Expected cement Type I, II or III.',
  'time-zone': () => 'Expected a time zone, such as America/Denver or Mountain.',
  latitude: () => 'Expected a latitude in decimal degrees, such as 40.5853.',
  longitude: () => 'Expected a longitude in decimal degrees, such as -105.0844.',
  coordinates: () => 'Expected latitude and longitude, such as 40.5853, -105.0844.',
  'spreadsheet-error': () => 'The spreadsheet shows an error here: expected a value.',
  'formula-without-result': () =>
    'Expected a value; this formula was saved without its result. Open the file, save it and try again.',
  'nothing-above': () => 'This repeats the cell above, but that one is blank: expected a value.',
  'nearly-empty-row': () =>
    'Only one cell of this row is filled: expected at least a site and a size, day or yards.',
  'site-missing': () => "Expected the site's name or address.",
  'cannot-be-told': () => 'No phone and no e-mail: this person can be planned but not told.',
  'no-quantity': () => 'No yards and no size: the order has to be worked out later.',
  approximate: () => 'Marked as approximate; read as the plain number.',
  'read-comma-decimals': () => 'Numbers of this file were read with a comma for decimals.',
  'read-day-first': () => 'Dates of this file were read day first, for one of them can be read no other way.',
  'thickness-unusual': () => 'Unusual for a slab: please check the thickness.',
  required: (reason) => `Must not be blank: ${fieldLabel(reason.field, 'en').toLowerCase()}.`,
  'column-required': ({ field }) =>
    `No column is mapped to ${fieldLabel(field, 'en').toLowerCase()}: choose the one that has it.`,
  'out-of-range': ({ min, max, unit }) =>
    `Expected ${min === 0 ? 'more than 0 and at most' : `${min} to`} ${max.toLocaleString('en-US')} ${unit}.`,
  'weekday-disagrees': ({ day }) => `The weekday and the date disagree: ${day} is another weekday.`,
  'longitude-sign': ({ suggested }) => `Longitudes in the US are negative: expected ${suggested}.`,
  'too-many-cells': ({ count, headings }) =>
    `This row has ${count} cells under ${headings} headings: expected commas inside a cell to stand in quotes.`,
  'email-shared': ({ line }) =>
    `Line ${line} has this e-mail for another name: expected one person per e-mail.`,
  'phone-shared': ({ line }) => `Line ${line} has the same phone number for another name.`,
  'duplicate-differs': ({ line, fields: names }) =>
    `Left out as a repeat of line ${line}, though these differ: ${fields(names)}.`,
  'job-ref-shared': ({ line }) =>
    `Line ${line} has the same job number and name with another day or yards; both are kept.`,
  assumed: ({ assumed }, field) => `${field} is blank: read as ${assumed}.`,
  'column-missing': ({ assumed }, field) =>
    `No column for ${field.toLowerCase()}: every row is read as ${assumed}.`,
  'read-as': ({ assumed }) => `Read as ${assumed}.`,
  'copied-from-above': ({ assumed }) => `Repeats the cell above: read as ${assumed}.`,
  'year-assumed': ({ day }) => `No year given: read as ${day}.`,
  'day-far': ({ day }) => `${day} is more than a year away: please check the year.`,
  'half-day-assumed': ({ minute }) => `No AM or PM given: read as ${clockText(minute)} in the night.`,
  converted: ({ from, to }) => `${from} was converted to ${to}.`,
  'left-out': ({ text }) => `Left out: ${text}.`,
  'kept-in-notes': ({ text }) => `Says more than one word for it; "${text}" was also put in the notes.`,
  'yards-against-size': ({ orderedYd3, computedYd3 }) =>
    `${orderedYd3} yd ordered, but the size comes to ${computedYd3} yd.`,
  'thickness-differs': ({ other }) => `The dimensions say ${other} in; this column was used.`,
};
