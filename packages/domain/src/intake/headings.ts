import { fieldsOf, type IntakeField, type IntakeKind, manyColumnFields } from './fields.ts';
import { headingWords } from './heading-words.ts';
import { fold, isBlank } from './text.ts';
import type { QuantityUnit } from './values.ts';

/** Which field a column of the file feeds. Columns count from 0. */
export interface ColumnMapping {
  readonly column: number;
  readonly heading: string;
  /** Null: the column is not imported. */
  readonly field: IntakeField | null;
  /** 0 to 1: how sure the suggestion is; below {@link SURE_CONFIDENCE} a person should look at it. */
  readonly confidence: number;
  /** Unit named in the heading ("Thk (mm)"), in which the column's bare numbers are then read. */
  readonly unit: QuantityUnit | null;
}

/** From this confidence on a suggestion needs no second look. */
export const SURE_CONFIDENCE = 0.9;
const EXACT = 1;
const SAME_WORDS = 0.95;
const LIKELY = 0.7;
const MISSPELT = 0.6;
const CONTESTED = 0.5;
/** A sheet's heading stands under its title and notes, hardly further down. */
const ROWS_SEARCHED = 40;

const UNIT_OF: Readonly<Record<string, QuantityUnit>> = {
  in: 'in',
  inch: 'in',
  inches: 'in',
  '"': 'in',
  pulg: 'in',
  ft: 'ft',
  feet: 'ft',
  "'": 'ft',
  mm: 'mm',
  cm: 'cm',
  m: 'm',
  yd: 'yd3',
  yds: 'yd3',
  yd3: 'yd3',
  'yd³': 'yd3',
  cy: 'yd3',
  m3: 'm3',
  'm³': 'm3',
  'm^3': 'm3',
  sf: 'ft2',
  ft2: 'ft2',
  'ft²': 'ft2',
  'sq ft': 'ft2',
  m2: 'm2',
  'm²': 'm2',
  'sq m': 'm2',
};

/** Words that add nothing to a heading's meaning. What is not here ("customer", "order", "no") changes it. */
const FILLER = new Set([
  'the',
  'of',
  'planned',
  'est',
  'estimated',
  'approx',
  'total',
  'req',
  'reqd',
  'required',
  'de',
  'del',
  'la',
  'el',
  'los',
  'las',
]);

interface Match {
  readonly field: IntakeField;
  readonly confidence: number;
}

/**
 * Suggests a field for each column of a heading row. Every column is answered, those without a match with field
 * null. Two columns that claim one field equally well leave it to the first with low confidence; a heading that
 * two fields claim equally well gets none.
 */
export function suggestMapping(kind: IntakeKind, headers: readonly string[]): ColumnMapping[] {
  const found = headers.map((heading) => bestMatch(kind, heading));
  return headers.map((heading, column) => {
    const match = found[column] ?? null;
    const base = { column, heading, unit: unitOf(heading) };
    if (match === null) return { ...base, field: null, confidence: 0 };
    const rivals = found.flatMap((other, index) =>
      other?.field === match.field && index !== column ? [{ index, confidence: other.confidence }] : [],
    );
    if (manyColumnFields.has(match.field) || rivals.length === 0) return { ...base, ...match };
    const beaten = rivals.some(
      (rival) =>
        rival.confidence > match.confidence ||
        (rival.confidence === match.confidence && rival.index < column),
    );
    if (beaten) return { ...base, field: null, confidence: 0 };
    const tied = rivals.some((rival) => rival.confidence === match.confidence);
    return { ...base, ...match, confidence: tied ? Math.min(match.confidence, CONTESTED) : match.confidence };
  });
}

/**
 * The row with the headings: the first of those near the top that names the most fields, at least two (one where
 * the sheet has one column). Titles, notes and blank rows above it are passed over. Null when there is none.
 */
export function findHeaderRow(kind: IntakeKind, table: readonly (readonly string[])[]): number | null {
  let best: { index: number; score: number } | null = null;
  for (const [index, row] of table.slice(0, ROWS_SEARCHED).entries()) {
    const mapping = suggestMapping(kind, row);
    const named = mapping.filter((one) => one.field !== null && one.confidence >= CONTESTED);
    const cells = row.filter((cell) => !isBlank(cell)).length;
    if (cells === 0 || named.length < Math.min(2, cells) || named.length * 3 < cells) continue;
    if (cells === 1 && table.some((other) => other.filter((cell) => !isBlank(cell)).length > 1)) continue;
    const score = named.reduce((sum, one) => sum + one.confidence, 0);
    if (best === null || score > best.score) best = { index, score };
  }
  return best?.index ?? null;
}

/** Heading row and suggested mapping of a sheet in one step; null when no row looks like headings. */
export function readHeadings(
  kind: IntakeKind,
  table: readonly (readonly string[])[],
): { readonly headerIndex: number; readonly mapping: ColumnMapping[] } | null {
  const headerIndex = findHeaderRow(kind, table);
  return headerIndex === null
    ? null
    : { headerIndex, mapping: suggestMapping(kind, table[headerIndex] ?? []) };
}

/** The unit a heading names in brackets, after a comma or as its last word; null when it names none. */
export function unitOf(heading: string): QuantityUnit | null {
  const plain = heading.toLowerCase().replace(/\s+/g, ' ').trim();
  const bracket = /[([]([^)\]]+)[)\]]$/.exec(plain)?.[1] ?? /[,/] ?([^,/]+)$/.exec(plain)?.[1];
  const word = (bracket ?? plain).trim().replace(/\.$/, '');
  const last = word.split(' ').at(-1) ?? '';
  return UNIT_OF[word] ?? (bracket === undefined && plain.includes(' ') ? (UNIT_OF[last] ?? null) : null);
}

/** A heading in two languages ("Nombre / Name") counts when all its parts mean the same field. */
function bestMatch(kind: IntakeKind, heading: string): Match | null {
  const match = matchOf(kind, heading);
  const parts = heading.split(/[/|()]|\s-\s|\n/).filter((part) => fold(part) !== '');
  if (match !== null || parts.length < 2) return match;
  const [first = null, ...others] = parts.map((part) => matchOf(kind, part));
  if (first === null || others.some((other) => other?.field !== first.field)) return null;
  const confidence = others.reduce(
    (least, other) => Math.min(least, other?.confidence ?? 0),
    first.confidence,
  );
  return { field: first.field, confidence: confidence * SAME_WORDS };
}

function matchOf(kind: IntakeKind, heading: string): Match | null {
  const spellings = spellingsOf(heading);
  let best: Match | null = null;
  let tied = false;
  for (const field of fieldsOf[kind]) {
    const words = headingWords[kind][field];
    if (!words) continue;
    const confidence = Math.max(
      ...spellings.map((spelling) =>
        Math.max(score(spelling, words.sure, EXACT), score(spelling, words.likely ?? [], LIKELY)),
      ),
    );
    if (confidence === 0 || (best && confidence < best.confidence)) continue;
    tied = best !== null && confidence === best.confidence;
    best = { field, confidence };
  }
  return tied ? null : best;
}

/** The heading as folded text, with and without a unit at its end; "Phone #" reads "phone no". */
function spellingsOf(heading: string): string[] {
  const signs = heading.replace(/#/g, ' no ').replace(/³/g, '3').replace(/²/g, '2');
  const full = fold(signs);
  const bare = fold(signs.replace(/[([][^)\]]*[)\]]\s*$/, '').replace(/,[^,]*$/, ''));
  const lastWord = full.split(' ').at(-1) ?? '';
  const withoutUnit = UNIT_OF[lastWord] === undefined ? bare : full.slice(0, -lastWord.length).trim();
  return [...new Set([full, bare, withoutUnit])].filter((spelling) => spelling !== '');
}

function score(heading: string, words: readonly string[], weight: number): number {
  if (words.includes(heading)) return weight;
  const core = withoutFiller(heading);
  if (core !== '' && words.some((word) => withoutFiller(word) === core)) return weight * SAME_WORDS;
  const misspelt = words.some((word) => word.length >= 5 && isOneSlip(word, heading));
  return misspelt ? Math.min(weight, MISSPELT) : 0;
}

function withoutFiller(text: string): string {
  return text
    .split(' ')
    .filter((word) => !FILLER.has(word) && !/^\d{1,2}$/.test(word))
    .sort()
    .join(' ');
}

/** Whether two words differ by one letter added, left out, changed or swapped with its neighbour. */
function isOneSlip(a: string, b: string): boolean {
  if (Math.abs(a.length - b.length) > 1 || a[0] !== b[0]) return false;
  let start = 0;
  while (start < a.length && a[start] === b[start]) start++;
  const [restA, restB] = [a.slice(start), b.slice(start)];
  if (restA.slice(1) === restB.slice(1) || restA === restB.slice(1) || restA.slice(1) === restB) return true;
  return restA[0] === restB[1] && restA[1] === restB[0] && restA.slice(2) === restB.slice(2);
}
