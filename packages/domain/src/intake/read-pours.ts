import { parseDate } from './dates.ts';
import { add, decimalText, divide, isBelow, multiply, type Ratio, ratioOf, whole } from './ratio.ts';
import { differingFields, type Reading, rowProblem, withoutDuplicates } from './reading.ts';
import { type Parsed, parsed, refused } from './reason.ts';
import type { PourRecord } from './records.ts';
import type { Row } from './rows.ts';
import { fold, foldAddress, tidy } from './text.ts';
import { parseTimeOfDay } from './times.ts';
import { parseFinish, parsePlacingMethod } from './trade-words.ts';
import {
  type Dimensions,
  parseArea,
  parseDimensions,
  parseLengthFt,
  parsePlacingRate,
  parseThickness,
  parseYards,
} from './values.ts';

/**
 * Waiting pours. The key is the job's reference with the pour's name, or else site, name, day and yards. Rows that
 * share reference and name but not the rest (several days of one job) are told apart by day and yards too.
 */
export function readPours(reading: Reading): PourRecord[] {
  const pours = reading.rows.flatMap((row) => readPour(row, reading) ?? []);
  return withoutDuplicates(tellApart(pours, reading), reading.findings);
}

function readPour(row: Row, reading: Reading): PourRecord | null {
  if (row.filledCount() < 2) row.error({ code: 'nearly-empty-row' });
  const siteName = row.text('siteName');
  const siteAddress = row.text('siteAddress');
  if (siteName === null && siteAddress === null) row.error({ code: 'site-missing' }, 'siteName');
  const name = row.text('name') ?? siteName ?? siteAddress ?? '';
  const date = row.read('wantedOn', (text) =>
    parseDate(text, { order: reading.style.dates, referenceDay: reading.options.referenceDay }),
  );
  const firstLoad = row.read('firstLoad', (text) => {
    const time = parseTimeOfDay(text);
    return time.ok && time.value >= 1440 ? refused({ code: 'time' }) : time;
  });
  const orderedYd3 = row.read('orderedYd3', (text) => parseYards(text, row.quantity('orderedYd3')));
  const size = readSize(row);
  const remarks: string[] = [];
  const finish = row.read('finish', (text) => keeping(parseFinish(text), text, remarks));
  const method = row.read('placingMethod', (text) => keeping(parsePlacingMethod(text), text, remarks));
  const rate = row.read('placingRateYd3PerHour', (text) =>
    parsePlacingRate(text, row.quantity('placingRateYd3PerHour')),
  );
  const mixName = row.text('mixName');
  const jobRef = row.text('jobRef');
  const notes = [...row.texts('notes').map(tidy), ...remarks].join('; ');
  const assumedFinish = finish ?? reading.assume(row, 'finish', 'broom');
  const assumedMethod = method ?? reading.assume(row, 'placingMethod', 'chute');
  if (row.failed()) return null;
  compareQuantities(row, orderedYd3, size);
  const yards = orderedYd3 ?? '';
  const place = siteName === null ? foldAddress(siteAddress ?? '') : fold(siteName);
  const naturalKey =
    jobRef === null
      ? `pour:${place}|${fold(name)}|${date?.day ?? ''}|${yards}`
      : `ref:${fold(jobRef)}|${fold(name)}`;
  return {
    naturalKey,
    line: row.line,
    siteName,
    siteAddress,
    name,
    wantedOn: date?.day ?? null,
    orderedYd3,
    thicknessIn: size.thicknessIn,
    dimensions: size.rectangles,
    areaFt2: size.areaFt2,
    finish: assumedFinish,
    placingMethod: assumedMethod,
    mixName,
    placingRateYd3PerHour: rate,
    firstLoadMin: firstLoad ?? date?.minute ?? null,
    notes: notes === '' ? null : notes,
    jobRef,
  };
}

interface Size extends Dimensions {
  readonly areaFt2: string | null;
}

function readSize(row: Row): Size {
  const typed = row.read('dimensions', (text) => parseDimensions(text, row.quantity('dimensions')));
  const lengthFt = row.read('lengthFt', (text) => parseLengthFt(text, row.quantity('lengthFt')));
  const widthFt = row.read('widthFt', (text) => parseLengthFt(text, row.quantity('widthFt')));
  for (const [has, other] of [
    ['lengthFt', 'widthFt'],
    ['widthFt', 'lengthFt'],
  ] as const) {
    if (row.has(has) && !row.has(other)) row.error({ code: 'required', field: other }, other);
  }
  const thickness = row.read('thicknessIn', (text) => parseThickness(text, row.quantity('thicknessIn')));
  const third = typed?.thicknessIn ?? null;
  if (thickness !== null && third !== null && thickness !== third) {
    row.warn({ code: 'thickness-differs', other: third }, 'thicknessIn');
  }
  const areaFt2 = row.read('areaFt2', (text) => parseArea(text, row.quantity('areaFt2')));
  const sides = lengthFt !== null && widthFt !== null ? [{ lengthFt, widthFt }] : [];
  return { rectangles: typed?.rectangles ?? sides, thicknessIn: thickness ?? third, areaFt2 };
}

/** What a finish or method cell says beyond the word is kept in the notes rather than lost. */
function keeping<T>(result: Parsed<T>, text: string, remarks: string[]): Parsed<T> {
  if (!result.ok || !result.warnings?.some((warning) => warning.code === 'left-out')) return result;
  remarks.push(tidy(text));
  return parsed(result.value, [{ code: 'kept-in-notes', text: tidy(text) }]);
}

/**
 * Warns when there is nothing to order by, and when the yards ordered are under 95 or over 200 percent of the
 * volume that the size gives (both bounds common practice, no source; a thickened edge takes more than the slab).
 */
function compareQuantities(row: Row, orderedYd3: string | null, size: Size): void {
  const area = areaOf(size);
  const thickness = ratioOf(size.thicknessIn ?? '');
  if (orderedYd3 === null && area === null) row.warn({ code: 'no-quantity' });
  const ordered = ratioOf(orderedYd3 ?? '');
  if (ordered === null || area === null || thickness === null) return;
  // One cubic yard covers 324 ft² at one inch (arithmetic).
  const volume = divide(multiply(area, thickness), whole(324));
  const tooLittle = isBelow(multiply(ordered, whole(100)), multiply(volume, whole(95)));
  if (!tooLittle && !isBelow(multiply(volume, whole(2)), ordered)) return;
  const computedYd3 = decimalText(volume, 2);
  row.warn({ code: 'yards-against-size', orderedYd3: orderedYd3 ?? '', computedYd3 }, 'orderedYd3');
}

function areaOf(size: Size): Ratio | null {
  if (size.areaFt2 !== null) return ratioOf(size.areaFt2);
  const areas = size.rectangles.map(({ lengthFt, widthFt }) =>
    multiply(ratioOf(lengthFt) ?? whole(0), ratioOf(widthFt) ?? whole(0)),
  );
  return areas.length === 0 ? null : areas.reduce(add);
}

function tellApart(pours: readonly PourRecord[], reading: Reading): PourRecord[] {
  const firsts = new Map<string, PourRecord>();
  const shared = new Set<string>();
  for (const pour of pours) {
    const first = firsts.get(pour.naturalKey) ?? pour;
    firsts.set(pour.naturalKey, first);
    if (pour.jobRef === null) continue;
    const fields = differingFields(first, pour);
    if (!fields.includes('wantedOn') && !fields.includes('orderedYd3')) continue;
    shared.add(pour.naturalKey);
    reading.findings.problems.push(
      rowProblem(pour.line, { code: 'job-ref-shared', line: first.line }, 'warning'),
    );
  }
  return pours.map((pour) =>
    shared.has(pour.naturalKey)
      ? { ...pour, naturalKey: `${pour.naturalKey}|${pour.wantedOn ?? ''}|${pour.orderedYd3 ?? ''}` }
      : pour,
  );
}
