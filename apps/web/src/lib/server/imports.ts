import type { Tx } from '@strikeboard/db/client';
import type { ImportBatch, ReferenceCode, ReferenceProblem } from '@strikeboard/db/queries/import-plan';
import { resolveReferences, type StoredImport } from '@strikeboard/db/queries/imports';
import { fieldLabel } from '@strikeboard/domain/intake/field-labels';
import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import type { IntakeProblem } from '@strikeboard/domain/intake/records';
import { columnLetter, problemSentence, skipSentence } from '@strikeboard/domain/intake/words';
import { siteDayOf } from '@strikeboard/domain/zone';
import { type Import, type ImportProblem, LISTED_PROBLEMS } from '../api/schemas/imports.ts';
import type { Company } from '../locals.ts';
import { previewImportInWorker } from '../sheets/in-worker.ts';
import type { ImportPreview } from '../sheets/preview-import.ts';
import { en } from '../words/en.ts';
import { csvOf } from './rows-csv.ts';

const SHOWN_RECORDS = 20;

/** What a stored import's rows say under its mapping. Reads in a thread of its own. */
export function readStored(stored: StoredImport, company: Company): Promise<ImportPreview<IntakeKind>> {
  return previewImportInWorker({
    bytes: csvOf(stored.rows),
    fileName: 'stored.csv',
    kind: stored.kind,
    options: readOptions(company, stored.createdMs),
    mapping: stored.mapping,
  });
}

/** What a company's files are read against; dates without a year lie near the day of the import. */
export function readOptions(company: { zone: string }, atMs: number) {
  return { referenceDay: siteDayOf(atMs, company.zone), zone: company.zone, country: 'US' } as const;
}

/** The records of a preview with their kind, as the database takes them. */
export function batchOf(kind: IntakeKind, preview: ImportPreview<IntakeKind>): ImportBatch {
  // The preview's records are of the kind that was asked for; the type of a union cannot say so.
  return { kind, records: preview.records } as ImportBatch;
}

/** An import with everything there is to look at, for the page. */
export async function describeImport(
  tx: Tx,
  of: { stored: StoredImport; preview: ImportPreview<IntakeKind>; nowMs: number },
): Promise<Import> {
  const { stored, preview, nowMs } = of;
  const forecast = await resolveReferences(tx, batchOf(stored.kind, preview), { nowMs });
  const columnOf = new Map(preview.mapping.map(({ field, column }) => [field, column]));
  const problems = [
    ...preview.problems.map(cellProblem),
    ...forecast.problems.map((problem) => referenceProblem(problem, columnOf)),
  ].toSorted((a, b) => rank(a) - rank(b) || a.line - b.line);
  const errorCount = problems.filter(({ severity }) => severity === 'error').length;
  return {
    id: stored.id,
    version: stored.version,
    kind: stored.kind,
    fileName: stored.fileName,
    sheetName: stored.sheetName,
    encoding: stored.encoding,
    state: stored.state,
    result: stored.result,
    headerLine: preview.headerIndex === null ? null : preview.headerIndex + 1,
    rowCount: stored.rows.length,
    mapping: [...preview.mapping],
    sample: preview.sample.map((row) => [...row]),
    forecast: { created: forecast.created, updated: forecast.updated, unchanged: forecast.unchanged },
    errorCount,
    warningCount: problems.length - errorCount,
    problems: problems.slice(0, LISTED_PROBLEMS),
    skipped: preview.skipped.map(({ line, reason }) => ({ line, reason: skipSentence(reason, 'en') })),
    records: preview.records.slice(0, SHOWN_RECORDS).map((record) => ({
      line: record.line,
      cells: Object.fromEntries(Object.entries(record).flatMap(([name, value]) => shownField(name, value))),
    })),
    recordCount: preview.records.length,
  };
}

function rank(problem: ImportProblem): number {
  return problem.severity === 'error' ? 0 : 1;
}

function cellProblem(problem: IntakeProblem): ImportProblem {
  return {
    line: problem.line,
    column: problem.column === null ? null : columnLetter(problem.column),
    field: problem.field === null ? null : fieldLabel(problem.field, 'en'),
    value: problem.value.slice(0, 200),
    expected: problemSentence(problem, 'en'),
    severity: problem.severity,
  };
}

const referenceSentences: Readonly<Record<ReferenceCode, string>> = {
  'site-unknown': 'The name of a site that is here. Import the sites first, or add this one in Set-up.',
  'site-ambiguous': 'A name that fits one site only. Add the address to tell them apart.',
  'site-created': 'No site is called so yet; one is made from this row.',
  'mix-unknown': 'A mix that a plant carries; this pour comes in without a mix.',
  'mix-ambiguous': 'A mix that only one plant carries; this pour comes in without a mix.',
  'quantity-missing': 'Yards ordered, or thickness and size to reckon them from.',
  'area-reckoned': 'No size was given; the area is reckoned from yards and thickness.',
  'thickness-reckoned': 'No thickness was given; it is reckoned from yards and size.',
  'crew-created': 'No crew is called so yet; one is made from this row.',
  'crew-ended': 'This crew is no more; it is left as it is.',
  'person-unknown': 'The name of someone who is here. Import the people first, or add them in Set-up.',
  'person-ambiguous': 'A name that fits one person only.',
  'person-left': 'This person has left; they stay away.',
  'person-elsewhere': 'This person is on another crew, and stays there.',
};

function referenceProblem(
  problem: ReferenceProblem,
  columnOf: ReadonlyMap<string | null, number>,
): ImportProblem {
  const column = columnOf.get(problem.field);
  return {
    line: problem.line,
    column: column === undefined ? null : columnLetter(column),
    field: fieldLabel(problem.field, 'en'),
    value: problem.value.slice(0, 200),
    expected: referenceSentences[problem.code],
    severity: problem.severity,
  };
}

/** A record's field as text under its label; what is not there is left out. */
function shownField(name: string, value: unknown): [string, string][] {
  if (name === 'naturalKey' || name === 'line' || value === null || value === undefined) return [];
  const label = fieldLabel(columnNames.get(name) ?? name, 'en');
  if (!Array.isArray(value)) return [[label, shownValue(name, value)]];
  return value.length === 0 ? [] : [[label, value.map((one) => shownValue(name, one)).join(', ')]];
}

/** Fields of records that are called otherwise than the columns they come from. */
const columnNames: ReadonlyMap<string, string> = new Map([
  ['phoneE164', 'phone'],
  ['latDeg', 'latitude'],
  ['lonDeg', 'longitude'],
  ['permittedFromMin', 'permittedFrom'],
  ['permittedUntilMin', 'permittedUntil'],
  ['firstLoadMin', 'firstLoad'],
]);

/** The trade's words for a field's values. */
const valueWords: ReadonlyMap<string, Readonly<Record<string, string>>> = new Map<
  string,
  Readonly<Record<string, string>>
>([
  ['finish', en.finishes],
  ['skills', en.finishes],
  ['placingMethod', en.placingMethods],
  ['role', en.roles],
  ['language', { en: 'English', es: 'Spanish' }],
]);

function shownValue(name: string, value: unknown): string {
  if (typeof value === 'number' && name.endsWith('Min')) {
    const minute = value % 1440;
    return `${Math.floor(minute / 60)}:${String(minute % 60).padStart(2, '0')}`;
  }
  if (typeof value === 'object' && value !== null) return Object.values(value).join(' × ');
  return valueWords.get(name)?.[String(value)] ?? String(value);
}
