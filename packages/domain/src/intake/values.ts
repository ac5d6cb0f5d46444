import {
  FT2_PER_M2,
  inFeet,
  isMetric,
  type LengthUnit,
  type ReadLength,
  readLength,
  YD3_PER_M3,
} from './lengths.ts';
import { type DecimalStyle, numberReason, plainQuantity, readRatio } from './numbers.ts';
import { type DecimalText, decimalText, isBelow, multiply, type Ratio, whole } from './ratio.ts';
import { type Parsed, type PlainReasonCode, parsed, type Reason, refused } from './reason.ts';

/** How bare numbers of a cell are to be read: the file's decimal style and the unit its heading names. */
export interface QuantityOptions {
  readonly style: DecimalStyle;
  /** Unit of a bare number when the heading says so ("Thk (mm)"); null: the trade's usual unit. */
  readonly unit: QuantityUnit | null;
}
export type QuantityUnit = LengthUnit | 'yd3' | 'm3' | 'ft2' | 'm2';

/** Rectangle as typed: the first side is `lengthFt`. Exact decimals, rounded at 4 places. */
export interface Rectangle {
  readonly lengthFt: DecimalText;
  readonly widthFt: DecimalText;
}
export interface Dimensions {
  readonly rectangles: readonly Rectangle[];
  /** Third measure of `22 x 40 x 4"`, in inches; null when there is none. */
  readonly thicknessIn: DecimalText | null;
}

const EXACT_PLACES = 4;
/** The plant's increment is a quarter or a half yard; a converted figure is kept to a hundredth. */
const CONVERTED_PLACES = 2;
const MAX_RECTANGLES = 100;

/**
 * Slab thickness in inches, 1 to 48: `4"`, `4 in`, `4`, `0'-4"`, `5 1/2"`, `100 mm`. Words such as "slab" or "thk"
 * after it are left out. Outside 2 to 24 in it carries a warning (common practice, no source).
 */
export function parseThickness(text: string, options: QuantityOptions): Parsed<DecimalText> {
  const plain = plainQuantity(text).replace(
    / ?(?:nominal|nom\.?|thick|thk\.?|slab|min\.?|avg\.?|de espesor|espesor|de grueso|losa)(?= |$)/g,
    '',
  );
  const length = readLength(plain, lengthUnit(options.unit) ?? 'in', options.style);
  if (length === null) return refused(quantityReason('thickness', plain, options.style));
  if (!within(length.inches, 1, 48)) return refused({ code: 'out-of-range', min: 1, max: 48, unit: 'in' });
  const thicknessIn = decimalText(length.inches, EXACT_PLACES);
  const warnings: Reason[] = [];
  if (isMetricLength(length, options)) warnings.push(converted(plain, `${thicknessIn} in`));
  if (!within(length.inches, 2, 24)) warnings.push({ code: 'thickness-unusual' });
  return parsed(thicknessIn, warnings);
}

/** One side of a slab in feet, up to 2,000 ft: `22'`, `22'6"`, `22 ft`, `22`, `6.7 m`. */
export function parseLengthFt(text: string, options: QuantityOptions): Parsed<DecimalText> {
  const plain = plainQuantity(text);
  const length = readLength(plain, lengthUnit(options.unit) ?? 'ft', options.style);
  if (length === null) return refused(quantityReason('length', plain, options.style));
  if (!isSide(length.inches)) return refused({ code: 'out-of-range', min: 0, max: 2000, unit: 'ft' });
  const feet = decimalText(inFeet(length.inches), EXACT_PLACES);
  return parsed(feet, isMetricLength(length, options) ? [converted(plain, `${feet} ft`)] : []);
}

/**
 * Rectangles: `22' x 40'`, `22x40`, `22'6" x 40'`, `6.7 m x 12.2 m`, `22 by 40`, several with `+`, `;`, `&`, "and"
 * or ", ", counted ones as `2 @ 10x12` or `(2) 10x12`; a third measure is the thickness in inches.
 */
export function parseDimensions(text: string, options: QuantityOptions): Parsed<Dimensions> {
  const plain = plainQuantity(text);
  const expected = quantityReason('dimensions', plain, options.style);
  const rectangles: Rectangle[] = [];
  let thicknessIn: DecimalText | null = null;
  let metric = false;
  for (const piece of plain.split(/ ?[+;&] ?|, | and | y /)) {
    const counted = /^(?:\((\d{1,2})\) ?|(\d{1,2}) ?(?:@|ea\.?|pcs\.?) ?)?(.+)$/.exec(piece.trim());
    const sides = (counted?.[3] ?? '').split(/ ?(?:x|\bby\b|\bpor\b) ?/);
    const count = Number(counted?.[1] ?? counted?.[2] ?? 1);
    const rectangle = readSides(sides, options);
    if (rectangle === null || count < 1) return refused(expected);
    if (!isSide(rectangle.length) || !isSide(rectangle.width)) {
      return refused({ code: 'out-of-range', min: 0, max: 2000, unit: 'ft' });
    }
    metric ||= rectangle.metric;
    const value = {
      lengthFt: decimalText(inFeet(rectangle.length), EXACT_PLACES),
      widthFt: decimalText(inFeet(rectangle.width), EXACT_PLACES),
    };
    if (rectangles.length + count > MAX_RECTANGLES) return refused(expected);
    for (let index = 0; index < count; index++) rectangles.push(value);
    if (sides[2] !== undefined) {
      const third = parseThickness(sides[2], { style: options.style, unit: null });
      if (!third.ok || (thicknessIn !== null && thicknessIn !== third.value)) return refused(expected);
      thicknessIn = third.value;
    }
  }
  const shown = rectangles.map((one) => `${one.lengthFt} ft x ${one.widthFt} ft`).join(', ');
  return parsed({ rectangles, thicknessIn }, metric ? [converted(plain, shown)] : []);
}

function readSides(
  sides: readonly string[],
  options: QuantityOptions,
): { length: Ratio; width: Ratio; metric: boolean } | null {
  if (sides.length < 2 || sides.length > 3) return null;
  const bare = lengthUnit(options.unit) ?? 'ft';
  const width = readLength(sides[1] ?? '', bare, options.style);
  // "6.7 x 12.2 m": a unit written once, after the last side, is meant for both.
  const shared = width?.unit && width.unit !== 'in' ? width.unit : bare;
  const length = readLength(sides[0] ?? '', shared, options.style);
  if (!length || !width) return null;
  const metric = isMetricLength(length, options) || isMetricLength(width, options);
  return { length: length.inches, width: width.inches, metric };
}

const YARD_UNITS = /^(?:y|yds?|yards?|cys?|cyds?|yd\^?3|cu\.? ?yds?|cubic yards?|yardas?(?: cubicas?)?)\.?$/;
const METRE3_UNITS = /^(?:m\^?3|cbm|cu\.? ?m|cubic met(?:er|re)s?|metros? cubicos?)\.?$/;

/**
 * Cubic yards as ordered, above 0 and up to 5,000: `32`, `32 yd`, `32 cy`, `1,250`, `32 1/2`; `24.5 m3` is converted to a
 * hundredth of a yard, with a warning. `~`, "approx" and `+/-` are accepted with a warning.
 */
export function parseYards(text: string, options: QuantityOptions): Parsed<DecimalText> {
  return parseVolume(text, options, 'yards', '');
}

/** Placing rate, yd³ per hour, above 0 and up to 400: `30`, `30 yd/hr`, `30 cy/h`, `30 yph`, `24 m3/h`. */
export function parsePlacingRate(text: string, options: QuantityOptions): Parsed<DecimalText> {
  return parseVolume(
    text,
    options,
    'placing-rate',
    ' ?(?:/ ?|per |por )(?:h|hr|hrs|hour|hora)\\.?$|(?<=y)ph$',
  );
}

function parseVolume(
  text: string,
  options: QuantityOptions,
  code: 'yards' | 'placing-rate',
  ending: string,
): Parsed<DecimalText> {
  const approximate =
    /^(?:~|≈|approx\.?|about|aprox\.?|est\.?|\+\/-|±) ?| ?(?:\+\/-|±|approx\.?|aprox\.?|est\.?)$/;
  const full = plainQuantity(text);
  const plain = full.replace(approximate, '');
  const volume = ending === '' ? plain : plain.replace(new RegExp(ending), '');
  const match = /^([+-]?[\d.,][\d., /-]*?) ?([a-z].*)?$/.exec(volume);
  const value = readRatio(match?.[1] ?? '', options.style);
  const unit = match?.[2];
  const metric = unit === undefined ? options.unit === 'm3' : METRE3_UNITS.test(unit);
  if (value === null || (unit !== undefined && !metric && !YARD_UNITS.test(unit))) {
    return refused(quantityReason(code, volume, options.style));
  }
  const yd3 = metric ? multiply(value, YD3_PER_M3) : value;
  const max = code === 'yards' ? 5000 : 400;
  const inYd3 = decimalText(yd3, metric ? CONVERTED_PLACES : EXACT_PLACES);
  if (yd3.n <= 0n || inYd3 === '0' || isBelow(whole(max), yd3)) {
    return refused({ code: 'out-of-range', min: 0, max, unit: code === 'yards' ? 'yd3' : 'yd3/h' });
  }
  const warnings: Reason[] = plain === full ? [] : [{ code: 'approximate' }];
  if (metric) warnings.push(converted(plain, code === 'yards' ? `${inYd3} yd3` : `${inYd3} yd3/h`));
  return parsed(inYd3, warnings);
}

const FOOT2_UNITS =
  /^(?:sf|sq\.? ?ft\.?|sqft|ft\^?2|sq\.? ?feet|square f(?:ee|oo)t|pies? cuadrados?|pies?2)$/;
const METRE2_UNITS = /^(?:sm|sq\.? ?m|m\^?2|square met(?:er|re)s?|metros? cuadrados?)$/;

/** Area in ft², above 0 and up to 2,000,000: `3,200`, `3200 sf`, `880 sq ft`, `82 m2` (converted, with a warning). */
export function parseArea(text: string, options: QuantityOptions): Parsed<DecimalText> {
  const plain = plainQuantity(text);
  const match = /^([+-]?[\d.,][\d., /-]*?) ?([a-z].*)?$/.exec(plain);
  const value = readRatio(match?.[1] ?? '', options.style);
  const unit = match?.[2];
  const metric = unit === undefined ? options.unit === 'm2' : METRE2_UNITS.test(unit);
  if (value === null || (unit !== undefined && !metric && !FOOT2_UNITS.test(unit))) {
    return refused(quantityReason('area', plain, options.style));
  }
  const ft2 = metric ? multiply(value, FT2_PER_M2) : value;
  const areaFt2 = decimalText(ft2, metric ? CONVERTED_PLACES : EXACT_PLACES);
  if (ft2.n <= 0n || areaFt2 === '0' || isBelow(whole(2_000_000), ft2)) {
    return refused({ code: 'out-of-range', min: 0, max: 2_000_000, unit: 'ft2' });
  }
  return parsed(areaFt2, metric ? [converted(plain, `${areaFt2} ft2`)] : []);
}

function lengthUnit(unit: QuantityUnit | null): LengthUnit | null {
  return unit === 'yd3' || unit === 'm3' || unit === 'ft2' || unit === 'm2' ? null : unit;
}

const isMetricLength = (length: ReadLength, options: QuantityOptions): boolean =>
  isMetric(length.unit ?? lengthUnit(options.unit));

const within = (value: Ratio, min: number, max: number): boolean =>
  !isBelow(value, whole(min)) && !isBelow(whole(max), value);

const isSide = (inches: Ratio): boolean => inches.n > 0n && !isBelow(whole(24_000), inches);

const converted = (from: string, to: string): Reason => ({ code: 'converted', from, to });

/** The separators' reason where they are the trouble, else what the kind of quantity looks like. */
function quantityReason(code: PlainReasonCode, text: string, style: DecimalStyle): Reason {
  const number = /[\d.,]*\d/.exec(text)?.[0];
  if (number === undefined || readRatio(number, style) !== null) return { code };
  const reason = numberReason(number, style);
  return reason.code === 'number' ? { code } : reason;
}
