import { describe, expect, it } from 'vitest';
import {
  evaporationLbPerFt2H,
  evaporationMenzelSi,
  evaporationMenzelUs,
  evaporationUnoSi,
  type SurfaceWeather,
  saturationKpa,
  windAtSlabMph,
  windForEvaporationMph,
} from './evaporation.ts';
import { InputProblem } from './problem.ts';
import { lbPerFt2HToKgPerM2H } from './units.ts';

const weather = (
  concreteTempF: number,
  airTempF: number,
  humidityPercent: number,
  windMph: number,
): SurfaceWeather => ({ concreteTempF, airTempF, humidityPercent, windMph });

describe('evaporation equations', () => {
  // Published formulas (Uno 1998; Menzel 1954, its coefficients from memory); values worked twice, arithmetic.
  // Columns: concrete F, air F, RH, wind mph; Uno US, Uno SI, Menzel US, Menzel SI in lb/ft2/h; Uno SI in kg/m2/h.
  const rows: [
    SurfaceWeather,
    unoUs: number,
    unoSi: number,
    menzelUs: number,
    menzelSi: number,
    kg: number,
  ][] = [
    [weather(87, 80, 50, 12), 0.2435, 0.233, 0.236, 0.2397, 1.1378],
    [weather(95, 90, 40, 10), 0.2861, 0.2737, 0.2862, 0.2906, 1.3362],
    [weather(70, 70, 70, 10), 0.0615, 0.0591, 0.0581, 0.0591, 0.2883],
    [weather(70, 70, 50, 10), 0.1025, 0.0984, 0.0969, 0.0984, 0.4806],
    [weather(75, 75, 50, 5), 0.0731, 0.0701, 0.0693, 0.0704, 0.342],
    [weather(80, 40, 100, 10), 0.2356, 0.2253, 0.2057, 0.2089, 1.0999],
    [weather(70, 40, 50, 0), 0.0359, 0.0343, 0.0337, 0.034, 0.1675],
    [weather(90, 90, 10, 0), 0.0692, 0.0659, 0.07, 0.0707, 0.3217],
    [weather(90, 90, 10, 25), 0.7607, 0.7287, 0.7336, 0.7456, 3.558],
    [weather(100, 100, 10, 20), 0.81, 0.775, 0.8169, 0.8301, 3.7837],
    [weather(70, 80, 70, 10), 0.0046, 0.0048, 0.0044, 0.0045, 0.0234],
    [weather(65, 90, 60, 5), -0.0361, -0.0341, -0.0365, -0.0371, -0.1667],
  ];
  it.each(rows)('%o', (at, unoUs, unoSi, menzelUs, menzelSi, kg) => {
    expect(evaporationLbPerFt2H(at)).toBeCloseTo(unoUs, 4);
    expect(evaporationUnoSi(at)).toBeCloseTo(unoSi, 4);
    expect(evaporationMenzelUs(at)).toBeCloseTo(menzelUs, 4);
    expect(evaporationMenzelSi(at)).toBeCloseTo(menzelSi, 4);
    expect(lbPerFt2HToKgPerM2H(evaporationUnoSi(at))).toBeCloseTo(kg, 4);
  });

  // Same air and concrete temperature at RH 50; formulas published, values arithmetic.
  const same: [tempF: number, wind: number, unoUs: number, unoSi: number, menzelSi: number][] = [
    [60, 0, 0.014, 0.013, 0.014],
    [60, 10, 0.07, 0.067, 0.069],
    [70, 5, 0.061, 0.059, 0.059],
    [70, 20, 0.184, 0.177, 0.176],
    [80, 10, 0.143, 0.137, 0.137],
    [80, 15, 0.2, 0.192, 0.192],
    [90, 10, 0.192, 0.184, 0.189],
    [90, 20, 0.346, 0.331, 0.339],
    [100, 0, 0.05, 0.048, 0.053],
    [100, 20, 0.45, 0.431, 0.461],
  ];
  it.each(same)('%d F air and concrete, RH 50, %d mph', (tempF, wind, unoUs, unoSi, menzelSi) => {
    const at = weather(tempF, tempF, 50, wind);
    expect(Math.abs(evaporationLbPerFt2H(at) - unoUs)).toBeLessThan(0.00101);
    expect(Math.abs(evaporationUnoSi(at) - unoSi)).toBeLessThan(0.00101);
    expect(Math.abs(evaporationMenzelSi(at) - menzelSi)).toBeLessThan(0.00101);
  });

  // The Lerch 1957 / PCA table, from memory: no tighter than 15 percent, or 0.01 lb/ft2/h where it reads small.
  const lerch: [SurfaceWeather, table: number][] = [
    [weather(70, 70, 70, 5), 0.038],
    [weather(70, 70, 70, 15), 0.085],
    [weather(70, 70, 70, 25), 0.135],
    [weather(70, 70, 90, 10), 0.02],
    [weather(70, 70, 50, 10), 0.1],
    [weather(70, 70, 30, 10), 0.135],
    [weather(70, 70, 10, 10), 0.175],
    [weather(50, 50, 70, 10), 0.026],
    [weather(60, 60, 70, 10), 0.043],
    [weather(80, 80, 70, 10), 0.077],
    [weather(90, 90, 70, 10), 0.11],
    [weather(80, 40, 50, 10), 0.25],
    [weather(70, 40, 50, 10), 0.175],
    [weather(60, 40, 50, 10), 0.125],
    [weather(90, 90, 10, 10), 0.336],
    [weather(90, 90, 10, 25), 0.74],
  ];
  it.each(lerch)('Lerch table %o', (at, table) => {
    expect(Math.abs(evaporationLbPerFt2H(at) - table)).toBeLessThan(Math.max(0.15 * table, 0.01));
  });

  it('differs between the equations over a grid no more than was found by hand (arithmetic)', () => {
    let points = 0;
    let negative = 0;
    let worstUno = 0;
    let worstMenzel = 0;
    let splitAtAction = 0;
    for (let concrete = 50; concrete <= 100; concrete += 5)
      for (let air = 40; air <= 100; air += 10)
        for (const humidity of [10, 30, 50, 70, 90])
          for (let wind = 0; wind <= 25; wind += 5) {
            const at = weather(concrete, air, humidity, wind);
            const unoUs = evaporationLbPerFt2H(at);
            points++;
            if (unoUs < 0) negative++;
            worstUno = Math.max(worstUno, Math.abs(unoUs - evaporationUnoSi(at)));
            worstMenzel = Math.max(worstMenzel, Math.abs(unoUs - evaporationMenzelSi(at)));
            if (unoUs >= 0.2 !== evaporationMenzelSi(at) >= 0.2) splitAtAction++;
          }
    expect([points, negative, splitAtAction]).toEqual([2310, 426, 27]);
    expect(worstUno).toBeCloseTo(0.0471, 4);
    expect(worstMenzel).toBeCloseTo(0.0579, 4);
  });

  it('shows what cold air over warm concrete does: over 0.2 at 40 F and 100 percent', () => {
    expect(evaporationLbPerFt2H(weather(80, 40, 100, 10))).toBeGreaterThan(0.2);
  });

  it('grows with concrete temperature and wind, falls with humidity (arithmetic)', () => {
    const base = evaporationLbPerFt2H(weather(80, 75, 50, 10));
    expect(evaporationLbPerFt2H(weather(85, 75, 50, 10))).toBeGreaterThan(base);
    expect(evaporationLbPerFt2H(weather(80, 75, 50, 15))).toBeGreaterThan(base);
    expect(evaporationLbPerFt2H(weather(80, 75, 60, 10))).toBeLessThan(base);
  });

  it('takes air below 0 F as 0 F', () => {
    expect(evaporationLbPerFt2H(weather(60, -10, 80, 5))).toBe(evaporationLbPerFt2H(weather(60, 0, 80, 5)));
    expect(evaporationUnoSi(weather(60, -10, 80, 5))).toBeGreaterThan(0);
  });
});

describe('saturation pressure (published: University of Arizona AZMET, Tetens)', () => {
  it.each([
    [50, 1.2279],
    [60, 1.7672],
    [70, 2.5039],
    [80, 3.4961],
    [90, 4.8147],
    [100, 6.5454],
  ])('%d F', (tempF, kpa) => {
    expect(saturationKpa(tempF)).toBeCloseTo(kpa, 4);
  });
});

describe('wind', () => {
  it.each([
    [0.05, 0.63],
    [0.1, 3.76],
    [0.2, 10.01],
  ])('that reaches %d at 85/85/40 (arithmetic)', (limit, mph) => {
    const calm = { concreteTempF: 85, airTempF: 85, humidityPercent: 40 };
    expect(windForEvaporationMph(calm, limit)).toBeCloseTo(mph, 2);
  });
  it('says when none is needed and when none is enough', () => {
    expect(windForEvaporationMph({ concreteTempF: 100, airTempF: 40, humidityPercent: 10 }, 0.05)).toBe(0);
    expect(windForEvaporationMph({ concreteTempF: 65, airTempF: 90, humidityPercent: 60 }, 0.2)).toBeNull();
  });
  it('at the slab is 0.652 of that at 10 m (common practice): 12 mph gives 0.1733, not 0.2435', () => {
    expect(windAtSlabMph(10)).toBeCloseTo(6.52, 2);
    expect(windAtSlabMph(15)).toBeCloseTo(9.8, 1);
    expect(evaporationLbPerFt2H(weather(87, 80, 50, windAtSlabMph(12)))).toBeCloseTo(0.1733, 3);
  });
});

describe('bad weather figures', () => {
  it.each([
    ['humidity above 100', weather(70, 70, 101, 10), 'humidityPercent'],
    ['negative humidity', weather(70, 70, -1, 10), 'humidityPercent'],
    ['Celsius concrete', weather(30, 27, 50, 12), 'concreteTempF'],
    ['negative wind', weather(70, 70, 50, -1), 'windMph'],
    ['no air temperature', weather(70, Number.NaN, 50, 10), 'airTempF'],
  ])('refuses %s', (_name, at, field) => {
    expect(() => evaporationLbPerFt2H(at)).toThrow(expect.objectContaining({ field }));
    expect(() => evaporationLbPerFt2H(at)).toThrow(InputProblem);
  });
  it('takes humidity 0 and 100', () => {
    expect(evaporationLbPerFt2H(weather(70, 70, 100, 10))).toBe(0);
    expect(evaporationLbPerFt2H(weather(70, 70, 0, 10))).toBeGreaterThan(0.2);
  });
});
