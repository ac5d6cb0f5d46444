/**
 * Exact conversions between the trade's units in the US and metric ones. The international yard
 * (0.9144 m), pound (0.45359237 kg) and US gallon (231 in3) are exact by definition (NIST SP 811).
 */

export const FT3_PER_YD3 = 27;
export const M3_PER_YD3 = 0.764554857984;
export const M2_PER_FT2 = 0.09290304;
export const M_PER_FT = 0.3048;
export const MM_PER_IN = 25.4;
export const MM_PER_MIL = 0.0254;
export const KMH_PER_MPH = 1.609344;
export const MS_PER_MPH = 0.44704;
/** Pound-force (4.4482216152605 N) over one square inch. */
export const KPA_PER_PSI = 4.4482216152605 / 0.64516;
/** Conventional inch of mercury, 3386.389 Pa (NIST SP 811). */
export const KPA_PER_INHG = 3.386389;
export const KG_PER_LB = 0.45359237;
export const KG_PER_M2_PER_LB_PER_FT2 = KG_PER_LB / M2_PER_FT2;
/** Litres per cubic metre for one US gallon per cubic yard, the unit of water added on site. */
export const L_PER_M3_PER_GAL_PER_YD3 = 3.785411784 / M3_PER_YD3;
/** The air-mile of drivers' hours-of-service rules is the nautical mile, 1852 m. */
export const STATUTE_MILES_PER_NAUTICAL_MILE = 1852 / 1609.344;
/** Usual fresh normal-weight concrete; from memory (PCA/ACI common value). */
export const NORMAL_WEIGHT_LB_PER_FT3 = 145;

export const yd3ToM3 = (yd3: number): number => yd3 * M3_PER_YD3;
export const m3ToYd3 = (m3: number): number => m3 / M3_PER_YD3;
export const ft2ToM2 = (ft2: number): number => ft2 * M2_PER_FT2;
export const m2ToFt2 = (m2: number): number => m2 / M2_PER_FT2;
export const ftToM = (ft: number): number => ft * M_PER_FT;
export const mToFt = (m: number): number => m / M_PER_FT;
export const inToMm = (inches: number): number => inches * MM_PER_IN;
export const mmToIn = (mm: number): number => mm / MM_PER_IN;
/** A temperature reading. A difference of temperatures has no 32: use 5/9 for that. */
export const fToC = (tempF: number): number => ((tempF - 32) * 5) / 9;
export const cToF = (tempC: number): number => (tempC * 9) / 5 + 32;
export const psiToMpa = (psi: number): number => (psi * KPA_PER_PSI) / 1000;
export const mpaToPsi = (mpa: number): number => (mpa * 1000) / KPA_PER_PSI;
export const mphToKmh = (mph: number): number => mph * KMH_PER_MPH;
export const kmhToMph = (kmh: number): number => kmh / KMH_PER_MPH;
/** Evaporation rates. */
export const lbPerFt2HToKgPerM2H = (rate: number): number => rate * KG_PER_M2_PER_LB_PER_FT2;
export const kgPerM2HToLbPerFt2H = (rate: number): number => rate / KG_PER_M2_PER_LB_PER_FT2;
