import { describe, expect, it } from 'vitest';
import { sumOf } from './decimal-sum.ts';

describe('sumOf (arithmetic)', () => {
  it.each([
    ['0', '0', '0'],
    ['0.1', '0.2', '0.3'],
    ['11.5', '2.25', '13.75'],
    ['999.999', '0.001', '1000'],
    ['0.25', '-0.5', '-0.25'],
  ])('%s + %s = %s', (a, b, sum) => {
    expect(sumOf(a, b)).toBe(sum);
  });

  it('refuses what is no decimal', () => {
    expect(() => sumOf('1,5', '0')).toThrow(/Not a decimal/);
  });
});
