import type { Language } from '../vocabulary.ts';
import { fieldLabel } from './field-labels.ts';
import type { Reason, ReasonCode } from './reason.ts';
import type { IntakeProblem, SkipReason } from './records.ts';
import { reasonWordsEn } from './words-en.ts';
import { reasonWordsEs } from './words-es.ts';

/** Maker of one sentence from the facts of one reason. */
export type ReasonWords = {
  readonly [C in ReasonCode]: (reason: Extract<Reason, { code: C }>, field: string) => string;
};

const catalogues: Readonly<Record<Language, ReasonWords>> = { en: reasonWordsEn, es: reasonWordsEs };

/** The sentence for a reason: what was expected, or how the cell was read. `field` is the field's name as shown. */
export function reasonSentence(reason: Reason, language: Language, field = ''): string {
  return sentence(catalogues[language], reason, field);
}

/** The sentence for a problem, without its place; the place is `line` and {@link columnLetter} of `column`. */
export function problemSentence(problem: IntakeProblem, language: Language): string {
  return reasonSentence(problem.expected, language, fieldLabel(problem.field ?? '', language));
}

/** Why a row was skipped. */
export function skipSentence(reason: SkipReason, language: Language): string {
  return SKIPS[language][reason];
}

/** Column 0 is A, 25 is Z, 26 is AA, as spreadsheet programs letter them. */
export function columnLetter(column: number): string {
  const letter = String.fromCharCode(65 + (column % 26));
  return column < 26 ? letter : `${columnLetter(Math.floor(column / 26) - 1)}${letter}`;
}

function sentence<C extends ReasonCode>(
  words: ReasonWords,
  reason: Extract<Reason, { code: C }> & { readonly code: C },
  field: string,
): string {
  return words[reason.code](reason, field);
}

const SKIPS: Readonly<Record<Language, Readonly<Record<SkipReason, string>>>> = {
  en: {
    blank: 'Blank row.',
    totals: 'Row of totals.',
    duplicate: 'Same as a row above.',
    'repeated heading': 'The headings again.',
  },
  es: {
    blank: 'Fila vacía.',
    totals: 'Fila de totales.',
    duplicate: 'Igual a una fila anterior.',
    'repeated heading': 'Los encabezados repetidos.',
  },
};
