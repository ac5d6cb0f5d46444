import { type CountryCode, parsePhoneNumberFromString } from 'libphonenumber-js/min';
import type { Language } from '../vocabulary.ts';
import { isZone } from '../zone-offset.ts';
import { type Parsed, parsed, refused } from './reason.ts';
import { fold, tidy } from './text.ts';

/**
 * A phone number in E.164 (ITU-T E.164): `(970) 555-0123`, `970.555.0123`, `+52 55 1234 5678`; without a country code
 * it is one of `country`. An extension is left out with a warning, for no text message reaches it.
 */
export function parsePhone(text: string, country: CountryCode): Parsed<string> {
  // A number that went through a spreadsheet as a float comes back as 9705550123.0.
  const plain = tidy(text)
    .replace(/\.0+$/, '')
    .replace(/[‐‑–—−]/g, '-');
  const pieces = plain.split(/[/;,|]| or | o /).filter((piece) => piece.replace(/\D/g, '').length >= 7);
  if (pieces.length > 1) return refused({ code: 'phone-only-one' });
  if (country === 'US' && /^\D*\d{3}\D*\d{4}\D*$/.test(plain)) return refused({ code: 'phone-area-code' });
  const phone = parsePhoneNumberFromString(plain, country);
  if (!phone?.isValid() || /\d[eE]\+?\d/.test(plain)) return refused({ code: 'phone' });
  return parsed(phone.number, phone.ext ? [{ code: 'left-out', text: `x${phone.ext}` }] : []);
}

const EMAIL =
  /^[a-z0-9!#$%&'*+/=?^_`{|}~-]+(?:\.[a-z0-9!#$%&'*+/=?^_`{|}~-]+)*@(?:[a-z0-9](?:[a-z0-9-]{0,61}[a-z0-9])?\.)+[a-z]{2,63}$/;

/** An e-mail address in lower case; also out of `Ana <ana@example.com>` and `mailto:ana@example.com`. */
export function parseEmail(text: string): Parsed<string> {
  const plain = tidy(text);
  const inner = /<([^<>]+)>$/.exec(plain)?.[1] ?? plain;
  const email = inner
    .trim()
    .replace(/^mailto:/i, '')
    .toLowerCase();
  const valid = email.length <= 254 && email.indexOf('@') <= 64 && EMAIL.test(email);
  return valid ? parsed(email) : refused({ code: 'email' });
}

const YES = new Set(['yes', 'y', 'true', '1', 'x', 'si', 's', 'verdadero', 'ok']);
const NO = new Set(['no', 'n', 'false', '0', 'falso']);

/** Yes or no in English or Spanish, ticks and crosses included. */
export function parseYesNo(text: string): Parsed<boolean> {
  if (/^[✓✔☑]$/u.test(text.trim())) return parsed(true);
  const word = fold(text);
  if (YES.has(word)) return parsed(true);
  return NO.has(word) ? parsed(false) : refused({ code: 'yes-no' });
}

const LANGUAGE_WORDS: ReadonlyMap<string, Language | null> = new Map([
  ...['english', 'eng', 'en', 'e', 'ingles', 'en us'].map((word) => [word, 'en'] as const),
  ...['spanish', 'span', 'sp', 'es', 'esp', 's', 'espanol', 'castellano'].map(
    (word) => [word, 'es'] as const,
  ),
  ...['both', 'bilingual', 'either', 'ambos', 'bilingue', 'english spanish', 'spanish english'].map(
    (word) => [word, null] as const,
  ),
]);

/** The language someone reads; null for "both", where the company's own language serves. */
export function parseLanguage(text: string): Parsed<Language | null> {
  const language = LANGUAGE_WORDS.get(fold(text));
  return language === undefined ? refused({ code: 'language' }) : parsed(language);
}

const ZONE_WORDS: ReadonlyMap<string, string> = new Map([
  ...['eastern', 'et', 'est', 'edt'].map((word) => [word, 'America/New_York'] as const),
  ...['central', 'ct', 'cst', 'cdt'].map((word) => [word, 'America/Chicago'] as const),
  ...['mountain', 'mt', 'mst', 'mdt'].map((word) => [word, 'America/Denver'] as const),
  ...['arizona', 'az'].map((word) => [word, 'America/Phoenix'] as const),
  ...['pacific', 'pt', 'pst', 'pdt'].map((word) => [word, 'America/Los_Angeles'] as const),
  ...['alaska', 'akst', 'akdt'].map((word) => [word, 'America/Anchorage'] as const),
  ...['hawaii', 'hst'].map((word) => [word, 'Pacific/Honolulu'] as const),
]);

/**
 * An IANA time zone: its own name, or the usual US words ("Mountain", "MST", "Central time"). Words that fit the
 * company's own zone mean that one (Boise, Phoenix); otherwise they mean the zone's largest part, with a warning.
 */
export function parseZone(text: string, companyZone: string): Parsed<string> {
  const plain = tidy(text).replace(/ /g, '_');
  if (plain.includes('/') && isZone(plain)) return parsed(plain);
  const word = fold(text).replace(/ ?(?:standard|daylight)? ?(?:time)?(?: zone)?$/, '');
  const zone = ZONE_WORDS.get(word);
  if (zone === undefined) return refused({ code: 'time-zone' });
  if (zone === companyZone || wordsOfZone(companyZone).has(word)) return parsed(companyZone);
  return parsed(zone, [{ code: 'read-as', assumed: zone }]);
}

const wordsByZone = new Map<string, ReadonlySet<string>>();

/** What people call the zone in winter and in summer: "mst", "mountain". */
function wordsOfZone(zone: string): ReadonlySet<string> {
  const known = wordsByZone.get(zone);
  if (known) return known;
  const words = new Set<string>();
  for (const style of ['short', 'long'] as const) {
    const format = new Intl.DateTimeFormat('en-US', { timeZone: zone, timeZoneName: style });
    for (const day of ['2026-01-15T12:00:00Z', '2026-07-15T12:00:00Z']) {
      const name =
        format.formatToParts(new Date(day)).find((part) => part.type === 'timeZoneName')?.value ?? '';
      words.add(fold(name).replace(/ (?:standard|daylight) time$/, ''));
    }
  }
  wordsByZone.set(zone, words);
  return words;
}
