import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import { type ColumnMapping, readHeadings, suggestMapping } from '@strikeboard/domain/intake/headings';
import { readRows } from '@strikeboard/domain/intake/read';
import type { ReadOptions } from '@strikeboard/domain/intake/reading';
import type { ReadRows } from '@strikeboard/domain/intake/records';
import type { MappedColumn } from '@strikeboard/domain/intake/rows';
import { type ReadSheet, readSheet } from './read-sheet.ts';

export interface ImportRequest<K extends IntakeKind> {
  readonly bytes: Uint8Array;
  readonly fileName: string;
  readonly kind: K;
  readonly options: ReadOptions;
  /** Name of the sheet to read; null: the one whose headings fit the kind best. */
  readonly sheetName?: string | null;
  /** Mapping that a person has chosen; null: as suggested. */
  readonly mapping?: readonly MappedColumn[] | null;
}

export interface ImportPreview<K extends IntakeKind> extends ReadRows<K> {
  readonly sheetNames: readonly string[];
  readonly sheetName: string;
  readonly encoding: ReadSheet['encoding'];
  readonly delimiter: ReadSheet['delimiter'];
  /** Null: no row looked like headings, so nothing is mapped until a person says what the columns are. */
  readonly headerIndex: number | null;
  /** One entry per column, with the chosen mapping's fields where one was given. */
  readonly mapping: readonly ColumnMapping[];
  /** The first rows under the headings as they stand, to choose the mapping by. */
  readonly sample: readonly (readonly string[])[];
}

const SAMPLE_ROWS = 5;

/** File to preview in one step. Throws SheetProblem for the file; problems of cells are in the preview. */
export async function previewImport<K extends IntakeKind>(
  request: ImportRequest<K>,
): Promise<ImportPreview<K>> {
  const { sheets, encoding, delimiter } = await readSheet(request.bytes, request.fileName);
  const headed = sheets.map((sheet) => ({ sheet, headings: readHeadings(request.kind, sheet.table) }));
  const sureness = (one: (typeof headed)[number]): number =>
    (one.headings?.mapping ?? []).reduce((sum, { confidence }) => sum + confidence, 0);
  const named = headed.find((one) => one.sheet.name === request.sheetName);
  const chosen = named ?? headed.reduce((best, one) => (sureness(one) > sureness(best) ? one : best));
  const { table, name } = chosen.sheet;
  const { headerIndex: asked } = request.options;
  const headerIndex = asked === undefined ? (chosen.headings?.headerIndex ?? null) : asked;
  const mapping = withChoice(suggested(request.kind, table, headerIndex), request.mapping ?? null);
  const start = (headerIndex ?? -1) + 1;
  return {
    sheetNames: sheets.map((sheet) => sheet.name),
    sheetName: name,
    encoding,
    delimiter,
    headerIndex,
    mapping,
    sample: table.slice(start, start + SAMPLE_ROWS),
    ...readRows(request.kind, table, mapping, { ...request.options, headerIndex }),
  };
}

function suggested(
  kind: IntakeKind,
  table: readonly (readonly string[])[],
  headerIndex: number | null,
): ColumnMapping[] {
  const width = table.reduce((most, row) => Math.max(most, row.length), 0);
  const headers = headerIndex === null ? [] : (table[headerIndex] ?? []);
  const all = Array.from({ length: width }, (_, column) => headers[column] ?? '');
  return suggestMapping(kind, all);
}

function withChoice(
  mapping: readonly ColumnMapping[],
  choice: readonly MappedColumn[] | null,
): ColumnMapping[] {
  if (choice === null) return [...mapping];
  return mapping.map((one) => {
    const chosen = choice.find(({ column }) => column === one.column);
    return { ...one, field: chosen?.field ?? null, confidence: 1, unit: chosen?.unit ?? one.unit };
  });
}
