/**
 * Bad input to a rule of the trade: which field, what was given and what would be right.
 * Thrown by the pure formulas; callers at the edge turn it into field-level detail.
 */
export class InputProblem extends Error {
  readonly field: string;
  readonly value: unknown;
  /** What would be right, as the end of the sentence "expected ...". */
  readonly expected: string;

  constructor(field: string, value: unknown, expected: string) {
    super(`${field}: expected ${expected}, got ${describe(value)}`);
    this.name = 'InputProblem';
    this.field = field;
    this.value = value;
    this.expected = expected;
  }
}

/** Returns `value` when it is a finite number; otherwise throws {@link InputProblem}. */
export function requireFinite(field: string, value: number): number {
  if (!Number.isFinite(value)) throw new InputProblem(field, value, 'a finite number');
  return value;
}

/** Returns `value` when it is a finite number above zero; otherwise throws {@link InputProblem}. */
export function requirePositive(field: string, value: number): number {
  if (!Number.isFinite(value) || value <= 0) throw new InputProblem(field, value, 'a number above 0');
  return value;
}

/** Returns `value` when it is finite and `min <= value <= max`; otherwise throws {@link InputProblem}. */
export function requireInRange(field: string, value: number, min: number, max: number): number {
  if (!Number.isFinite(value) || value < min || value > max) {
    const expected = max === Number.POSITIVE_INFINITY ? `a number of at least ${min}` : `${min} to ${max}`;
    throw new InputProblem(field, value, expected);
  }
  return value;
}

/** Returns `value` when it is a whole number and `min <= value <= max`; otherwise throws {@link InputProblem}. */
export function requireWhole(field: string, value: number, min: number, max: number): number {
  if (!Number.isInteger(value) || value < min || value > max) {
    throw new InputProblem(field, value, `a whole number, ${min} to ${max}`);
  }
  return value;
}

function describe(value: unknown): string {
  if (typeof value === 'string')
    return JSON.stringify(value.length > 60 ? `${value.slice(0, 60)}...` : value);
  if (value === null || typeof value !== 'object') return String(value);
  return Array.isArray(value) ? `a list of ${value.length}` : 'an object';
}
