import type { CountryCode } from 'libphonenumber-js/min';
import type { SiteDay } from '../zone.ts';
import type { IntakeField } from './fields.ts';
import type { IntakeProblem } from './records.ts';
import type { FileStyle, Findings, Row } from './rows.ts';

/** What a file's cells are read against. Nothing is read from a clock. */
export interface ReadOptions {
  /** The day that year-less dates are near to, usually today at the company, 'YYYY-MM-DD'. */
  readonly referenceDay: SiteDay;
  /** The company's IANA zone. */
  readonly zone: string;
  /** Country of phone numbers and coordinates that do not name their own. */
  readonly country: CountryCode;
  /** Row with the headings, from 0; null: the sheet has none; left out: found by itself. */
  readonly headerIndex?: number | null;
}

/** One file being read: its rows, how it is written, and where findings go. */
export interface Reading {
  readonly rows: readonly Row[];
  readonly style: FileStyle;
  readonly options: ReadOptions;
  readonly findings: Findings;
  /**
   * `value` where the field is blank: a warning on the row, or, where the file has no such column, one for
   * the whole file.
   */
  assume<T extends string>(row: Row, field: IntakeField, value: T): T;
}

export function openReading(parts: Omit<Reading, 'assume'> & { readonly headerLine: number }): Reading {
  const said = new Set<IntakeField>();
  const { headerLine, ...reading } = parts;
  return {
    ...reading,
    assume(row, field, value) {
      if (row.columnCount(field) > 0) {
        if (!row.has(field)) row.warn({ code: 'assumed', assumed: value }, field);
      } else if (!said.has(field)) {
        said.add(field);
        const expected = { code: 'column-missing', assumed: value } as const;
        reading.findings.problems.push({
          line: headerLine,
          column: null,
          field,
          value: '',
          expected,
          severity: 'warning',
        });
      }
      return value;
    },
  };
}

interface Keyed {
  readonly naturalKey: string;
  readonly line: number;
}

/**
 * Keeps the first record of each natural key and records the others as duplicates; one that says something else
 * than the first also gets a warning that names the fields.
 */
export function withoutDuplicates<T extends Keyed>(records: readonly T[], findings: Findings): T[] {
  const firsts = new Map<string, T>();
  for (const record of records) {
    const first = firsts.get(record.naturalKey);
    if (first === undefined) {
      firsts.set(record.naturalKey, record);
      continue;
    }
    findings.skipped.push({ line: record.line, reason: 'duplicate' });
    const fields = differingFields(first, record);
    if (fields.length > 0) {
      findings.problems.push(
        rowProblem(record.line, { code: 'duplicate-differs', line: first.line, fields }, 'warning'),
      );
    }
  }
  return [...firsts.values()];
}

/** Names of the fields, other than key and line, in which two records differ. */
export function differingFields(a: object, b: object): string[] {
  const [one, other] = [new Map(Object.entries(a)), new Map(Object.entries(b))];
  return [...one.keys()].filter(
    (field) =>
      field !== 'line' &&
      field !== 'naturalKey' &&
      JSON.stringify(one.get(field)) !== JSON.stringify(other.get(field)),
  );
}

/** A problem of a row as a whole. */
export function rowProblem(
  line: number,
  expected: IntakeProblem['expected'],
  severity: IntakeProblem['severity'],
): IntakeProblem {
  return { line, column: null, field: null, value: '', expected, severity };
}
