import { add, divide, multiply, type Ratio, ratioOf, whole } from './ratio.ts';
import { type Parsed, parsed, refused } from './reason.ts';
import { withoutMarks } from './text.ts';

/** Which sign a file uses for decimals; the other one groups thousands. */
export type DecimalStyle = 'point' | 'comma';

const VULGAR: Readonly<Record<string, string>> = {
  '½': ' 1/2',
  '¼': ' 1/4',
  '¾': ' 3/4',
  '⅓': ' 1/3',
  '⅔': ' 2/3',
  '⅛': ' 1/8',
  '⅜': ' 3/8',
  '⅝': ' 5/8',
  '⅞': ' 7/8',
};

/** Lower case, straight quote marks, plain fractions and single spaces: what the quantity parsers work on. */
export function plainQuantity(text: string): string {
  return withoutMarks(plainSigns(text)).replace(/''/g, '"').toLowerCase().replace(/\s+/g, ' ').trim();
}

function plainSigns(text: string): string {
  if (/^[ -~]*$/.test(text)) return text.includes('`') ? text.replace(/`/g, "'") : text;
  return text
    .replace(/[½¼¾⅓⅔⅛⅜⅝⅞]/g, (sign) => VULGAR[sign] ?? sign)
    .replace(/²/g, '2')
    .replace(/³/g, '3')
    .replace(/[“”„″〃]/g, '"')
    .replace(/[‘’′´`]/g, "'")
    .replace(/[×✕✖╳]/g, 'x')
    .replace(/[–—−]/g, '-')
    .replace(/\u2044/g, '/');
}

const POINT = /^([+-]?)(\d{1,3}(?:,\d{3})+|\d{1,3}(?: \d{3})+|\d{1,15})?(?:\.(\d{0,8}))?$/;
const COMMA = /^([+-]?)(\d{1,3}(?:\.\d{3})+|\d{1,3}(?: \d{3})+|\d{1,15})?(?:,(\d{0,8}))?$/;
const FRACTION = /^(?:(\d{1,6})[ -])?(\d{1,3})\/(\d{1,3})$/;

/**
 * A number as typed: `1,250`, `1250.5`, `.5`, `3 1/2`, `1 250`; in a file of comma style `1.250,5`. Null when the
 * text is no such number, also when its separators contradict the style ("24,5" in point style is not 245).
 */
export function readRatio(text: string, style: DecimalStyle): Ratio | null {
  const plain = text.trim();
  const fraction = FRACTION.exec(plain);
  if (fraction) {
    const below = Number(fraction[3]);
    if (below === 0) return null;
    const part = divide(whole(Number(fraction[2])), whole(below));
    return fraction[1] === undefined ? part : add(whole(Number(fraction[1])), part);
  }
  const match = (style === 'point' ? POINT : COMMA).exec(plain);
  const digits = match?.[2]?.replace(/[ .,]/g, '') ?? '';
  const decimals = match?.[3] ?? '';
  if (!match || digits + decimals === '') return null;
  const sign = match[1] === '-' ? '-' : '';
  return ratioOf(`${sign}${digits}${decimals === '' ? '' : `.${decimals}`}`);
}

/** A bare number, or which separators would be right. */
export function parseNumber(text: string, style: DecimalStyle): Parsed<Ratio> {
  const plain = plainQuantity(text);
  const value = readRatio(plain, style);
  return value === null ? refused(numberReason(plain, style)) : parsed(value);
}

/** Says that the separators are the trouble when the text would be a number in the other style. */
export function numberReason(
  text: string,
  style: DecimalStyle,
): { readonly code: 'number' | 'number-comma-style' | 'number-point-style' } {
  const other: DecimalStyle = style === 'point' ? 'comma' : 'point';
  if (!/\d[.,]\d/.test(text) || readRatio(text, other) === null) return { code: 'number' };
  return { code: style === 'point' ? 'number-point-style' : 'number-comma-style' };
}

const COMMA_EVIDENCE = /\d\.\d{3},\d|(?<![\d.,])\d+,(?:\d{1,2}|\d{4,})(?![\d,])/;
const POINT_EVIDENCE = /\d,\d{3}\.\d|(?<![\d.,])\d*\.(?:\d{1,2}|\d{4,})(?![\d.])/;

/**
 * The decimal style of a file from its numeric cells. Comma style needs a cell that can be nothing else
 * (`24,5`, `1.250,5`) and none that says the opposite; `1,250` alone proves nothing and is read the US way.
 */
export function detectDecimalStyle(cells: Iterable<string>): DecimalStyle {
  let comma = false;
  for (const cell of cells) {
    if (POINT_EVIDENCE.test(cell)) return 'point';
    comma ||= COMMA_EVIDENCE.test(cell);
  }
  return comma ? 'comma' : 'point';
}

/** `value * numerator / denominator`, exact. */
export function scale(value: Ratio, numerator: Ratio, denominator: Ratio): Ratio {
  return divide(multiply(value, numerator), denominator);
}
