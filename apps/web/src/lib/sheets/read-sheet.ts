import { decodeText, type TextEncoding } from './decode-text.ts';
import { SHEET_LIMITS } from './limits.ts';
import { type Delimiter, readCsv } from './read-csv.ts';
import type { NamedTable } from './read-xlsx.ts';
import { SheetProblem } from './sheet-problem.ts';
import { refuseMarkup, sniff } from './sniff.ts';

export interface ReadSheet {
  /** Sheets with at least one filled cell. Row 0 of a table is row 1 of the file. */
  readonly sheets: readonly NamedTable[];
  readonly encoding: TextEncoding;
  /** Null for a workbook. */
  readonly delimiter: Delimiter | null;
}

/**
 * Bytes of a CSV or XLSX file as tables of text. What the file is, is told by its content; the name only names the
 * one sheet of a CSV. Throws SheetProblem, whose sentence says what is wrong and the way out. Takes seconds of CPU
 * for large files: on the server use `readSheetInWorker`.
 */
export async function readSheet(bytes: Uint8Array, fileName: string): Promise<ReadSheet> {
  if (bytes.byteLength > SHEET_LIMITS.bytes) {
    throw new SheetProblem({ code: 'too-big', limitMb: SHEET_LIMITS.bytes / 1024 / 1024 });
  }
  if (sniff(bytes) === 'zip') {
    // The workbook library takes a good part of a second to load, which a CSV need not wait for.
    const { readXlsx } = await import('./read-xlsx.ts');
    return { sheets: filled(await readXlsx(bytes)), encoding: 'utf-8', delimiter: null };
  }
  const { text, encoding } = decodeText(bytes);
  refuseMarkup(text);
  const { table, delimiter } = readCsv(text);
  const name = fileName.replace(/^.*[/\\]/, '').replace(/\.[A-Za-z0-9]{1,5}$/, '');
  return { sheets: filled([{ name, table }]), encoding, delimiter };
}

function filled(sheets: readonly NamedTable[]): NamedTable[] {
  const kept = sheets.map((sheet) => ({ name: sheet.name, table: trimmed(sheet.table) }));
  const withCells = kept.filter((sheet) => sheet.table.length > 0);
  if (withCells.length === 0) throw new SheetProblem({ code: 'empty' });
  return withCells;
}

/** Without blank cells at the end of rows and blank rows at the end; what is left must keep the limits. */
function trimmed(table: readonly (readonly string[])[]): string[][] {
  const rows = table.map((row) => row.slice(0, row.findLastIndex((cell) => cell.trim() !== '') + 1));
  const length = rows.findLastIndex((row) => row.length > 0) + 1;
  if (length > SHEET_LIMITS.rows) throw new SheetProblem({ code: 'too-many-rows', limit: SHEET_LIMITS.rows });
  const wide = rows.some((row) => row.length > SHEET_LIMITS.columns);
  if (wide) throw new SheetProblem({ code: 'too-many-columns', limit: SHEET_LIMITS.columns });
  return rows.slice(0, length);
}
