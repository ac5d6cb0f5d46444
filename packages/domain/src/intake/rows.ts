import { type DateOrder, detectDateOrder } from './dates.ts';
import { type IntakeField, quantityFields } from './fields.ts';
import { type DecimalStyle, detectDecimalStyle } from './numbers.ts';
import { type Parsed, type Reason, refused } from './reason.ts';
import type { IntakeProblem, SkippedRow } from './records.ts';
import { fold, isBlank, tidy } from './text.ts';
import { skipReasonOf, type TotalsWatch, totalsWatch } from './totals.ts';
import type { QuantityOptions, QuantityUnit } from './values.ts';

/** A column to read: its position from 0, the field it feeds (null: none), the unit its heading names. */
export interface MappedColumn {
  readonly column: number;
  readonly field: IntakeField | null;
  readonly unit?: QuantityUnit | null;
}

/** Problems and skipped rows as they come up. */
export interface Findings {
  readonly problems: IntakeProblem[];
  readonly skipped: SkippedRow[];
}

/** How the cells of one file are written. */
export interface FileStyle {
  readonly decimals: DecimalStyle;
  readonly dates: DateOrder;
}

const SPREADSHEET_ERROR = /^#(?:REF!|N\/A|VALUE!|DIV\/0!|NAME\?|NUM!|NULL!|SPILL!|CALC!|####*)$/i;
const DITTO = /^(?:"|''|〃|″|ditto|same|idem|ídem|igual)$/i;

/** One row under the headings, read field by field. Problems go to the findings; `failed` tells of errors. */
export interface Row {
  readonly line: number;
  /** Whether any cell of the row was refused so far. */
  failed(): boolean;
  has(field: IntakeField): boolean;
  /** How many fields of the row are filled. */
  filledCount(): number;
  /** How many columns of the file feed the field. */
  columnCount(field: IntakeField): number;
  /** The parsed cell; null when it is blank or was refused. */
  read<T>(field: IntakeField, parse: (text: string) => Parsed<T>): T | null;
  /** The text on one line, null when blank. */
  text(field: IntakeField): string | null;
  /** Raw texts of all columns of the field that are not blank. */
  texts(field: IntakeField): string[];
  quantity(field: IntakeField): QuantityOptions;
  error(expected: Reason, field?: IntakeField): void;
  warn(expected: Reason, field?: IntakeField): void;
}

interface Cell {
  readonly column: number;
  readonly unit: QuantityUnit | null;
  text: string;
}

/** Rows that hold data, in order, with blank rows, totals and repeated headings recorded as skipped. */
export function dataRows(
  table: readonly (readonly string[])[],
  headerIndex: number | null,
  mapping: readonly MappedColumn[],
  style: FileStyle,
  findings: Findings,
): Row[] {
  const headers = headerIndex === null ? null : (table[headerIndex] ?? []);
  const columns = mapping.flatMap((one) =>
    one.field === null ? [] : [{ column: one.column, field: one.field, unit: one.unit ?? null }],
  );
  const watch: TotalsWatch = totalsWatch(columns, style.decimals);
  const rows: Row[] = [];
  const above = new Map<number, string>();
  for (let index = (headerIndex ?? -1) + 1; index < table.length; index++) {
    const cells = table[index] ?? [];
    const reason = skipReasonOf(cells, headers, watch);
    if (reason !== null) {
      findings.skipped.push({ line: index + 1, reason });
      continue;
    }
    const row = openRow(index + 1, cells, columns, style, findings, above);
    const surplus =
      headers === null ? 0 : lastFilled(cells) - Math.max(lastFilled(headers), lastMapped(columns));
    if (headers !== null && surplus > 0) {
      row.error({ code: 'too-many-cells', count: lastFilled(cells) + 1, headings: lastFilled(headers) + 1 });
    }
    rows.push(row);
  }
  return rows;
}

/** Reads how numbers and dates are written from the mapped cells and records what is unusual about it. */
export function readFileStyle(
  table: readonly (readonly string[])[],
  headerIndex: number | null,
  mapping: readonly MappedColumn[],
  problems: IntakeProblem[],
): FileStyle {
  const body = table.slice((headerIndex ?? -1) + 1);
  const numeric = mapping.filter((one) => one.field !== null && quantityFields.has(one.field));
  const dated = mapping.filter((one) => one.field === 'wantedOn');
  const cellsOf = (columns: readonly MappedColumn[]): string[] =>
    columns.flatMap(({ column }) => body.flatMap((row) => row[column] ?? []));
  const decimals = detectDecimalStyle(cellsOf(numeric));
  const dates = detectDateOrder(cellsOf(dated));
  const at = (columns: readonly MappedColumn[], expected: Reason): void => {
    for (const [index, row] of body.entries()) {
      const one = columns.find(({ column }) => !isBlank(row[column] ?? ''));
      if (!one) continue;
      const line = (headerIndex ?? -1) + 2 + index;
      const value = row[one.column] ?? '';
      problems.push({ line, column: one.column, field: one.field, value, expected, severity: 'warning' });
      return;
    }
  };
  if (decimals === 'comma') at(numeric, { code: 'read-comma-decimals' });
  if (dates.order === 'day-first') at(dated, { code: 'read-day-first' });
  return { decimals, dates: dates.order };
}

/** `above`: the cells of the row before, for ditto marks; this row's take their place. */
function openRow(
  line: number,
  source: readonly string[],
  columns: readonly { column: number; field: IntakeField; unit: QuantityUnit | null }[],
  style: FileStyle,
  findings: Findings,
  above: Map<number, string>,
): Row {
  let failed = false;
  const report = (
    severity: 'error' | 'warning',
    expected: Reason,
    field: IntakeField | null,
    cell?: Cell,
  ): void => {
    failed ||= severity === 'error';
    const value = cell === undefined ? '' : (source[cell.column] ?? '');
    findings.problems.push({ line, column: cell?.column ?? null, field, value, expected, severity });
  };
  const cellsByField = new Map<IntakeField, Cell[]>();
  const filledByField = new Map<IntakeField, Cell[]>();
  for (const { column, field, unit } of columns) {
    const cell: Cell = { column, unit, text: source[column] ?? '' };
    append(cellsByField, field, cell);
    const plain = cell.text === '' ? '' : tidy(cell.text);
    if (DITTO.test(plain)) {
      cell.text = above.get(column) ?? '';
      if (isBlank(cell.text)) report('error', { code: 'nothing-above' }, field, cell);
      else report('warning', { code: 'copied-from-above', assumed: tidy(cell.text) }, field, cell);
    } else if (SPREADSHEET_ERROR.test(plain)) {
      report('error', { code: 'spreadsheet-error' }, field, cell);
      cell.text = '';
    } else if (/^=[A-Za-z(+-]/.test(plain)) {
      report('error', { code: 'formula-without-result' }, field, cell);
      cell.text = '';
    }
    above.set(column, cell.text);
    if (!isBlankFor(field, cell.text)) append(filledByField, field, cell);
  }
  const filled = (field: IntakeField): readonly Cell[] => filledByField.get(field) ?? [];
  const first = (field: IntakeField | undefined): Cell | undefined =>
    field === undefined ? undefined : (filled(field)[0] ?? cellsByField.get(field)?.[0]);
  return {
    line,
    failed: () => failed,
    has: (field) => filled(field).length > 0,
    filledCount: () => filledByField.size,
    columnCount: (field) => cellsByField.get(field)?.length ?? 0,
    read(field, parse) {
      const cell = filled(field)[0];
      if (cell === undefined) return null;
      // A cell of many thousand letters is no quantity; parsers need not look at it.
      const result =
        cell.text.length > 2000
          ? refused({ code: 'out-of-range', min: 0, max: 2000, unit: 'letters' })
          : parse(cell.text);
      if (!result.ok) {
        report('error', result.expected, field, cell);
        return null;
      }
      for (const warning of result.warnings ?? []) report('warning', warning, field, cell);
      return result.value;
    },
    text(field) {
      const cell = filled(field)[0];
      if (cell === undefined) return null;
      if (cell.text.length <= 2000) return tidy(cell.text);
      report('error', { code: 'out-of-range', min: 0, max: 2000, unit: 'letters' }, field, cell);
      return null;
    },
    texts: (field) => filled(field).map((cell) => cell.text),
    quantity: (field) => ({ style: style.decimals, unit: first(field)?.unit ?? null }),
    error: (expected, field) => report('error', expected, field ?? null, first(field)),
    warn: (expected, field) => report('warning', expected, field ?? null, first(field)),
  };
}

function append(cells: Map<IntakeField, Cell[]>, field: IntakeField, cell: Cell): void {
  const before = cells.get(field);
  if (before === undefined) cells.set(field, [cell]);
  else before.push(cell);
}

/** Someone may be called "Na", so only dashes and emptiness are blank in a name. */
function isBlankFor(field: IntakeField, text: string): boolean {
  return /name/i.test(field) ? fold(text) === '' : isBlank(text);
}

function lastFilled(cells: readonly string[]): number {
  return cells.findLastIndex((cell) => cell.trim() !== '');
}

function lastMapped(columns: readonly { column: number }[]): number {
  return columns.reduce((last, { column }) => Math.max(last, column), -1);
}
