import type { Language } from '@strikeboard/domain/vocabulary';
import { formatDay, type SiteDay } from '@strikeboard/domain/zone';

// Noon in UTC is within the day whatever the machine's zone; Mexico's short months have three letters, as texts do.
const spanish = new Intl.DateTimeFormat('es-MX', {
  weekday: 'short',
  day: 'numeric',
  month: 'short',
  timeZone: 'UTC',
});

/**
 * The day as pages print it: "Wed Dec 2" in English, "mié 2 dic" in Spanish. Text messages use `formatDay`, which
 * leaves accents out.
 */
export function dayText(day: SiteDay, language: Language): string {
  if (language === 'en') return formatDay(day, 'en');
  const parts = new Map(
    spanish.formatToParts(Date.parse(`${day}T12:00Z`)).map(({ type, value }) => [type, value]),
  );
  return `${parts.get('weekday')} ${parts.get('day')} ${parts.get('month')}`;
}
