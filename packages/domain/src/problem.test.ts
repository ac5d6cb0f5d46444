import { describe, expect, it } from 'vitest';
import { InputProblem, requireFinite, requireInRange, requirePositive, requireWhole } from './problem.ts';

function caught(run: () => unknown): InputProblem {
  try {
    run();
  } catch (error) {
    if (error instanceof InputProblem) return error;
    throw error;
  }
  throw new Error('nothing was thrown');
}

describe('InputProblem (own contract)', () => {
  it('carries the field, the value and what would be right', () => {
    const problem = caught(() => requirePositive('thicknessIn', 0));
    expect(problem).toMatchObject({
      name: 'InputProblem',
      field: 'thicknessIn',
      value: 0,
      expected: 'a number above 0',
    });
    expect(problem.message).toBe('thicknessIn: expected a number above 0, got 0');
  });
  it('returns good values', () => {
    expect(requirePositive('a', 0.1)).toBe(0.1);
    expect(requireFinite('a', -1)).toBe(-1);
    expect(requireInRange('a', 100, 0, 100)).toBe(100);
    expect(requireWhole('a', 3, 1, 5)).toBe(3);
  });
  it.each([Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY])(
    'refuses %s everywhere',
    (value) => {
      for (const run of [requireFinite, requirePositive]) expect(() => run('a', value)).toThrow(InputProblem);
      expect(() => requireInRange('a', value, 0, 100)).toThrow(InputProblem);
      expect(() => requireWhole('a', value, 0, 100)).toThrow(InputProblem);
    },
  );
  it('refuses text where a number belongs, whatever the types said', () => {
    const text: unknown = '12';
    expect(() => requirePositive('a', text as number)).toThrow('a: expected a number above 0, got "12"');
    expect(() => requireInRange('a', 101, 0, 100)).toThrow('a: expected 0 to 100, got 101');
    expect(() => requireInRange('a', -1, 0, Number.POSITIVE_INFINITY)).toThrow('a number of at least 0');
    expect(() => requireWhole('a', 1.5, 0, 9)).toThrow('a whole number, 0 to 9');
  });
});
