import fc from 'fast-check';
import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import { InputProblem } from './problem.ts';
import {
  addDays,
  dayInterval,
  daysBetween,
  formatClock,
  formatDay,
  instantAt,
  isSiteDay,
  isSkipped,
  isZone,
  minuteOfDay,
  mondayOf,
  siteDayOf,
  splitByDay,
  wallInterval,
  weekdayOf,
} from './zone.ts';

const at = (iso: string): number => Date.parse(iso);
const hours = (interval: { startMs: number; endMs: number }): number =>
  (interval.endMs - interval.startMs) / 3_600_000;

/** Zones with an hour, a half-hour and no change of clocks, changes at midnight, and whole- and part-hour offsets. */
const ZONES = [
  'America/Chicago',
  'America/New_York',
  'America/Denver',
  'America/Phoenix',
  'America/Anchorage',
  'America/St_Johns',
  'America/Havana',
  'America/Asuncion',
  'America/Nuuk',
  'Europe/Berlin',
  'Africa/Cairo',
  'Asia/Kathmandu',
  'Australia/Lord_Howe',
  'Pacific/Chatham',
  'Pacific/Apia',
  'UTC',
];

describe('machine zone', () => {
  it('differs from the sites and viewers below, so a wrong conversion shows', () => {
    expect(['Pacific/Chatham', 'Asia/Tokyo']).toContain(Intl.DateTimeFormat().resolvedOptions().timeZone);
  });
});

describe('instantAt (RFC 5545 section 3.3.5)', () => {
  // Published: RFC 5545 section 3.3.5 gives the two New York rows; the rest are from the IANA tz rules.
  const rows: [name: string, day: string, minute: number, zone: string, iso: string][] = [
    ['ambiguous time is the first (RFC 5545)', '2007-11-04', 90, 'America/New_York', '2007-11-04T05:30:00Z'],
    [
      'skipped time moves by the gap (RFC 5545)',
      '2007-03-11',
      150,
      'America/New_York',
      '2007-03-11T07:30:00Z',
    ],
    ['Chicago 02:30 does not exist: 03:30 CDT', '2026-03-08', 150, 'America/Chicago', '2026-03-08T08:30:00Z'],
    ['Chicago 01:30 comes twice: CDT', '2026-11-01', 90, 'America/Chicago', '2026-11-01T06:30:00Z'],
    ['Denver 06:00 on the autumn day', '2026-11-01', 360, 'America/Denver', '2026-11-01T13:00:00Z'],
    [
      'Lord Howe half-hour gap: 02:15 is 02:45',
      '2026-10-04',
      135,
      'Australia/Lord_Howe',
      '2026-10-03T15:45:00Z',
    ],
    ['Lord Howe 01:45 comes twice: +11', '2026-04-05', 105, 'Australia/Lord_Howe', '2026-04-04T14:45:00Z'],
    ['Cairo midnight is skipped: 01:00', '2026-04-24', 0, 'Africa/Cairo', '2026-04-23T22:00:00Z'],
    ['1440 is the next midnight', '2026-06-10', 1440, 'America/Chicago', '2026-06-11T05:00:00Z'],
    ['1800 is 06:00 of the next day', '2026-03-07', 1800, 'America/Chicago', '2026-03-08T11:00:00Z'],
    ['-60 is 23:00 of the day before', '2026-06-10', -60, 'America/Chicago', '2026-06-10T04:00:00Z'],
  ];
  it.each(rows)('%s', (_name, day, minute, zone, iso) => {
    expect(new Date(instantAt(day, minute, zone)).toISOString()).toBe(iso.replace('Z', '.000Z'));
  });

  it('says when the time asked for is skipped', () => {
    expect(isSkipped('2026-03-08', 150, 'America/Chicago')).toBe(true);
    expect(isSkipped('2026-03-08', 180, 'America/Chicago')).toBe(false);
    expect(isSkipped('2026-11-01', 90, 'America/Chicago')).toBe(false);
  });
});

describe('length of days and nights', () => {
  // Arithmetic from the IANA tz rules of 2026 (US: second Sunday of March, first Sunday of November).
  const days: [name: string, day: string, zone: string, hours: number][] = [
    ['Chicago spring', '2026-03-08', 'America/Chicago', 23],
    ['Chicago autumn', '2026-11-01', 'America/Chicago', 25],
    ['Chicago ordinary', '2026-06-10', 'America/Chicago', 24],
    ['Phoenix has no change', '2026-03-08', 'America/Phoenix', 24],
    ['Lord Howe spring', '2026-10-04', 'Australia/Lord_Howe', 23.5],
    ['Lord Howe autumn', '2026-04-05', 'Australia/Lord_Howe', 24.5],
    ['Cairo begins at 01:00', '2026-04-24', 'Africa/Cairo', 23],
  ];
  it.each(days)('%s', (_name, day, zone, length) => {
    expect(hours(dayInterval(day, zone))).toBe(length);
  });

  const nights: [name: string, day: string, zone: string, hours: number][] = [
    ['22:00-06:00 over the spring change is 7 h', '2026-03-07', 'America/Chicago', 7],
    ['22:00-06:00 over the autumn change is 9 h', '2026-10-31', 'America/Chicago', 9],
    ['22:00-06:00 in Phoenix is 8 h', '2026-03-07', 'America/Phoenix', 8],
  ];
  it.each(nights)('%s', (_name, day, zone, length) => {
    expect(hours(wallInterval(day, 22 * 60, 6 * 60, zone))).toBe(length);
  });

  it('refuses 08:00 to 08:00 instead of reading 24 hours', () => {
    expect(() => wallInterval('2026-06-10', 480, 480, 'America/Chicago')).toThrow(InputProblem);
  });

  it('refuses a day the zone left out (IANA tz: Samoa skipped 2011-12-30)', () => {
    expect(() => dayInterval('2011-12-30', 'Pacific/Apia')).toThrow(/a day that exists/);
    expect(hours(dayInterval('2011-12-31', 'Pacific/Apia'))).toBe(24);
  });

  it('shows a pour of 20:00 to 03:00 on both days', () => {
    const parts = splitByDay(wallInterval('2026-03-07', 1200, 180, 'America/Chicago'), 'America/Chicago');
    expect(parts.map((part) => [part.day, hours(part.interval)])).toEqual([
      ['2026-03-07', 4],
      ['2026-03-08', 2],
    ]);
  });
});

describe('elapsed hours against the wall clock', () => {
  // Arithmetic from the IANA tz rules of 2026.
  const rows: [
    name: string,
    startDay: string,
    startMinute: number,
    elapsedH: number,
    day: string,
    clock: string,
  ][] = [
    ['saw 8 h after 20:00, spring', '2026-03-07', 1200, 8, '2026-03-08', '5:00 AM'],
    ['saw 8 h after 20:00, autumn', '2026-10-31', 1200, 8, '2026-11-01', '3:00 AM'],
    ['168 h cure, spring', '2026-03-06', 900, 168, '2026-03-13', '4:00 PM'],
    ['168 h cure, autumn', '2026-10-30', 900, 168, '2026-11-06', '2:00 PM'],
  ];
  it.each(rows)('%s', (_name, startDay, startMinute, elapsedH, day, clock) => {
    const ms = instantAt(startDay, startMinute, 'America/Chicago') + elapsedH * 3_600_000;
    expect(siteDayOf(ms, 'America/Chicago')).toBe(day);
    expect(formatClock(ms, 'America/Chicago', 'en')).toBe(clock);
  });
});

describe('calendar days', () => {
  it('knows weekdays (ISO 8601) and weeks', () => {
    expect(weekdayOf('1970-01-01')).toBe(4);
    expect(weekdayOf('1969-12-29')).toBe(1);
    expect(weekdayOf('2026-12-08')).toBe(2);
    expect(mondayOf('2026-12-06')).toBe('2026-11-30');
    expect(mondayOf('2026-11-30')).toBe('2026-11-30');
  });
  it('adds and counts days without a clock', () => {
    expect(addDays('2026-03-07', 2)).toBe('2026-03-09');
    expect(addDays('2028-02-28', 1)).toBe('2028-02-29');
    expect(addDays('2026-01-01', -1)).toBe('2025-12-31');
    expect(daysBetween('2026-10-30', '2026-11-06')).toBe(7);
  });
  it.each(['2026-02-30', '2026-13-01', '2026-1-1', '12/8/2026', '', '2026-12-08T00:00'])(
    'refuses %s',
    (text) => {
      expect(isSiteDay(text)).toBe(false);
      expect(() => addDays(text, 1)).toThrow(InputProblem);
    },
  );
  it('refuses zones and instants that are none', () => {
    expect(isZone('America/Chicago')).toBe(true);
    for (const zone of ['Mars/Base', '+05:30', '', 'local time']) {
      expect(isZone(zone)).toBe(false);
      expect(() => siteDayOf(0, zone)).toThrow(InputProblem);
    }
    expect(() => siteDayOf(Number.NaN, 'America/Chicago')).toThrow(InputProblem);
    expect(() => siteDayOf(Number.POSITIVE_INFINITY, 'America/Chicago')).toThrow(InputProblem);
    expect(() => instantAt('2026-06-10', Number.NaN, 'America/Chicago')).toThrow(InputProblem);
  });
});

describe('words', () => {
  it('writes clock and day in both languages, in ASCII', () => {
    const ms = at('2026-12-08T12:30:00Z');
    expect(formatClock(ms, 'America/Chicago', 'en')).toBe('6:30 AM');
    expect(formatClock(ms, 'America/Chicago', 'es')).toBe('6:30');
    expect(formatClock(at('2026-12-08T06:05:00Z'), 'America/Chicago', 'en')).toBe('12:05 AM');
    expect(formatClock(at('2026-12-08T18:05:59Z'), 'America/Chicago', 'en')).toBe('12:05 PM');
    expect(formatClock(at('2026-12-09T00:05:00Z'), 'America/Chicago', 'es')).toBe('18:05');
    expect(formatDay('2026-12-08', 'en')).toBe('Tue Dec 8');
    expect(formatDay('2026-12-08', 'es')).toBe('mar 8 dic');
    for (let i = 0; i < 366; i++) {
      const words = `${formatDay(addDays('2026-01-01', i), 'es')} ${formatDay(addDays('2026-01-01', i), 'en')}`;
      expect(words).toMatch(/^[A-Za-z0-9 ]+$/);
    }
  });
});

describe('remembered offsets agree with luxon', () => {
  const zone = fc.constantFrom(...ZONES);
  // Within 3 hours of every change that luxon finds in 2024-2027, and anywhere in 1990-2037.
  const changes = ZONES.flatMap((name) => changesOf(name).map((ms) => ({ name, ms })));

  it('has changes to look at', () => {
    expect(changes.length).toBeGreaterThan(60);
    expect(new Set(changes.map((change) => change.name)).has('Australia/Lord_Howe')).toBe(true);
  });

  it('around every change of clocks', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...changes),
        fc.integer({ min: -10_800_000, max: 10_800_000 }),
        (change, shift) => {
          agree(change.ms + shift, change.name);
        },
      ),
      { numRuns: 3000 },
    );
    for (const { ms, name } of changes) for (const shift of [-1, 0, 1]) agree(ms + shift, name);
  });

  it('at any instant', () => {
    fc.assert(
      fc.property(
        zone,
        fc.integer({ min: at('1990-01-01T00:00:00Z'), max: at('2037-12-31T00:00:00Z') }),
        (name, ms) => {
          agree(ms, name);
        },
      ),
      { numRuns: 2000 },
    );
  });

  it('and instantAt undoes day and minute, choosing the first of two', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...changes),
        fc.integer({ min: -10_800_000, max: 10_800_000 }),
        (change, shift) => {
          const ms = change.ms + shift;
          const day = siteDayOf(ms, change.name);
          const back = instantAt(day, minuteOfDay(ms, change.name), change.name);
          expect(back).toBeLessThanOrEqual(ms);
          expect([siteDayOf(back, change.name), minuteOfDay(back, change.name)]).toEqual([
            day,
            minuteOfDay(ms, change.name),
          ]);
          const whole = dayInterval(day, change.name);
          expect(whole.startMs <= ms && ms < whole.endMs).toBe(true);
          const luxonDay = (instant: number) =>
            DateTime.fromMillis(instant, { zone: change.name }).toISODate();
          expect([luxonDay(whole.startMs), luxonDay(whole.endMs - 1)]).toEqual([day, day]);
          expect([luxonDay(whole.startMs - 1), luxonDay(whole.endMs)]).toEqual([
            addDays(day, -1),
            addDays(day, 1),
          ]);
        },
      ),
      { numRuns: 2000 },
    );
  });

  function agree(ms: number, name: string): void {
    const local = DateTime.fromMillis(ms, { zone: name });
    expect(siteDayOf(ms, name)).toBe(local.toISODate());
    expect(minuteOfDay(ms, name)).toBeCloseTo(
      local.hour * 60 + local.minute + local.second / 60 + local.millisecond / 60_000,
      6,
    );
  }

  function changesOf(name: string): number[] {
    const found: number[] = [];
    const hour = 3_600_000;
    let before = DateTime.fromISO('2024-01-01T00:00Z', { zone: name }).offset;
    for (let ms = at('2024-01-01T00:00Z'); ms < at('2027-12-31T00:00Z'); ms += 24 * hour) {
      const after = DateTime.fromMillis(ms + 24 * hour, { zone: name }).offset;
      if (after === before) continue;
      let change = ms;
      while (DateTime.fromMillis(change, { zone: name }).offset === before) change += hour / 4;
      found.push(change);
      before = after;
    }
    return found;
  }
});
