import { addDays, formatDay } from '@strikeboard/domain/zone';
import { describe, expect, it } from 'vitest';
import { dayText } from './day-text.ts';

const year = Array.from({ length: 365 }, (_, days) => addDays('2026-01-01', days));

describe('days on pages', () => {
  // Real Academia Española, Diccionario panhispánico de dudas: "miércoles" and "sábado" carry an accent, short or not.
  it.each([
    ['2026-12-02', 'mié 2 dic'],
    ['2026-12-05', 'sáb 5 dic'],
    ['2026-09-10', 'jue 10 sep'],
  ])('prints %s in Spanish as %s', (day, text) => {
    expect(dayText(day, 'es')).toBe(text);
  });

  it('prints every day of a year in Spanish as text messages do, but for the accents (from memory)', () => {
    for (const day of year)
      expect(
        dayText(day, 'es')
          .normalize('NFD')
          .replace(/\p{Diacritic}/gu, ''),
        day,
      ).toBe(formatDay(day, 'es'));
  });

  it('keeps the English form (common practice, no source)', () => {
    expect(dayText('2026-12-02', 'en')).toBe('Wed Dec 2');
  });
});
