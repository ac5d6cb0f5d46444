/**
 * Exact fractions, so that `22'4"`, `5/8` and metric conversions meet binary floating point nowhere.
 * `n` may be negative, `d` is above zero; fractions are not reduced, their digits are bounded by the parsers.
 */
export interface Ratio {
  readonly n: bigint;
  readonly d: bigint;
}

/** An exact decimal as text: digits, at most one point, no exponent, no trailing zeros ("12.5", "-3"). */
export type DecimalText = string;

/** From a plain decimal ("12.50", ".5", "-3"); null for anything else or for more than 24 digits. */
export function ratioOf(text: string): Ratio | null {
  const match = /^(-?)(\d*)(?:\.(\d*))?$/.exec(text);
  const whole = match?.[2] ?? '';
  const part = match?.[3] ?? '';
  if (!match || whole.length + part.length === 0 || whole.length + part.length > 24) return null;
  const n = BigInt(`${whole}${part}`);
  return { n: match[1] === '-' ? -n : n, d: 10n ** BigInt(part.length) };
}

/** Keeps the larger denominator where one divides the other, so that long sums of decimals stay short. */
export function add(a: Ratio, b: Ratio): Ratio {
  if (a.d % b.d === 0n) return { n: a.n + b.n * (a.d / b.d), d: a.d };
  if (b.d % a.d === 0n) return { n: a.n * (b.d / a.d) + b.n, d: b.d };
  return { n: a.n * b.d + b.n * a.d, d: a.d * b.d };
}
export const multiply = (a: Ratio, b: Ratio): Ratio => ({ n: a.n * b.n, d: a.d * b.d });

/** `a / b`; `b` must be above zero. */
export const divide = (a: Ratio, b: Ratio): Ratio => ({ n: a.n * b.d, d: a.d * b.n });

export const isBelow = (a: Ratio, b: Ratio): boolean => a.n * b.d < b.n * a.d;

/** Whole number as a fraction. */
export const whole = (value: number): Ratio => ({ n: BigInt(value), d: 1n });

/** Rounded half away from zero to `places` decimals, without trailing zeros. */
export function decimalText(value: Ratio, places: number): DecimalText {
  const scale = 10n ** BigInt(places);
  const size = value.n < 0n ? -value.n : value.n;
  const units = (size * scale * 2n + value.d) / (value.d * 2n);
  const digits = units.toString().padStart(places + 1, '0');
  const part = places === 0 ? '' : digits.slice(-places).replace(/0+$/, '');
  const text = `${places === 0 ? digits : digits.slice(0, -places)}${part === '' ? '' : `.${part}`}`;
  return value.n < 0n && units !== 0n ? `-${text}` : text;
}
