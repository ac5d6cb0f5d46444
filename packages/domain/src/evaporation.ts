import { requireInRange } from './problem.ts';
import { fToC, KPA_PER_PSI, kgPerM2HToLbPerFt2H, mphToKmh } from './units.ts';

/** What the surface of fresh concrete meets. */
export interface SurfaceWeather {
  /** Concrete temperature, F, 32 to 120. */
  readonly concreteTempF: number;
  /** Air temperature, F, -60 to 130. */
  readonly airTempF: number;
  /** Relative humidity in percent, 0 to 100. */
  readonly humidityPercent: number;
  /** Wind about 20 in above the slab, mph, 0 to 150; a forecast's 10 m wind goes through {@link windAtSlabMph}. */
  readonly windMph: number;
}

/** Take precautions (ACI 305R, ACI 308): 0.2 lb/ft2/h, 1.0 kg/m2/h. */
export const EVAPORATION_ACTION_LB_PER_FT2_H = 0.2;
/** Caution (FHWA-HRT-05-038 chapter 5): 0.1 lb/ft2/h. */
export const EVAPORATION_CAUTION_LB_PER_FT2_H = 0.1;
/** Action level of mixes that hardly bleed, such as silica fume (ACI 305R and bridge-deck practice, from memory). */
export const EVAPORATION_LOW_BLEED_LB_PER_FT2_H = 0.05;

/**
 * Evaporation of bleed water, lb/ft2/h, by the one equation that checks use: Uno, ACI Materials Journal
 * 95-M34 (1998), US form, also in ACI 305R. Negative means condensation: keep the sign, show 0.
 * Accurate to about 40 percent (Hover, ACI SP-338, 2020), so a guide and no verdict. Air below 0 F, where
 * the equation ends, is taken as 0 F: it holds next to no water either way.
 */
export function evaporationLbPerFt2H(weather: SurfaceWeather): number {
  const { concreteTempF, airTempF, humidity, windMph } = requireWeather(weather);
  return (concreteTempF ** 2.5 - humidity * Math.max(airTempF, 0) ** 2.5) * (1 + 0.4 * windMph) * 1e-6;
}

/**
 * The wind at the slab, mph, at which {@link evaporationLbPerFt2H} reaches `limit`; 0 when still air is
 * already over it, null when no wind gets there (the air gives water to the surface).
 */
export function windForEvaporationMph(
  weather: Omit<SurfaceWeather, 'windMph'>,
  limit: number,
): number | null {
  requireInRange('limit', limit, 0, 10);
  const still = evaporationLbPerFt2H({ ...weather, windMph: 0 });
  if (still >= limit) return 0;
  return still <= 0 ? null : (limit / still - 1) / 0.4;
}

/** Uno 1998, metric form, converted to lb/ft2/h. Not a unit conversion of the US form: about 4 percent lower. */
export function evaporationUnoSi(weather: SurfaceWeather): number {
  const { concreteTempF, airTempF, humidity, windMph } = requireWeather(weather);
  const concrete = (fToC(concreteTempF) + 18) ** 2.5;
  const air = Math.max(fToC(airTempF) + 18, 0) ** 2.5;
  return kgPerM2HToLbPerFt2H(5 * (concrete - humidity * air) * (mphToKmh(windMph) + 4) * 1e-6);
}

/** Menzel 1954 in psi and mph, lb/ft2/h; coefficients from memory. */
export function evaporationMenzelUs(weather: SurfaceWeather): number {
  const { concreteTempF, airTempF, humidity, windMph } = requireWeather(weather);
  const pressurePsi = (saturationKpa(concreteTempF) - humidity * saturationKpa(airTempF)) / KPA_PER_PSI;
  return 0.44 * pressurePsi * (0.253 + 0.096 * windMph);
}

/** Menzel 1954 in kPa and km/h as in the ACI 305R and ACI 308R nomograph, converted to lb/ft2/h. */
export function evaporationMenzelSi(weather: SurfaceWeather): number {
  const { concreteTempF, airTempF, humidity, windMph } = requireWeather(weather);
  const pressureKpa = saturationKpa(concreteTempF) - humidity * saturationKpa(airTempF);
  return kgPerM2HToLbPerFt2H(0.315 * pressureKpa * (0.253 + 0.06 * mphToKmh(windMph)));
}

/** Saturation vapour pressure over water, kPa (Tetens, as published by the University of Arizona AZMET). */
export function saturationKpa(tempF: number): number {
  const tempC = fToC(requireInRange('tempF', tempF, -60, 130));
  return 0.61078 * Math.exp((17.27 * tempC) / (tempC + 237.3));
}

/**
 * Wind 20 in above the slab from a weather service's wind at 10 m, by the 1/7 power law (factor 0.652).
 * The height is from ACI 305R; the law is an engineering approximation, common practice.
 */
export function windAtSlabMph(windAt10mMph: number): number {
  return requireInRange('windAt10mMph', windAt10mMph, 0, 300) * (0.5 / 10) ** (1 / 7);
}

function requireWeather(weather: SurfaceWeather) {
  return {
    concreteTempF: requireInRange('concreteTempF', weather.concreteTempF, 32, 120),
    airTempF: requireInRange('airTempF', weather.airTempF, -60, 130),
    humidity: requireInRange('humidityPercent', weather.humidityPercent, 0, 100) / 100,
    windMph: requireInRange('windMph', weather.windMph, 0, 150),
  };
}
