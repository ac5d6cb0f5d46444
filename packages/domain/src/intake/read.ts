import { InputProblem } from '../problem.ts';
import { isSiteDay } from '../zone.ts';
import { isZone } from '../zone-offset.ts';
import { type IntakeKind, neededFields } from './fields.ts';
import { findHeaderRow } from './headings.ts';
import { readCrews } from './read-crews.ts';
import { readPeople } from './read-people.ts';
import { readPours } from './read-pours.ts';
import { readSites } from './read-sites.ts';
import { openReading, type Reading, type ReadOptions } from './reading.ts';
import type { IntakeProblem, ReadRows, RecordOf } from './records.ts';
import { dataRows, type Findings, type MappedColumn, readFileStyle } from './rows.ts';

const readers: { readonly [K in IntakeKind]: (reading: Reading) => RecordOf[K][] } = {
  people: readPeople,
  crews: readCrews,
  sites: readSites,
  pours: readPours,
};

/**
 * Reads the rows under the headings into records. Lines are the rows of the sheet, counted from 1 and with blank
 * ones, as spreadsheet programs number them. Rows with an error are not among the records; problems come in the
 * order of the file. Without a column that every record needs there is one error and no record. Never throws at a cell. Throws InputProblem for a bad reference day, zone or column.
 */
export function readRows<K extends IntakeKind>(
  kind: K,
  table: readonly (readonly string[])[],
  mapping: readonly MappedColumn[],
  options: ReadOptions,
): ReadRows<K> {
  requireOptions(mapping, options);
  const headerIndex = options.headerIndex === undefined ? findHeaderRow(kind, table) : options.headerIndex;
  const findings: Findings = { problems: [], skipped: [] };
  const style = readFileStyle(table, headerIndex, mapping, findings.problems);
  const rows = dataRows(table, headerIndex, mapping, style, findings);
  const headerLine = (headerIndex ?? 0) + 1;
  const needed = neededFields[kind];
  const isReadable = mapping.some(({ field }) => field !== null && needed.includes(field));
  if (!isReadable) {
    const expected = { code: 'column-required', field: needed[0] } as const;
    findings.problems.push({
      line: headerLine,
      column: null,
      field: needed[0],
      value: '',
      expected,
      severity: 'error',
    });
  }
  const records = isReadable
    ? readers[kind](openReading({ rows, style, options, findings, headerLine }))
    : [];
  return {
    records: records.toSorted((a, b) => a.line - b.line),
    problems: findings.problems.toSorted(inFileOrder),
    skipped: findings.skipped.toSorted((a, b) => a.line - b.line),
  };
}

function inFileOrder(a: IntakeProblem, b: IntakeProblem): number {
  return a.line - b.line || (a.column ?? -1) - (b.column ?? -1);
}

function requireOptions(mapping: readonly MappedColumn[], options: ReadOptions): void {
  if (!isSiteDay(options.referenceDay)) {
    throw new InputProblem('referenceDay', options.referenceDay, 'a calendar day as YYYY-MM-DD');
  }
  if (!isZone(options.zone)) throw new InputProblem('zone', options.zone, 'an IANA time zone');
  for (const { column } of mapping) {
    if (!Number.isInteger(column) || column < 0)
      throw new InputProblem('column', column, 'a column from 0 on');
  }
}
