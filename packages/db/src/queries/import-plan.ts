import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import type { RecordOf } from '@strikeboard/domain/intake/records';

/** Records of one kind, as read from a file. */
export type ImportBatch = { [K in IntakeKind]: { kind: K; records: readonly RecordOf[K][] } }[IntakeKind];

/**
 * What a record refers to. `…-unknown`, `…-ambiguous`: no row, or more than one, of the company fits the value.
 * `…-created`: a row will be made for it. `…-reckoned`: worked out from the yards ordered. `person-left`,
 * `crew-ended`: there, but no more; left as it is. `person-elsewhere`: on another crew, and stays there.
 */
export type ReferenceCode =
  | 'site-unknown'
  | 'site-ambiguous'
  | 'site-created'
  | 'mix-unknown'
  | 'mix-ambiguous'
  | 'quantity-missing'
  | 'area-reckoned'
  | 'thickness-reckoned'
  | 'crew-created'
  | 'crew-ended'
  | 'person-unknown'
  | 'person-ambiguous'
  | 'person-left'
  | 'person-elsewhere';

/** A thing to look at before accepting. An error keeps its record from being imported, a warning does not. */
export interface ReferenceProblem {
  /** Row of the sheet, counted from 1. */
  line: number;
  /** The record's field. */
  field: string;
  value: string;
  code: ReferenceCode;
  severity: 'error' | 'warning';
}

/** How many records made a row, filled blanks of one, or found everything there already. */
export interface ImportCounts {
  created: number;
  updated: number;
  unchanged: number;
}

/** What accepting would do now; `problems` in the order of the file. */
export interface ImportForecast extends ImportCounts {
  problems: ReferenceProblem[];
}

/** What acceptance needs to know beside the records. */
export interface ImportContext {
  nowMs: number;
  /** IANA zone of the office. */
  zone: string;
  wastePercent: number;
  orderStepYd3: number;
}

/** Few enough rows that their columns stay under the 65,535 parameters of one statement. */
const ROWS_PER_STATEMENT = 1000;

/** Writes rows in as few statements as the protocol allows. */
export async function inChunks<T>(
  rows: readonly T[],
  write: (chunk: T[]) => Promise<unknown>,
): Promise<void> {
  for (let start = 0; start < rows.length; start += ROWS_PER_STATEMENT) {
    await write(rows.slice(start, start + ROWS_PER_STATEMENT));
  }
}

/** The only one of a list; null when there is none or more than one. */
export function onlyOne<T>(list: readonly T[]): T | null {
  return list.length === 1 ? (list[0] ?? null) : null;
}

/** Rows by a key that several may share. */
export function grouped<T>(rows: readonly T[], keyOf: (row: T) => string | null): Map<string, T[]> {
  const groups = new Map<string, T[]>();
  for (const row of rows) {
    const key = keyOf(row);
    if (key === null) continue;
    const group = groups.get(key);
    if (group) group.push(row);
    else groups.set(key, [row]);
  }
  return groups;
}
