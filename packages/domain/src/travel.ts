import { requireInRange } from './problem.ts';

/** Somewhere on the map; coordinates are degrees, north and east positive, or null where unknown. */
export interface Place {
  /** Two places with the same id are one place, with or without coordinates. */
  readonly id?: string;
  readonly latDeg: number | null;
  readonly lonDeg: number | null;
}

/** The company's settings that travel depends on. */
export interface TravelRules {
  readonly travelMph: number;
  readonly travelRoadFactor: number;
  readonly travelUnknownMin: number;
}

const EARTH_RADIUS_MILES = 3958.7613;
const ROUND_TO_MIN = 5;
const RAD_PER_DEG = Math.PI / 180;
/** Absorbs binary rounding before minutes are rounded up. */
const NOISE = 1e-9;

/**
 * Minutes by road from one place to another: the great circle times the road factor at the company's road speed,
 * rounded up to 5 minutes. 0 for the same site; the company's figure where either end has no coordinates.
 * Common practice, no source.
 */
export function travelMin(from: Place | null, to: Place | null, rules: TravelRules): number {
  if (from && to && (from === to || (from.id !== undefined && from.id === to.id))) return 0;
  if (from?.latDeg == null || from.lonDeg == null || to?.latDeg == null || to.lonDeg == null)
    return rules.travelUnknownMin;
  const miles = greatCircleMiles(from.latDeg, from.lonDeg, to.latDeg, to.lonDeg);
  const minutes = (miles * rules.travelRoadFactor * 60) / rules.travelMph;
  return Math.max(0, Math.ceil(minutes / ROUND_TO_MIN - NOISE)) * ROUND_TO_MIN;
}

/** Statute miles over the sphere of mean radius 6,371.0088 km (haversine). Arithmetic. */
export function greatCircleMiles(latA: number, lonA: number, latB: number, lonB: number): number {
  for (const latDeg of [latA, latB]) requireInRange('latDeg', latDeg, -90, 90);
  for (const lonDeg of [lonA, lonB]) requireInRange('lonDeg', lonDeg, -180, 180);
  const sinLat = Math.sin(((latB - latA) * RAD_PER_DEG) / 2);
  const sinLon = Math.sin(((lonB - lonA) * RAD_PER_DEG) / 2);
  const h = sinLat ** 2 + Math.cos(latA * RAD_PER_DEG) * Math.cos(latB * RAD_PER_DEG) * sinLon ** 2;
  return 2 * EARTH_RADIUS_MILES * Math.asin(Math.min(1, Math.sqrt(h)));
}
