import type { Language } from '@strikeboard/domain/vocabulary';
import { en, type Words } from './en.ts';
import { es } from './es.ts';

export type { Words } from './en.ts';

const catalogues: Readonly<Record<Language, Words>> = { en, es };

/** The catalogue of a language. */
export function wordsOf(language: Language): Words {
  return catalogues[language];
}
