import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { detectDateOrder, parseDate } from './dates.ts';
import type { Parsed } from './reason.ts';
import { parseTimeOfDay, parseTimeRange } from './times.ts';

// Tuesday 2026-12-01. A day has no zone here: cells hold wall-clock days of the site.
const referenceDay = '2026-12-01';
const us = { order: 'month-first', referenceDay } as const;
const dayFirst = { order: 'day-first', referenceDay } as const;

const shown = <T>(result: Parsed<T>): T | string =>
  result.ok ? result.value : `no: ${result.expected.code}`;
const warned = <T>(result: Parsed<T>): string[] =>
  result.ok ? (result.warnings ?? []).map((one) => one.code) : [];
const day = (given: string, options: typeof us | typeof dayFirst = us): string => {
  const result = parseDate(given, options);
  return result.ok ? result.value.day : `no: ${result.expected.code}`;
};

describe('days', () => {
  // Excel serials: 2026-12-08 is 46364 (45658 is 2025-01-01, plus 706; arithmetic). ISO 8601 for year-first days.
  it.each([
    ['12/8/2026', '2026-12-08'],
    ['12/08/26', '2026-12-08'],
    ['12-8-2026', '2026-12-08'],
    ['12.8.2026', '2026-12-08'],
    ['2026-12-08', '2026-12-08'],
    ['2026/12/8', '2026-12-08'],
    ['20261208', '2026-12-08'],
    ['8 Dec 2026', '2026-12-08'],
    ['Dec 8, 2026', '2026-12-08'],
    ['December 8th, 2026', '2026-12-08'],
    ['8-dec-26', '2026-12-08'],
    ['8 de diciembre de 2026', '2026-12-08'],
    ['8 dic. 2026', '2026-12-08'],
    ['Tue 12/8/2026', '2026-12-08'],
    ['Tuesday, Dec 8, 2026', '2026-12-08'],
    ['martes 8 de diciembre', '2026-12-08'],
    ['46364', '2026-12-08'],
    ['46364.27', '2026-12-08'],
    ['2028-02-29', '2028-02-29'],
    ['2026-12-08T00:00:00.000Z', '2026-12-08'],
    ['2026-12-08T07:00:00Z', 'no: date'],
    ['Mon 12/8/2026', 'no: weekday-disagrees'],
    ['2026-02-29', 'no: date'],
    ['2/30/2026', 'no: date'],
    ['13/12/2026', 'no: date-month-first'],
    ['0/12/2026', 'no: date'],
    ['12/8/1999', 'no: date'],
    ['12/2026', 'no: date'],
    ['December 2026', 'no: date'],
    ['next week', 'no: date'],
    ['1250', 'no: date'],
    ['', 'no: date'],
  ])('%s is %s', (given, right) => {
    expect(day(given)).toBe(right);
  });

  it('reads the day first where the file does', () => {
    expect(day('8/12/2026', dayFirst)).toBe('2026-12-08');
    expect(day('13/12/2026', dayFirst)).toBe('2026-12-13');
    expect(day('12/28/2026', dayFirst)).toBe('no: date-day-first');
    expect(day('2026-12-08', dayFirst)).toBe('2026-12-08');
  });

  it('puts a year-less day nearest to the reference day and says so', () => {
    expect(day('Dec 8')).toBe('2026-12-08');
    expect(day('1/15')).toBe('2027-01-15');
    expect(day('11/20')).toBe('2026-11-20');
    expect(day('2/29')).toBe('no: date');
    expect(parseDate('2/29', { order: 'month-first', referenceDay: '2027-12-01' })).toMatchObject({
      value: { day: '2028-02-29' },
    });
    expect(warned(parseDate('Dec 8', us))).toEqual(['year-assumed']);
    expect(warned(parseDate('12/8/2026', us))).toEqual([]);
    expect(warned(parseDate('12/8/2062', us))).toEqual(['day-far']);
  });

  it('keeps a time beside the day', () => {
    expect(shown(parseDate('2026-12-08 06:30', us))).toEqual({ day: '2026-12-08', minute: 390 });
    expect(shown(parseDate('12/8/2026 6:30 PM', us))).toEqual({ day: '2026-12-08', minute: 1110 });
    expect(shown(parseDate('46364.75', us))).toEqual({ day: '2026-12-08', minute: 1080 });
    expect(shown(parseDate('12/8/2026 0:00', us))).toEqual({ day: '2026-12-08', minute: null });
  });

  it.each([
    [['12/8/2026', '1/2/2026'], { order: 'month-first', proven: false, mixed: false }],
    [['12/28/2026', '1/2/2026'], { order: 'month-first', proven: true, mixed: false }],
    [['28/12/2026', '1/2/2026'], { order: 'day-first', proven: true, mixed: false }],
    [['28/12/2026', '12/28/2026'], { order: 'month-first', proven: true, mixed: true }],
    [['2026-12-28', '2026/28/12'], { order: 'month-first', proven: false, mixed: false }],
  ])('the order of %j is %j', (cells, right) => {
    expect(detectDateOrder(cells)).toEqual(right);
  });

  it('reads every day back from each way of writing it', () => {
    const anyDay = fc.date({
      min: new Date('2000-01-01T00:00:00Z'),
      max: new Date('2099-12-31T00:00:00Z'),
      noInvalidDate: true,
    });
    fc.assert(
      fc.property(anyDay, (date) => {
        const iso = date.toISOString().slice(0, 10);
        const [year, month, dayOfMonth] = iso.split('-').map(Number);
        const name = date.toLocaleDateString('en-US', { month: 'long', timeZone: 'UTC' });
        const weekday = date.toLocaleDateString('es-MX', { weekday: 'long', timeZone: 'UTC' });
        for (const text of [
          iso,
          `${month}/${dayOfMonth}/${year}`,
          `${name} ${dayOfMonth}, ${year}`,
          `${weekday} ${iso}`,
        ]) {
          expect(day(text)).toBe(iso);
        }
        expect(day(`${dayOfMonth}.${month}.${year}`, dayFirst)).toBe(iso);
      }),
    );
  });
});

describe('times', () => {
  it.each([
    ['6:30', 390],
    ['6:30 AM', 390],
    ['6:30am', 390],
    ['6:30 a.m.', 390],
    ['630a', 390],
    ['0630', 390],
    ['630', 390],
    ['6', 360],
    ['6a', 360],
    ['6 pm', 1080],
    ['18:30', 1110],
    ['18:30:00', 1110],
    ['1830', 1110],
    ['12 am', 0],
    ['12:15 AM', 15],
    ['12 pm', 720],
    ['noon', 720],
    ['mediodía', 720],
    ['midnight', 0],
    ['24:00', 1440],
    ['0.270833333333333', 390],
    ['6:30 hrs', 390],
    ['6:60', 'no: time'],
    ['25:00', 'no: time'],
    ['13:00 PM', 'no: time'],
    ['0 am', 'no: time'],
    ['early', 'no: time'],
    ['', 'no: time'],
  ])('%s is minute %s', (given, right) => {
    expect(shown(parseTimeOfDay(given))).toBe(right);
  });

  it('warns where the half of the day is a guess', () => {
    expect(warned(parseTimeOfDay('1:30'))).toEqual(['half-day-assumed']);
    expect(warned(parseTimeOfDay('01:30'))).toEqual([]);
    expect(warned(parseTimeOfDay('1:30 pm'))).toEqual([]);
    expect(warned(parseTimeOfDay('5:00'))).toEqual([]);
  });

  it.each([
    ['7am-5pm', { fromMin: 420, untilMin: 1020 }],
    ['7:00 - 17:00', { fromMin: 420, untilMin: 1020 }],
    ['7-5', { fromMin: 420, untilMin: 1020 }],
    ['7 to 5', { fromMin: 420, untilMin: 1020 }],
    ['7:30 AM – 6 PM', { fromMin: 450, untilMin: 1080 }],
    ['de 7 a 17', { fromMin: 420, untilMin: 1020 }],
    ['22:00-06:00', { fromMin: 1320, untilMin: 360 }],
    ['6:00-0:00', { fromMin: 360, untilMin: 1440 }],
    ['7:00-07:00', 'no: time-range'],
    ['7', 'no: time-range'],
    ['day', 'no: time-range'],
  ])('the hours %s are %j', (given, right) => {
    expect(shown(parseTimeRange(given))).toEqual(right);
  });

  it('reads every minute back and answers any text', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1439 }), fc.string({ unit: 'grapheme' }), (minute, noise) => {
        const hour = Math.floor(minute / 60);
        const past = String(minute % 60).padStart(2, '0');
        expect(shown(parseTimeOfDay(`${String(hour).padStart(2, '0')}:${past}`))).toBe(minute);
        expect(
          shown(parseTimeOfDay(`${hour % 12 === 0 ? 12 : hour % 12}:${past} ${hour < 12 ? 'AM' : 'PM'}`)),
        ).toBe(minute);
        const results = [parseTimeOfDay(noise), parseTimeRange(noise), parseDate(noise, us)];
        expect(results.every((result) => typeof result.ok === 'boolean')).toBe(true);
      }),
    );
  });
});
