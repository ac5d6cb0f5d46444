import { type Language, languages } from '@strikeboard/domain/vocabulary';
import type { AstroCookies } from 'astro';

/** The language that a browser has chosen on this page, else the person's own. */
export function chosenLanguage(cookies: AstroCookies, own: Language): Language {
  const chosen = cookies.get('language')?.value;
  return languages.find((language) => language === chosen) ?? own;
}

/** Keeps a choice for this browser; anything else than a language is left alone. */
export function keepLanguage(cookies: AstroCookies, chosen: string | null): void {
  const language = languages.find((one) => one === chosen);
  if (language)
    cookies.set('language', language, { path: '/', maxAge: 31_536_000, sameSite: 'lax', httpOnly: true });
}
