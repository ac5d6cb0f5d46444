import Papa from 'papaparse';
import { SHEET_LIMITS } from './limits.ts';
import { SheetProblem } from './sheet-problem.ts';

const DELIMITERS = [',', ';', '\t', '|'] as const;
export type Delimiter = (typeof DELIMITERS)[number];
const ROWS_LOOKED_AT = 200;

/**
 * Rows of a delimited text (RFC 4180, with any of `,` `;` tab `|`). Blank lines are kept, so that row numbers are
 * those a spreadsheet program shows; a first line `sep=;` names the delimiter and stays as a blank row. Throws
 * SheetProblem at unmatched quote marks and at the limits.
 */
export function readCsv(source: string): { readonly table: string[][]; readonly delimiter: Delimiter } {
  const unified = source.replace(/\r\n?/g, '\n');
  const named = /^"?sep=([,;\t|])"?(?=\n|$)/i.exec(unified);
  const text = (named ? unified.slice(named[0].length) : unified).trimEnd();
  const delimiter = DELIMITERS.find((one) => one === named?.[1]) ?? detectDelimiter(text);
  const parsed = Papa.parse<string[]>(text, { delimiter, newline: '\n', preview: SHEET_LIMITS.rows * 2 });
  if (parsed.meta.truncated) throw new SheetProblem({ code: 'too-many-rows', limit: SHEET_LIMITS.rows });
  const fault = parsed.errors.find((error) => error.type === 'Quotes');
  if (fault) throw new SheetProblem({ code: 'broken-quotes', line: (fault.row ?? 0) + 1 });
  return { table: parsed.data, delimiter };
}

/**
 * The delimiter that cuts the most rows into the same number of cells, weighted by how many cells: a comma inside
 * addresses or decimals also cuts some rows, but neither as many nor as evenly.
 */
export function detectDelimiter(text: string): Delimiter {
  let best: { delimiter: Delimiter; score: number } = { delimiter: ',', score: 0 };
  for (const delimiter of DELIMITERS) {
    const { data } = Papa.parse<string[]>(text, {
      delimiter,
      newline: '\n',
      preview: ROWS_LOOKED_AT,
      skipEmptyLines: 'greedy',
    });
    const widths = new Map<number, number>();
    for (const row of data) if (row.length > 1) widths.set(row.length, (widths.get(row.length) ?? 0) + 1);
    const score = Math.max(0, ...[...widths].map(([width, rows]) => (rows / data.length) * (width - 1)));
    if (score > best.score) best = { delimiter, score };
  }
  return best.delimiter;
}
