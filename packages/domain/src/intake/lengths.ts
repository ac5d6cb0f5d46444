import { type DecimalStyle, readRatio } from './numbers.ts';
import { add, divide, multiply, type Ratio, whole } from './ratio.ts';

/** Units a length or a heading can carry. */
export type LengthUnit = 'in' | 'ft' | 'yd' | 'mm' | 'cm' | 'm';

const UNIT_WORDS: Readonly<Record<string, LengthUnit>> = {
  '"': 'in',
  in: 'in',
  ins: 'in',
  inch: 'in',
  inches: 'in',
  pulg: 'in',
  pulgada: 'in',
  pulgadas: 'in',
  "'": 'ft',
  ft: 'ft',
  foot: 'ft',
  feet: 'ft',
  pie: 'ft',
  pies: 'ft',
  lf: 'ft',
  yd: 'yd',
  yds: 'yd',
  mm: 'mm',
  cm: 'cm',
  m: 'm',
  meter: 'm',
  meters: 'm',
  metre: 'm',
  metres: 'm',
  metro: 'm',
  metros: 'm',
};

const INCH_IN_MM: Ratio = { n: 254n, d: 10n };
const INCHES: Readonly<Record<LengthUnit, Ratio>> = {
  in: whole(1),
  ft: whole(12),
  yd: whole(36),
  mm: divide(whole(1), INCH_IN_MM),
  cm: divide(whole(10), INCH_IN_MM),
  m: divide(whole(1000), INCH_IN_MM),
};

/** The unit that a word or mark stands for, or null. */
export function lengthUnitOf(word: string): LengthUnit | null {
  return UNIT_WORDS[word.toLowerCase().replace(/\.$/, '')] ?? null;
}

/** Whether a unit is metric, so that a value in feet or inches is a conversion. */
export const isMetric = (unit: LengthUnit | null): boolean => unit === 'mm' || unit === 'cm' || unit === 'm';

export interface ReadLength {
  readonly inches: Ratio;
  /** The unit written in the cell; null when the number stood bare and `bareUnit` was taken. */
  readonly unit: LengthUnit | null;
}

const FEET_INCHES =
  /^(.+?) ?(?:'|ft\.?|feet|foot|pies?) ?-? ?(\d.*?) ?(?:"|in\.?|inch|inches|pulg\.?|pulgadas)?$/;

/**
 * A length as typed: `4"`, `4 in`, `0'-4"`, `22'6"`, `22 ft 6 in`, `5 1/2"`, `100 mm`, `6.7 m`, or a bare number,
 * which is in `bareUnit`. Expects text that went through `plainQuantity`. Null when it is none of these.
 */
export function readLength(text: string, bareUnit: LengthUnit, style: DecimalStyle): ReadLength | null {
  const both = FEET_INCHES.exec(text);
  if (both) {
    const feet = readRatio(both[1] ?? '', style);
    const inches = readRatio(both[2] ?? '', style);
    if (feet === null || inches === null || feet.n < 0n || inches.n >= 12n * inches.d) return null;
    return { inches: add(multiply(feet, whole(12)), inches), unit: 'ft' };
  }
  const single = /^([+-]?[\d.,][\d., /-]*?) ?("|'|[a-z]+\.?)?$/.exec(text);
  const value = readRatio(single?.[1] ?? '', style);
  if (!single || value === null) return null;
  const unit = single[2] === undefined ? null : lengthUnitOf(single[2]);
  if (single[2] !== undefined && unit === null) return null;
  return { inches: multiply(value, INCHES[unit ?? bareUnit]), unit };
}

/** Inches in feet. */
export const inFeet = (inches: Ratio): Ratio => divide(inches, whole(12));

/** ft² in one m², exact: 1 ft² is 0.09290304 m² (NIST SP 811). */
export const FT2_PER_M2: Ratio = { n: 100_000_000n, d: 9_290_304n };
/** yd³ in one m³, exact: 1 yd³ is 0.764554857984 m³ (NIST SP 811). */
export const YD3_PER_M3: Ratio = { n: 1_000_000_000_000n, d: 764_554_857_984n };
