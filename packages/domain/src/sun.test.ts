import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputProblem } from './problem.ts';
import { sunTimes } from './sun.ts';
import { instantAt, siteDayOf } from './zone.ts';

/** Suncalc and NOAA's full series differ by up to about 90 s, so both are held to 2 minutes. */
const TOLERANCE_MS = 120_000;

const places: Record<string, [latDeg: number, lonDeg: number, zone: string]> = {
  'New York': [40.7128, -74.006, 'America/New_York'],
  Denver: [39.7392, -104.9903, 'America/Denver'],
  Phoenix: [33.4484, -112.074, 'America/Phoenix'],
  Minneapolis: [44.9778, -93.265, 'America/Chicago'],
  Houston: [29.7604, -95.3698, 'America/Chicago'],
  Utqiagvik: [71.2906, -156.7886, 'America/Anchorage'],
  'reference 50.5, 30.5': [50.5, 30.5, 'UTC'],
};

function at(place: string, day: string) {
  const [latDeg, lonDeg, zone] = places[place] ?? [Number.NaN, Number.NaN, ''];
  return { zone, times: sunTimes(day, latDeg, lonDeg, zone) };
}

function clockMs(day: string, clock: string, zone: string): number {
  const [hours = 0, minutes = 0, seconds = 0] = clock.split(':').map(Number);
  return instantAt(day, hours * 60 + minutes + seconds / 60, zone);
}

describe('sun times against full-precision NOAA (Meeus) values', () => {
  // Worked from NOAA's published equations; each row in the site's wall clock. Denver's coordinates are the city's usual ones.
  const rows: [place: string, day: string, rise: string, set: string, dawn: string, dusk: string][] = [
    ['New York', '2024-06-21', '05:25:07', '20:30:50', '04:51:41', '21:04:16'],
    ['New York', '2024-12-21', '07:16:49', '16:32:04', '06:45:49', '17:03:04'],
    ['New York', '2024-03-10', '07:14:53', '18:57:56', '06:47:37', '19:25:14'],
    ['New York', '2024-11-03', '06:29:18', '16:49:16', '06:00:42', '17:17:50'],
    ['Denver', '2024-12-21', '07:17:47', '16:39:03', '06:47:20', '17:09:31'],
    ['Phoenix', '2024-06-21', '05:19:06', '19:41:27', '04:50:08', '20:10:25'],
    ['Minneapolis', '2024-12-21', '07:48:26', '16:34:35', '07:14:34', '17:08:27'],
    ['Houston', '2024-06-21', '06:21:39', '20:25:15', '05:54:16', '20:52:37'],
    ['reference 50.5, 30.5', '2013-03-05', '04:33:30', '15:46:18', '04:00:53', '16:18:58'],
  ];
  it.each(rows)('%s %s', (place, day, rise, set, dawn, dusk) => {
    const { zone, times } = at(place, day);
    const pairs: [number | null, string][] = [
      [times.sunriseMs, rise],
      [times.sunsetMs, set],
      [times.civilDawnMs, dawn],
      [times.civilDuskMs, dusk],
    ];
    for (const [ms, clock] of pairs) {
      expect(Math.abs((ms ?? Number.NaN) - clockMs(day, clock, zone))).toBeLessThan(TOLERANCE_MS);
    }
    expect(times.polar).toBeUndefined();
  });

  it('polar day has no sunrise and no twilight, and says so', () => {
    expect(at('Utqiagvik', '2024-06-21').times).toEqual({
      sunriseMs: null,
      sunsetMs: null,
      civilDawnMs: null,
      civilDuskMs: null,
      polar: 'day',
    });
  });
  it('polar night has no sunrise and still civil twilight, 11:56:16 to 14:55:07 AKST', () => {
    const { times, zone } = at('Utqiagvik', '2024-12-21');
    expect([times.sunriseMs, times.sunsetMs, times.polar]).toEqual([null, null, 'night']);
    const gap = (ms: number | null, clock: string) =>
      Math.abs((ms ?? Number.NaN) - clockMs('2024-12-21', clock, zone));
    expect(gap(times.civilDawnMs, '11:56:16')).toBeLessThan(TOLERANCE_MS);
    expect(gap(times.civilDuskMs, '14:55:07')).toBeLessThan(TOLERANCE_MS);
  });

  it("Denver's midsummer sunset is on the next day in UTC and on the same one at the site (published: 02:31Z)", () => {
    const sunset = at('Denver', '2024-06-21').times.sunsetMs ?? Number.NaN;
    expect(new Date(sunset).toISOString().slice(0, 13)).toBe('2024-06-22T02');
    expect(siteDayOf(sunset, 'America/Denver')).toBe('2024-06-21');
  });

  it('longitude is east-positive: the wrong sign moves New York by 9.87 h (arithmetic: 2 x 74.006 x 4 min)', () => {
    const right = sunTimes('2024-06-21', 40.7128, -74.006, 'America/New_York').sunriseMs ?? Number.NaN;
    const wrong = sunTimes('2024-06-21', 40.7128, 74.006, 'America/New_York').sunriseMs ?? Number.NaN;
    expect(Math.abs(Math.abs(right - wrong) / 3_600_000 - 9.87)).toBeLessThan(0.05);
  });

  it('events follow each other and belong to the day asked for, anywhere in the lower 48', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 25, max: 49, noNaN: true }),
        fc.double({ min: -124, max: -67, noNaN: true }),
        fc.integer({ min: 0, max: 3650 }),
        (latDeg, lonDeg, offset) => {
          const zone =
            lonDeg < -114 ? 'America/Los_Angeles' : lonDeg < -101 ? 'America/Denver' : 'America/New_York';
          const day = new Date(Date.UTC(2024, 0, 1 + offset)).toISOString().slice(0, 10);
          const times = sunTimes(day, latDeg, lonDeg, zone);
          const order = [times.civilDawnMs, times.sunriseMs, times.sunsetMs, times.civilDuskMs].map(Number);
          expect(order).toEqual(order.toSorted((a, b) => a - b));
          expect(siteDayOf(times.sunriseMs ?? Number.NaN, zone)).toBe(day);
        },
      ),
    );
  });

  it('refuses places that are none', () => {
    expect(() => sunTimes('2024-06-21', 91, 0, 'UTC')).toThrow(/latDeg/);
    expect(() => sunTimes('2024-06-21', 0, -181, 'UTC')).toThrow(/lonDeg/);
    expect(() => sunTimes('2024-06-21', Number.NaN, 0, 'UTC')).toThrow(InputProblem);
    expect(() => sunTimes('2024-6-21', 0, 0, 'UTC')).toThrow(/YYYY-MM-DD/);
  });
});
