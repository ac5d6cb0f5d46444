import { describe, expect, test } from 'vitest';
import { MS_PER_HOUR } from '../interval.ts';
import type { WeatherHour } from '../snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  sampleIndex,
  sampleSnapshot,
} from '../testing/sample-board.ts';

const base = sampleSnapshot();

/** A mild forecast for the orchard, hour by hour, with some hours otherwise. The driveway is placed from 6:45. */
function forecast(hours: Record<number, Partial<WeatherHour>>, siteId: string = ids.orchard): WeatherHour[] {
  return Array.from({ length: 72 }, (_, hour) => ({
    siteId,
    startMs: at(day, 0) + hour * MS_PER_HOUR,
    airTempF: 70,
    humidityPercent: 60,
    windMph: 3,
    rainChancePercent: 10,
    ...hours[hour],
  }));
}

const drop = (weather: WeatherHour[], pour = {}) =>
  dropped(
    sampleIndex({ weather, pours: changed(base.pours, ids.drivewayPour, pour) }),
    ids.driveway,
    ids.northCrew,
    at(day, 6),
  );

test('a mild day, and no forecast at all, say nothing', () => {
  for (const weather of [forecast({}), [], forecast({ 8: { airTempF: 20 } }, ids.depot)])
    expect(codesOf(drop(weather).findings).filter((code) => /freez|evap|rain|wind/.test(code))).toEqual([]);
});

describe('freezing (ACI 306R-16: air below 40 F during the protection period, here two days)', () => {
  test.each([
    ['39 F in the second night', { 52: { airTempF: 39 } }, 39],
    ['40 F is not below', { 52: { airTempF: 40 } }, null],
    ['before the first load', { 5: { airTempF: 30 } }, null],
    ['in the hour of the first load', { 6: { airTempF: 35 } }, 35],
    ['after the protection', { 56: { airTempF: 30 } }, null],
    ['the coldest hour is told', { 20: { airTempF: 38 }, 28: { airTempF: 33 } }, 33],
  ] as const)('%s', (_name, hours, airTempF) => {
    const planned = drop(forecast(hours));
    if (airTempF === null) expect(codesOf(planned.findings)).not.toContain('caution freezing');
    else expect(findingsWith(planned, 'freezing')[0].facts).toMatchObject({ airTempF, limitF: 40 });
  });
});

describe('evaporation (Uno 1998; ACI 305R action at 0.2, FHWA caution at 0.1 lb/ft2/h)', () => {
  test.each([
    // Concrete 80 F, air 80 F, 20 percent, 20 mph at 10 m = 13.04 at the slab:
    // (80^2.5 - 0.2 x 80^2.5)(1 + 0.4 x 13.04) 1e-6 = 0.284.
    ['hot, dry and windy', { airTempF: 80, humidityPercent: 20, windMph: 20 }, 'caution', 0.284],
    // 0.6 x 57,243 x (1 + 0.4 x 6.52) 1e-6 = 0.124.
    ['dry', { airTempF: 80, humidityPercent: 40, windMph: 10 }, 'note', 0.124],
    ['still', { airTempF: 80, humidityPercent: 60, windMph: 0 }, null, 0],
  ] as const)('%s', (_name, hour, severity, rate) => {
    const planned = drop(forecast({ 9: hour }), { concreteTempF: 80 });
    if (severity === null)
      expect(codesOf(planned.findings).some((code) => code.endsWith('evaporation-high'))).toBe(false);
    else {
      const [high] = findingsWith(planned, 'evaporation-high');
      expect(high.severity).toBe(severity);
      expect(high.facts.evaporationLbPerFt2H).toBeCloseTo(rate, 2);
      expect(high.during).toEqual({ startMs: at(day, 9), endMs: at(day, 10) });
    }
  });
});

describe('rain before the last patch has set (common practice, no source: 50 percent)', () => {
  test.each([
    ['likely while placing', { 7: { rainChancePercent: 50 } }, 50],
    ['under it', { 7: { rainChancePercent: 49 } }, null],
    ['unknown is not zero, and not rain either', { 7: { rainChancePercent: null } }, null],
    // Final set of the last patch is at 13:55.
    ['just before final set', { 13: { rainChancePercent: 80 } }, 80],
    ['after it', { 14: { rainChancePercent: 80 } }, null],
  ] as const)('%s', (_name, hours, chance) => {
    const planned = drop(forecast(hours));
    if (chance === null) expect(codesOf(planned.findings)).not.toContain('caution rain-likely');
    else expect(findingsWith(planned, 'rain-likely')[0].facts.rainChancePercent).toBe(chance);
  });
});

describe('wind at a boom (common practice, no source: 30 mph)', () => {
  test.each([
    ['30 mph while placing', 'boom-pump', { 7: { windMph: 30 } }, true],
    ['29 mph', 'boom-pump', { 7: { windMph: 29 } }, false],
    ['after placing', 'boom-pump', { 9: { windMph: 45 } }, false],
    ['by chute', 'chute', { 7: { windMph: 45 } }, false],
  ] as const)('%s', (_name, placingMethod, hours, windy) => {
    const planned = drop(forecast(hours), { placingMethod });
    expect(codesOf(planned.findings).includes('caution wind-boom')).toBe(windy);
  });
});
