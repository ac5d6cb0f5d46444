import { readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { readSheet } from '../sheets/read-sheet.ts';
import { csvOf } from './rows-csv.ts';

const demo = path.join(import.meta.dirname, '../../../demo');

/** Blank cells at the end of a row are no cells. */
function withoutBlankEnd(row: readonly string[]): string[] {
  const last = row.findLastIndex((cell) => cell !== '');
  return row.slice(0, last + 1);
}

describe('rows kept as text and read again (RFC 4180)', () => {
  it.each([
    'cedar-flat/people.csv',
    'cedar-flat/pours.csv',
    'cedar-flat/sites.csv',
    'cedar-flat/crews.xlsx',
    'prairie-line/pours.csv',
    'prairie-line/sites.xlsx',
  ])('are the same rows: %s', async (name) => {
    const { sheets } = await readSheet(readFileSync(path.join(demo, name)), name);
    for (const { table } of sheets) {
      const [again] = (await readSheet(csvOf(table), 'stored.csv')).sheets;
      expect(again?.table.map(withoutBlankEnd)).toEqual(table.map(withoutBlankEnd));
    }
  });

  it('keeps quotes, separators, line breaks and blank rows', async () => {
    const rows = [
      ['Size', 'Note'],
      ['4"', 'a;b,c\td'],
      ['', ''],
      ["22' x 40'", 'two\nlines'],
    ];
    const [again] = (await readSheet(csvOf(rows), 'stored.csv')).sheets;
    expect(again?.table.map(withoutBlankEnd)).toEqual(rows.map(withoutBlankEnd));
  });
});
