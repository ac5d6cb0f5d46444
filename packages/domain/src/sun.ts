import { getTimes } from 'suncalc';
import { requireInRange } from './problem.ts';
import { instantAt, type SiteDay } from './zone.ts';

/** Sun events of one day at a site, epoch milliseconds; null where the event does not happen. */
export interface SunTimes {
  readonly sunriseMs: number | null;
  readonly sunsetMs: number | null;
  /** Sun 6 degrees below the horizon, enough light to work without lamps. */
  readonly civilDawnMs: number | null;
  readonly civilDuskMs: number | null;
  /** Set when the sun does not rise or set that day; civil twilight may still come. */
  readonly polar?: 'day' | 'night';
}

/**
 * Sunrise, sunset and civil twilight by the suncalc library, within 2 minutes of NOAA's full series. Latitude
 * north-positive, longitude east-positive, degrees. The events are those of the solar day around the site's noon.
 */
export function sunTimes(day: SiteDay, latDeg: number, lonDeg: number, zone: string): SunTimes {
  requireInRange('latDeg', latDeg, -90, 90);
  requireInRange('lonDeg', lonDeg, -180, 180);
  const times = getTimes(new Date(instantAt(day, 720, zone)), latDeg, lonDeg);
  return {
    sunriseMs: times.sunrise?.getTime() ?? null,
    sunsetMs: times.sunset?.getTime() ?? null,
    civilDawnMs: times.dawn?.getTime() ?? null,
    civilDuskMs: times.dusk?.getTime() ?? null,
    ...(times.alwaysUp ? { polar: 'day' as const } : times.alwaysDown ? { polar: 'night' as const } : {}),
  };
}
