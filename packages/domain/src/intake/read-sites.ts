import { parseZone } from './contacts.ts';
import { parseCoordinates, parseLatitude, parseLongitude } from './coordinates.ts';
import { type Reading, withoutDuplicates } from './reading.ts';
import { parsed, refused } from './reason.ts';
import type { SiteRecord } from './records.ts';
import type { Row } from './rows.ts';
import { fold, foldAddress } from './text.ts';
import { type MinuteRange, parseTimeOfDay, parseTimeRange } from './times.ts';

/** Sites. The key is name and address together; a site without a name goes by its street. */
export function readSites(reading: Reading): SiteRecord[] {
  const sites = reading.rows.flatMap((row) => readSite(row, reading) ?? []);
  return withoutDuplicates(sites, reading.findings);
}

/** The key of a site, so that pours can be matched to it by name and address. */
export function siteKey(name: string, address: string): string {
  return `${fold(name)}|${foldAddress(address)}`;
}

function readSite(row: Row, reading: Reading): SiteRecord | null {
  const street = row.text('address');
  if (street === null) row.error({ code: 'required', field: 'address' }, 'address');
  const address = wholeAddress(street ?? '', row);
  const name = row.text('name') ?? reading.assume(row, 'name', (street ?? '').split(',')[0] ?? '');
  const { latDeg, lonDeg } = readPlace(row, reading.options.country);
  const timeZone = row.read('timeZone', (text) => parseZone(text, reading.options.zone));
  const hours = readHours(row);
  const customerName = row.text('customerName');
  const notes = row.texts('accessNotes').map((text) => text.replace(/\s+/g, ' ').trim());
  if (row.failed()) return null;
  return {
    naturalKey: siteKey(name, address),
    line: row.line,
    name,
    address,
    latDeg,
    lonDeg,
    timeZone,
    customerName,
    accessNotes: notes.length === 0 ? null : notes.join('; '),
    permittedFromMin: hours?.fromMin ?? null,
    permittedUntilMin: hours?.untilMin ?? null,
  };
}

/** Street, city, "state zip", leaving out what the street cell already ends with. */
function wholeAddress(street: string, row: Row): string {
  const city = row.text('city') ?? '';
  const state = row.text('state') ?? '';
  const zip = readZip(row);
  const end = fold(street);
  const endsWith = (part: string, after: string): boolean =>
    part !== '' && new RegExp(`(?:^| )${fold(part)}${after}$`).test(end);
  const zipAfter = '(?: \\d{5}(?: \\d{4})?)?';
  const stateAfter = state === '' ? zipAfter : `(?: ${fold(state)})?${zipAfter}`;
  const region = [endsWith(state, zipAfter) ? '' : state, endsWith(zip, '') ? '' : zip];
  const parts = [
    street.replace(/[,\s]+$/, ''),
    endsWith(city, stateAfter) ? '' : city,
    region.filter(Boolean).join(' '),
  ];
  return parts.filter(Boolean).join(', ');
}

/** A zip that a spreadsheet took for a number has lost its leading zero. */
function readZip(row: Row): string {
  return (
    row.read('zip', (text) => {
      const zip = text.trim().replace(/\.0+$/, '');
      const padded = `0${zip}`;
      return /^\d{4}$/.test(zip) ? parsed(padded, [{ code: 'read-as', assumed: padded }]) : parsed(zip);
    }) ?? ''
  );
}

function readPlace(row: Row, country: string): { latDeg: number | null; lonDeg: number | null } {
  const both = row.read('coordinates', (text) => parseCoordinates(text, country));
  const latDeg = row.read('latitude', parseLatitude) ?? both?.latDeg ?? null;
  const lonDeg = row.read('longitude', (text) => parseLongitude(text, country)) ?? both?.lonDeg ?? null;
  if (!row.failed() && (latDeg === null) !== (lonDeg === null)) {
    const field = latDeg === null ? 'latitude' : 'longitude';
    row.error({ code: 'required', field }, field);
  }
  if (latDeg === 0 && lonDeg === 0) row.error({ code: 'coordinates' }, 'latitude');
  return { latDeg, lonDeg };
}

function readHours(row: Row): MinuteRange | null {
  const range = row.read('permittedHours', (text) =>
    /^(?:any|anytime|any time|24 ?(?:\/ ?7|h|hrs|hours)|cualquiera?)$/i.test(text.trim())
      ? parsed(null)
      : parseTimeRange(text),
  );
  const fromMin = row.read('permittedFrom', parseTimeOfDay);
  const untilMin = row.read('permittedUntil', (text) => {
    const time = parseTimeOfDay(text);
    if (!time.ok || fromMin === null || time.value !== fromMin) return time;
    return refused({ code: 'time-range' });
  });
  if (fromMin === null && untilMin === null) return range;
  if (row.failed()) return null;
  // One end alone leaves the other open to the end of the day.
  return { fromMin: fromMin ?? 0, untilMin: untilMin === null || untilMin === 0 ? 1440 : untilMin };
}
