import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { detectDecimalStyle, parseNumber } from './numbers.ts';
import { decimalText, type Ratio, ratioOf } from './ratio.ts';
import type { Parsed } from './reason.ts';
import {
  parseArea,
  parseDimensions,
  parseLengthFt,
  parsePlacingRate,
  parseThickness,
  parseYards,
  type QuantityOptions,
} from './values.ts';

const us: QuantityOptions = { style: 'point', unit: null };
const european: QuantityOptions = { style: 'comma', unit: null };
const under = (unit: QuantityOptions['unit']): QuantityOptions => ({ style: 'point', unit });

const shown = <T>(result: Parsed<T>): T | string =>
  result.ok ? result.value : `no: ${result.expected.code}`;
const warned = <T>(result: Parsed<T>): string[] =>
  result.ok ? (result.warnings ?? []).map((one) => one.code) : [];
const text = (value: Ratio | string): string => (typeof value === 'string' ? value : decimalText(value, 6));

describe('numbers', () => {
  // Grouping and decimal signs: the conventions themselves (arithmetic).
  it.each([
    ['1,250', '1250'],
    ['1,250,000', '1250000'],
    ['1250.5', '1250.5'],
    ['.5', '0.5'],
    ['12.', '12'],
    ['-3', '-3'],
    ['1 250', '1250'],
    ['3 1/2', '3.5'],
    ['32½', '32.5'],
    ['5/8', '0.625'],
    [' 7 ', '7'],
    ['24,5', 'no: number-point-style'],
    ['1.250,5', 'no: number-point-style'],
    ['1,25,0', 'no: number'],
    ['12,3456', 'no: number-point-style'],
    ['1/0', 'no: number'],
    ['', 'no: number'],
    ['-', 'no: number'],
    ['.', 'no: number'],
    ['abc', 'no: number'],
    ['1e5', 'no: number'],
    ['9999999999999999', 'no: number'],
  ])('point style: %s is %s', (given, right) => {
    expect(text(shown(parseNumber(given, 'point')))).toBe(right);
  });

  it.each([
    ['1.250,5', '1250.5'],
    ['24,5', '24.5'],
    ['1.250', '1250'],
    ['12.5', 'no: number-comma-style'],
    ['1,250.5', 'no: number-comma-style'],
  ])('comma style: %s is %s', (given, right) => {
    expect(text(shown(parseNumber(given, 'comma')))).toBe(right);
  });

  it.each([
    [['1,250', '3,000'], 'point'],
    [['24,5', '32'], 'comma'],
    [['1.250,5'], 'comma'],
    [['24,5', '12.5'], 'point'],
    [['1,250', '24,5'], 'comma'],
    [['4"', '100 mm'], 'point'],
    [[], 'point'],
  ])('the style of %j is %s', (cells, style) => {
    expect(detectDecimalStyle(cells)).toBe(style);
  });
});

describe('thickness in inches', () => {
  // 1 in = 25.4 mm exactly (NIST SP 811); 1 ft = 12 in.
  it.each([
    ['4"', '4'],
    ['4 in', '4'],
    ['4in.', '4'],
    ['4', '4'],
    ['4”', '4'],
    ["4''", '4'],
    ['0\'-4"', '4'],
    ['0\' 4"', '4'],
    ['1\'-0"', '12'],
    ['5 1/2"', '5.5'],
    ['5-1/2"', '5.5'],
    ['5½"', '5.5'],
    ['3 5/8 in', '3.625'],
    ['100 mm', '3.937'],
    ['10 cm', '3.937'],
    ['4" slab', '4'],
    ['4" thk.', '4'],
    ['4 in nominal', '4'],
    ['4 pulgadas', '4'],
    ['4-6"', 'no: thickness'],
    ['4"/6"', 'no: thickness'],
    ['four', 'no: thickness'],
    ['4 yd', 'no: out-of-range'],
    ['0', 'no: out-of-range'],
    ['-4"', 'no: out-of-range'],
    ['100', 'no: out-of-range'],
    ['4,5', 'no: number-point-style'],
  ])('%s is %s', (given, right) => {
    expect(shown(parseThickness(given, us))).toBe(right);
  });

  it('reads bare numbers in the unit that the heading names', () => {
    expect(shown(parseThickness('100', under('mm')))).toBe('3.937');
    expect(warned(parseThickness('100', under('mm')))).toEqual(['converted']);
    expect(shown(parseThickness('4"', under('mm')))).toBe('4');
  });

  it('warns outside 2 to 24 inches (common practice, no source)', () => {
    expect(warned(parseThickness('2', us))).toEqual([]);
    expect(warned(parseThickness('1.5', us))).toEqual(['thickness-unusual']);
    expect(warned(parseThickness('24', us))).toEqual([]);
    expect(warned(parseThickness('30', us))).toEqual(['thickness-unusual']);
  });
});

describe('dimensions', () => {
  const rectangles = (given: string, options = us): string | string[] => {
    const result = parseDimensions(given, options);
    if (!result.ok) return `no: ${result.expected.code}`;
    return result.value.rectangles.map((one) => `${one.lengthFt}x${one.widthFt}`);
  };

  // 6.7 m / 0.3048 = 21.98163 ft and 12.2 m / 0.3048 = 40.02625 ft (1 ft = 0.3048 m, NIST SP 811).
  it.each([
    ["22' x 40'", ['22x40']],
    ['22x40', ['22x40']],
    ['22 X 40 ft', ['22x40']],
    ['22 by 40', ['22x40']],
    ['22 × 40', ['22x40']],
    ["22'6\" x 40'", ['22.5x40']],
    ['22\'-6" x 40\'-0"', ['22.5x40']],
    ["22' 4\" x 40'", ['22.3333x40']],
    ['22 ft 6 in x 40 ft', ['22.5x40']],
    ['6.7 m x 12.2 m', ['21.9816x40.0262']],
    ['6.7 x 12.2 m', ['21.9816x40.0262']],
    ['10x12 + 8x20', ['10x12', '8x20']],
    ['10x12; 8x20', ['10x12', '8x20']],
    ['10x12, 8x20', ['10x12', '8x20']],
    ['2 @ 10x12', ['10x12', '10x12']],
    ['(3) 4x5', ['4x5', '4x5', '4x5']],
    ['1,200 x 24', ['1200x24']],
    ['22', 'no: dimensions'],
    ['22 x', 'no: dimensions'],
    ['x 40', 'no: dimensions'],
    ['22 x forty', 'no: dimensions'],
    ['0 x 40', 'no: out-of-range'],
    ['22 x 4000', 'no: out-of-range'],
    ["22'13\" x 40'", 'no: dimensions'],
    ['22 x 40 x 4 x 5', 'no: dimensions'],
  ])('%s is %j', (given, right) => {
    expect(rectangles(given)).toEqual(right);
  });

  it('takes a third measure as the thickness', () => {
    expect(shown(parseDimensions('22 x 40 x 4"', us))).toEqual({
      rectangles: [{ lengthFt: '22', widthFt: '40' }],
      thicknessIn: '4',
    });
  });

  it('reads decimal commas only in a file of that style', () => {
    expect(rectangles('6,7 m x 12,2 m', european)).toEqual(['21.9816x40.0262']);
    expect(rectangles('6,7 m x 12,2 m')).toBe('no: number-point-style');
  });
});

describe('yards, areas, lengths and rates', () => {
  // 24.5 m3 / 0.764554857984 = 32.0448 yd3 (NIST SP 811).
  it.each([
    ['32', '32'],
    ['32 yd', '32'],
    ['32 yds.', '32'],
    ['32 cy', '32'],
    ['32CY', '32'],
    ['32 yd3', '32'],
    ['32 yd³', '32'],
    ['32 cu. yds', '32'],
    ['32 cubic yards', '32'],
    ['32 yardas', '32'],
    ['32y', '32'],
    ['1,250', '1250'],
    ['32 1/2', '32.5'],
    ['9.25 yd', '9.25'],
    ['24.5 m3', '32.04'],
    ['24.5 m³', '32.04'],
    ['~32', '32'],
    ['32 +/-', '32'],
    ['0', 'no: out-of-range'],
    ['-4', 'no: out-of-range'],
    ['6000', 'no: out-of-range'],
    ['32 ft', 'no: yards'],
    ['32 m', 'no: yards'],
    ['lots', 'no: yards'],
    ['24,5', 'no: number-point-style'],
  ])('%s yards is %s', (given, right) => {
    expect(shown(parseYards(given, us))).toBe(right);
  });

  it('says when yards were converted or approximate', () => {
    expect(warned(parseYards('24.5 m3', us))).toEqual(['converted']);
    expect(warned(parseYards('~24.5', under('m3')))).toEqual(['approximate', 'converted']);
    expect(warned(parseYards('32', us))).toEqual([]);
  });

  // 82 m2 / 0.09290304 = 882.6406 ft2 (NIST SP 811).
  it.each([
    ['3,200', '3200'],
    ['3200 sf', '3200'],
    ['880 sq. ft.', '880'],
    ['880 ft²', '880'],
    ['82 m2', '882.64'],
    ['0', 'no: out-of-range'],
    ['880 yd', 'no: area'],
  ])('%s of area is %s ft2', (given, right) => {
    expect(shown(parseArea(given, us))).toBe(right);
  });

  it.each([
    ['22\'6"', '22.5'],
    ['22.5', '22.5'],
    ['270 in', '22.5'],
    ['0', 'no: out-of-range'],
    ['long', 'no: length'],
  ])('a side of %s is %s ft', (given, right) => {
    expect(shown(parseLengthFt(given, us))).toBe(right);
  });

  it.each([
    ['30', '30'],
    ['30 yd/hr', '30'],
    ['30 cy/h', '30'],
    ['30 yph', '30'],
    ['30 yds per hour', '30'],
    ['30/hr', '30'],
    ['24 m3/h', '31.39'],
    ['500', 'no: out-of-range'],
    ['fast', 'no: placing-rate'],
  ])('a rate of %s is %s yd3/h', (given, right) => {
    expect(shown(parsePlacingRate(given, us))).toBe(right);
  });
});

describe('any cell', () => {
  const parsers = [parseThickness, parseYards, parseArea, parseLengthFt, parsePlacingRate, parseDimensions];
  const cell = fc.oneof(
    fc.string(),
    fc.string({ unit: 'grapheme' }),
    fc.string({ unit: fc.constantFrom(...'0123456789.,/x\'"- +~mftyd³½()@'.split('')) }),
  );

  it('is answered by every parser, and a decimal is a plain decimal', () => {
    fc.assert(
      fc.property(cell, fc.constantFrom('point' as const, 'comma' as const), (given, style) => {
        for (const parse of parsers) {
          const result = parse(given, { style, unit: null });
          if (result.ok && typeof result.value === 'string') expect(result.value).toMatch(/^\d+(\.\d+)?$/);
        }
      }),
      { numRuns: 2000 },
    );
  });

  it('comes back exactly when it is a decimal with a unit', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5_000_000 }), (thousandths) => {
        const yards = decimalText({ n: BigInt(thousandths), d: 1000n }, 3);
        expect(shown(parseYards(`${yards} yd`, us))).toBe(yards);
        expect(ratioOf(yards)?.n).toBeDefined();
      }),
    );
  });
});
