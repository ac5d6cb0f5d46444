import { describe, expect, test } from 'vitest';
import { defaultCompanyRules as rules } from './company-rules.ts';
import { InputProblem } from './problem.ts';
import { greatCircleMiles, travelMin } from './travel.ts';

const orchard = { id: 'orchard', latDeg: 40.1, lonDeg: -88.2 };

describe('great circle', () => {
  test.each([
    // Arithmetic: one degree of a meridian is a 360th of 2 pi x 3,958.7613 miles.
    ['one degree north', [0, 0, 1, 0], 69.0936],
    // Arithmetic: a degree of longitude shrinks with the cosine of the latitude, 0.5 at 60 degrees.
    ['one degree east at 60 north', [60, 0, 60, 1], 34.5446],
    ['nowhere', [40.1, -88.2, 40.1, -88.2], 0],
    ['half way round', [0, 0, 0, 180], 12436.8],
    ['over the date line', [0, 179.5, 0, -179.5], 69.0936],
  ] as const)('%s', (_name, [latA, lonA, latB, lonB], miles) => {
    expect(greatCircleMiles(latA, lonA, latB, lonB)).toBeCloseTo(miles, miles > 1000 ? 1 : 2);
  });

  test('refuses coordinates that are none, by name', () => {
    expect(() => greatCircleMiles(91, 0, 0, 0)).toThrow(InputProblem);
    expect(() => greatCircleMiles(0, 0, 0, 181)).toThrow(/lonDeg/);
    expect(() => greatCircleMiles(Number.NaN, 0, 0, 0)).toThrow(/latDeg/);
  });
});

describe('travel', () => {
  test.each([
    // Common practice, no source: 10.02 miles x 1.3 at 30 mph are 26.05 min, rounded up to 5.
    ['ten miles', { latDeg: 40.245, lonDeg: -88.2 }, 30],
    // 9.60 miles x 1.3 / 30 mph = 24.96 min.
    ['just under a step', { latDeg: 40.2389, lonDeg: -88.2 }, 25],
    ['across the street', { latDeg: 40.1001, lonDeg: -88.2 }, 5],
    ['same coordinates', { latDeg: 40.1, lonDeg: -88.2 }, 0],
    ['same site without coordinates', { id: 'orchard', latDeg: null, lonDeg: null }, 0],
    ['another site without coordinates', { id: 'chapel', latDeg: null, lonDeg: null }, 30],
    ['a site with half a position', { latDeg: 40, lonDeg: null }, 30],
    ['nowhere known', null, 30],
  ] as const)('%s', (_name, to, minutes) => {
    expect(travelMin(orchard, to, rules)).toBe(minutes);
    expect(travelMin(to, orchard, rules)).toBe(minutes);
  });

  test('follows the company’s own figures', () => {
    const slow = { travelMph: 15, travelRoadFactor: 1.3, travelUnknownMin: 45 };
    expect(travelMin(orchard, { latDeg: 40.245, lonDeg: -88.2 }, slow)).toBe(55);
    expect(travelMin(orchard, null, slow)).toBe(45);
  });
});
