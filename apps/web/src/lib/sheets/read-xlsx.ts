import ExcelJS from 'exceljs';
import { cellText } from './cell-text.ts';
import { SHEET_LIMITS } from './limits.ts';
import { SheetProblem } from './sheet-problem.ts';
import { inspectWorkbook } from './unpack-workbook.ts';

export interface NamedTable {
  readonly name: string;
  readonly table: string[][];
}

/**
 * Visible sheets of an .xlsx as text, row and column numbers kept. Of merged cells each row has the text once, in
 * the leftmost one: a crew's name merged down its rows stands in each of them, a title merged across in one cell.
 * Throws SheetProblem for damaged files and at the limits.
 */
export async function readXlsx(bytes: Uint8Array): Promise<NamedTable[]> {
  inspectWorkbook(bytes);
  const workbook = new ExcelJS.Workbook();
  try {
    const copy = new ArrayBuffer(bytes.byteLength);
    new Uint8Array(copy).set(bytes);
    await workbook.xlsx.load(copy, {
      ignoreNodes: ['dataValidations', 'conditionalFormatting', 'drawing', 'picture', 'extLst'],
    });
  } catch {
    throw new SheetProblem({ code: 'broken' });
  }
  return workbook.worksheets
    .filter((sheet) => sheet.state === 'visible')
    .map((sheet) => ({ name: sheet.name, table: tableOf(sheet) }));
}

function tableOf(sheet: ExcelJS.Worksheet): string[][] {
  const table: string[][] = [];
  sheet.eachRow((row, rowNumber) => {
    const cells: string[] = [];
    row.eachCell((cell, column) => {
      const value = textAt(cell);
      if (value === '') return;
      if (column > SHEET_LIMITS.columns)
        throw new SheetProblem({ code: 'too-many-columns', limit: SHEET_LIMITS.columns });
      while (cells.length < column - 1) cells.push('');
      cells.push(value);
    });
    if (cells.length === 0) return;
    if (rowNumber > SHEET_LIMITS.rows)
      throw new SheetProblem({ code: 'too-many-rows', limit: SHEET_LIMITS.rows });
    while (table.length < rowNumber - 1) table.push([]);
    table.push(cells);
  });
  return table;
}

function textAt(cell: ExcelJS.Cell): string {
  const isLeftmost = Number(cell.master.col) === Number(cell.col);
  return cell.isMerged && !isLeftmost ? '' : cellText(cell.master.value, cell.master.numFmt ?? '');
}
