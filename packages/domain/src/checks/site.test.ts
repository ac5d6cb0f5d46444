import { describe, expect, test } from 'vitest';
import type { Site } from '../snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  nowMs,
  sampleIndex,
  sampleSnapshot,
} from '../testing/sample-board.ts';
import { isPermitted } from './site.ts';

const base = sampleSnapshot();
const orchard = base.sites.find((one) => one.id === ids.orchard);
if (!orchard) throw new Error('The orchard is on the sample board');
const withSite = (change: Partial<Site>) => ({ sites: changed(base.sites, ids.orchard, change) });

describe('permitted hours', () => {
  // The driveway: crew 0:00, placing 0:45 to 1:55, finishing until 7:45, wash-up until 8:15 after the start.
  test.each([
    ['all within', 420, 1140, 7, 0, null],
    ['placing starts on the minute, the crew before', 420, 1140, 6, 15, 'caution'],
    ['placing starts a minute before', 420, 1140, 6, 14, 'stop'],
    ['finishing ends on the minute', 420, 1140, 11, 15, null],
    ['finishing ends a minute after', 420, 1140, 11, 16, 'caution'],
    ['placing ends on the minute', 420, 1140, 17, 5, 'caution'],
    ['placing ends a minute after', 420, 1140, 17, 6, 'stop'],
    ['only a start is set', 420, null, 7, 0, null],
    ['only an end is set', null, 1140, 17, 6, 'stop'],
    ['none set', null, null, 23, 0, null],
  ] as const)('%s', (_name, permittedFromMin, permittedUntilMin, hour, minute, severity) => {
    const index = sampleIndex(withSite({ permittedFromMin, permittedUntilMin }));
    const planned = dropped(index, ids.driveway, ids.northCrew, at(day, hour, minute));
    if (severity === null)
      expect(codesOf(planned.findings).some((code) => code.endsWith('site-hours'))).toBe(false);
    else expect(findingsWith(planned, 'site-hours')[0].severity).toBe(severity);
  });

  test('says when the crew would have to start', () => {
    const index = sampleIndex(withSite({ permittedFromMin: 420, permittedUntilMin: 1140 }));
    const early = findingsWith(dropped(index, ids.driveway, ids.northCrew, at(day, 6)), 'site-hours');
    expect(early[0].clears).toEqual([{ kind: 'start-after', atMs: at(day, 6, 15) }]);
    const late = findingsWith(dropped(index, ids.driveway, ids.northCrew, at(day, 18)), 'site-hours');
    expect(late[0].clears).toEqual([{ kind: 'start-by', atMs: at(day, 17, 5) }]);
  });

  const [from, until] = [1200, 360];
  test.each([
    // Nights only, 20:00 to 6:00, read by the site's clock through both changes (zone database).
    ['a June night', from, until, [day, 20, 0], ['2026-06-10', 6, 0], true],
    ['a minute too long', from, until, [day, 20, 0], ['2026-06-10', 6, 1], false],
    ['after midnight', from, until, ['2026-06-10', 1, 0], ['2026-06-10', 5, 0], true],
    ['by day', from, until, [day, 12, 0], [day, 13, 0], false],
    ['the night of 9 h', from, until, ['2026-03-07', 20, 0], ['2026-03-08', 6, 0], true],
    ['the night of 11 h', from, until, ['2026-10-31', 20, 0], ['2026-11-01', 6, 0], true],
    ['the whole day, over midnight', 0, 1440, [day, 22, 0], ['2026-06-10', 4, 0], true],
  ] as const)('of a night: %s', (_name, permittedFromMin, permittedUntilMin, start, end, permitted) => {
    const site = { ...orchard, permittedFromMin, permittedUntilMin };
    const [startMs, endMs] = [start, end].map(([siteDay, hour, minute]) => at(siteDay, hour, minute));
    expect(isPermitted(site, { startMs: startMs ?? 0, endMs: endMs ?? 0 })).toBe(permitted);
  });
});

describe('daylight', () => {
  test.each([
    // NOAA series by SunCalc, within 2 min: civil dusk of New York 2024-12-21 is 17:03:04 EST.
    ['ends before dusk', '2024-12-21', 8, 45, null],
    ['ends at 17:30, after dusk', '2024-12-21', 9, 45, 27],
  ] as const)('%s', (_name, siteDay, hour, minute, darkMin) => {
    const index = sampleIndex(withSite({ zone: 'America/New_York', latDeg: 40.7128, lonDeg: -74.006 }));
    // New York is an hour ahead of the sample board's clock.
    const startMs = at(siteDay, hour, minute) - 3_600_000;
    const planned = dropped(index, ids.driveway, ids.northCrew, startMs);
    if (darkMin === null) expect(codesOf(planned.findings)).not.toContain('caution after-dark');
    else {
      const [dark] = findingsWith(planned, 'after-dark');
      expect(Math.abs(Number(dark.facts.darkMin) - darkMin)).toBeLessThanOrEqual(2);
      expect(dark.clears[0]?.kind).toBe('start-by');
    }
  });

  test('a night is dark', () => {
    const planned = dropped(sampleIndex(), ids.driveway, ids.northCrew, at(day, 20));
    expect(findingsWith(planned, 'after-dark')[0].severity).toBe('caution');
  });

  test('a polar day is not, a polar night is (Utqiagvik 71.29 N, NOAA)', () => {
    const north = withSite({ zone: 'America/Anchorage', latDeg: 71.2906, lonDeg: -156.7886 });
    const summer = dropped(sampleIndex(north), ids.driveway, ids.northCrew, at('2026-06-21', 23));
    expect(codesOf(summer.findings)).not.toContain('caution after-dark');
    const winter = dropped(sampleIndex(north), ids.driveway, ids.northCrew, at('2026-12-21', 20));
    expect(codesOf(winter.findings)).toContain('caution after-dark');
  });

  test('without coordinates nothing is said', () => {
    const planned = dropped(sampleIndex(), ids.walk, ids.northCrew, at(day, 20));
    expect(codesOf(planned.findings)).not.toContain('caution after-dark');
  });
});

describe('readiness', () => {
  const readiness = [
    { item: 'forms', done: true },
    { item: 'inspection', done: false },
  ];
  const pours = changed(base.pours, ids.drivewayPour, { readiness });

  test.each([
    // Now is Monday 7:00.
    ['in two days', at('2026-06-10', 7), 'note'],
    ['in less', at('2026-06-10', 6, 59), 'caution'],
    ['past', nowMs - 3_600_000, 'caution'],
  ] as const)('%s', (_name, startMs, severity) => {
    const [open] = findingsWith(
      dropped(sampleIndex({ pours }), ids.driveway, ids.northCrew, startMs),
      'not-ready',
    );
    expect(open).toMatchObject({
      severity,
      facts: { itemsUndone: 1, items: 2 },
      clears: [{ kind: 'make-ready', items: ['inspection'] }],
    });
  });

  test('all done, or no list', () => {
    const done = changed(base.pours, ids.drivewayPour, { readiness: [{ item: 'forms', done: true }] });
    for (const index of [sampleIndex({ pours: done }), sampleIndex()])
      expect(codesOf(dropped(index, ids.driveway, ids.northCrew, nowMs).findings)).not.toContain(
        'caution not-ready',
      );
  });
});
