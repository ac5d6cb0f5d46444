import { describe, expect, it } from 'vitest';
import * as units from './units.ts';

describe('unit constants', () => {
  // Published: NIST SP 811 and the international yard; the last two from memory.
  const rows: [name: string, got: number, want: number, digits: number][] = [
    ['1 yd3 in m3 is exact', units.yd3ToM3(1), 0.764554857984, 12],
    ['1 yd3 is 27 ft3', units.FT3_PER_YD3 * units.M_PER_FT ** 3, 0.764554857984, 12],
    ['1 ft2 in m2', units.ft2ToM2(1), 0.09290304, 12],
    ['1 in in mm', units.inToMm(1), 25.4, 12],
    ['1 mil in mm', units.MM_PER_MIL, 0.0254, 12],
    ['1 mph in km/h', units.mphToKmh(1), 1.609344, 12],
    ['1 mph in m/s', units.MS_PER_MPH, 0.44704, 12],
    ['1 psi in kPa', units.KPA_PER_PSI, 6.894757, 6],
    ['1 inHg in psi', units.KPA_PER_INHG / units.KPA_PER_PSI, 0.4912, 4],
    ['1 lb/ft2/h in kg/m2/h', units.lbPerFt2HToKgPerM2H(1), 4.882428, 6],
    ['1 kg/m2/h in lb/ft2/h', units.kgPerM2HToLbPerFt2H(1), 0.204816, 6],
    ['0.2 lb/ft2/h', units.lbPerFt2HToKgPerM2H(0.2), 0.9765, 4],
    ['0.1 lb/ft2/h', units.lbPerFt2HToKgPerM2H(0.1), 0.4882, 4],
    ['0.05 lb/ft2/h', units.lbPerFt2HToKgPerM2H(0.05), 0.2441, 4],
    ['1 gal/yd3 in L/m3 (NRMCA CIP 26 prints 5)', units.L_PER_M3_PER_GAL_PER_YD3, 4.9511, 4],
    ['29.628 km/h is 18.410 mph (16 kn)', units.kmhToMph(29.628), 18.41, 3],
    ['500 psi in MPa (ASTM C403)', units.psiToMpa(500), 3.447, 3],
    ['4,000 psi in MPa (ASTM C403)', units.psiToMpa(4000), 27.579, 3],
    ['150 air-miles in statute miles', 150 * units.STATUTE_MILES_PER_NAUTICAL_MILE, 172.617, 3],
    ['100 air-miles in statute miles', 100 * units.STATUTE_MILES_PER_NAUTICAL_MILE, 115.078, 3],
    ['normal-weight concrete, lb/yd3', units.NORMAL_WEIGHT_LB_PER_FT3 * units.FT3_PER_YD3, 3915, 9],
    ['95 F in C', units.fToC(95), 35, 12],
    ['-40 F in C', units.fToC(-40), -40, 12],
    ['10 C in F', units.cToF(10), 50, 12],
  ];
  it.each(rows)('%s', (_name, got, want, digits) => {
    expect(got).toBeCloseTo(want, digits);
  });

  const pairs: [name: string, there: (x: number) => number, back: (x: number) => number][] = [
    ['yd3', units.yd3ToM3, units.m3ToYd3],
    ['ft2', units.ft2ToM2, units.m2ToFt2],
    ['ft', units.ftToM, units.mToFt],
    ['in', units.inToMm, units.mmToIn],
    ['F', units.fToC, units.cToF],
    ['psi', units.psiToMpa, units.mpaToPsi],
    ['mph', units.mphToKmh, units.kmhToMph],
    ['evaporation', units.lbPerFt2HToKgPerM2H, units.kgPerM2HToLbPerFt2H],
  ];
  it.each(pairs)('%s there and back (arithmetic)', (_name, there, back) => {
    for (const value of [-40, 0, 0.25, 12.5, 5280]) expect(back(there(value))).toBeCloseTo(value, 9);
  });
});
