import { readFileSync } from 'node:fs';
import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import type { ReadOptions } from '@strikeboard/domain/intake/reading';
import { describe, expect, it } from 'vitest';
import { type ImportPreview, previewImport } from './preview-import.ts';

// Company in Denver, read on a Tuesday; the sheets hold wall-clock days and times, whatever zone this machine is in.
const options: ReadOptions = { referenceDay: '2026-12-01', zone: 'America/Denver', country: 'US' };

function preview<K extends IntakeKind>(kind: K, fileName: string): Promise<ImportPreview<K>> {
  const bytes = readFileSync(new URL(`../../../../../tests/fixtures/import/${fileName}`, import.meta.url));
  return previewImport({ bytes, fileName, kind, options });
}
const brief = (result: ImportPreview<IntakeKind>): string[] =>
  result.problems.map((one) => `${one.severity} ${one.line}:${one.column ?? '-'} ${one.expected.code}`);
const skips = (result: ImportPreview<IntakeKind>): string[] =>
  result.skipped.map((one) => `${one.line} ${one.reason}`);

// Conversions: NIST SP 811. File marks and encodings: Unicode 15 section 23.8, WHATWG Encoding Standard.
describe('sheets as contractors have them', () => {
  it('with a byte-order mark, CRLF, a title and blank lines', async () => {
    const result = await preview('people', 'people-bom-crlf.csv');
    expect(result).toMatchObject({
      encoding: 'utf-8',
      delimiter: ',',
      headerIndex: 2,
      sheetName: 'people-bom-crlf',
    });
    expect(result.records).toMatchObject([
      {
        line: 4,
        name: 'José Castañeda',
        email: 'jose.castaneda@example.com',
        role: 'foreman',
        language: 'es',
      },
      { line: 6, name: 'Mara Lind', phoneE164: '+19705550152', role: 'finisher', language: 'en' },
      { line: 8, name: 'Íñigo Peña', naturalKey: 'phone:+19705550153', role: 'sub', crewName: null },
    ]);
    expect(skips(result)).toEqual(['5 blank', '7 blank']);
    expect(brief(result)).toEqual([]);
  });

  it('in Windows-1252 with curly inch marks', async () => {
    const result = await preview('pours', 'pours-windows-1252.csv');
    expect(result.encoding).toBe('windows-1252');
    expect(result.records).toMatchObject([
      {
        siteName: 'Peña residence',
        orderedYd3: '6.5',
        thicknessIn: '4',
        dimensions: [{ lengthFt: '18', widthFt: '24' }],
      },
      { siteName: 'O’Dell shop', orderedYd3: '32', thicknessIn: '6', finish: 'hard-trowel' },
    ]);
    expect(brief(result)).toEqual([]);
  });

  it('with semicolons, decimal commas and the day first', async () => {
    const result = await preview('pours', 'pours-semicolons.csv');
    expect(result.delimiter).toBe(';');
    expect(result.records).toMatchObject([
      { wantedOn: '2026-12-28', orderedYd3: '24.5', thicknessIn: '4', notes: 'portón; llave con el vecino' },
      { wantedOn: '2026-12-04', orderedYd3: '1250.5', thicknessIn: '5.5', placingMethod: 'boom-pump' },
    ]);
    expect(brief(result)).toEqual(['warning 2:2 read-day-first', 'warning 2:3 read-comma-decimals']);
  });

  it('with totals and the headings again', async () => {
    const result = await preview('pours', 'pours-totals.csv');
    expect(result.records.map((one) => one.naturalKey)).toEqual([
      'ref:24 101|lot 21',
      'ref:24 102|lot 22',
      'ref:24 103|lot 23',
    ]);
    expect(skips(result)).toEqual(['7 totals', '8 repeated heading', '10 totals', '11 totals']);
    expect(brief(result)).toEqual(['warning 4:- column-missing']);
  });

  it('with people twice', async () => {
    const result = await preview('people', 'people-duplicates.csv');
    expect(result.records.map((one) => one.line)).toEqual([2, 5]);
    expect(skips(result)).toEqual(['3 duplicate', '4 duplicate', '6 duplicate']);
    expect(brief(result)).toEqual([
      'warning 3:- duplicate-differs',
      'warning 4:- duplicate-differs',
      'warning 6:- duplicate-differs',
    ]);
  });

  it.each(['pours-us-dates.csv', 'pours-iso-dates.csv'])(
    'with days written in every way: %s',
    async (fileName) => {
      const result = await preview('pours', fileName);
      expect(result.records.map((one) => one.wantedOn)).toEqual(Array(5).fill('2026-12-08'));
    },
  );

  it('with line breaks and inch marks inside cells', async () => {
    const result = await preview('pours', 'pours-quoted-newlines.csv');
    expect(result.records).toMatchObject([
      { line: 2, thicknessIn: '4', notes: 'Gate code 4411 Wash out in the bin' },
      { line: 3, thicknessIn: '5.5', notes: null },
    ]);
    expect(brief(result)).toEqual([]);
  });

  it('with a first line that names the delimiter', async () => {
    const result = await preview('crews', 'crews-sep-line.csv');
    expect(result.records).toMatchObject([{ line: 3, name: 'Norte', memberNames: ['Ana Ruiz', 'Bo Lind'] }]);
  });

  it('in UTF-16 with tabs', async () => {
    const result = await preview('sites', 'sites-utf16-tabs.txt');
    expect(result).toMatchObject({ encoding: 'utf-16le', delimiter: '\t' });
    expect(result.records).toMatchObject([
      {
        name: 'Peña shop',
        address: '118 Windrow Ln, Loveland, CO 80537',
        lonDeg: -105.0711,
        permittedUntilMin: 1020,
      },
      { name: 'Lot 40', address: '2290 Ditch Rider Rd, Berthoud, CO 80513', customerName: 'Tamarisk Homes' },
    ]);
    expect(brief(result)).toEqual([]);
  });

  it('as a workbook with real dates, times, formulas and formats', async () => {
    const result = await preview('pours', 'pours-cells.xlsx');
    expect(result).toMatchObject({ sheetNames: ['December'], headerIndex: 2, delimiter: null });
    expect(result.sample[0]).toEqual([
      'Lot 51',
      'Driveway',
      '2026-12-08',
      '06:30',
      '22',
      '40',
      '880',
      '11',
      '4',
      'Broom',
      'chute',
      '5%',
      '07302',
    ]);
    expect(result.records).toMatchObject([
      {
        line: 4,
        name: 'Driveway',
        wantedOn: '2026-12-08',
        firstLoadMin: 390,
        areaFt2: '880',
        orderedYd3: '11',
        dimensions: [{ lengthFt: '22', widthFt: '40' }],
      },
      { line: 5, wantedOn: '2026-12-09', firstLoadMin: 405, orderedYd3: '2.5' },
    ]);
    expect(skips(result)).toEqual(['6 totals']);
    expect(brief(result)).toEqual([]);
  });

  it('as a workbook with merged crew names, links and faults', async () => {
    const result = await preview('crews', 'crews-merged.xlsx');
    expect(result.sheetName).toBe('Crews');
    expect(result.records).toMatchObject([
      {
        name: 'Norte',
        foremanName: 'José Castañeda',
        foremanEmail: 'jose.castaneda@example.com',
        memberNames: ['Ana Ruiz', 'Bo Lind'],
      },
      { name: 'Sur', memberNames: ['Íñigo Peña'] },
    ]);
    const bytes = readFileSync(
      new URL('../../../../../tests/fixtures/import/crews-merged.xlsx', import.meta.url),
    );
    const faults = await previewImport({
      bytes,
      fileName: 'crews.xlsx',
      kind: 'crews',
      options,
      sheetName: 'Faults',
    });
    expect(brief(faults).filter((one) => !one.endsWith('required'))).toEqual([
      'error 2:0 spreadsheet-error',
      'error 3:0 formula-without-result',
    ]);
  });

  it('the same file twice gives the same keys', async () => {
    for (const [kind, fileName] of [
      ['people', 'people-bom-crlf.csv'],
      ['pours', 'pours-cells.xlsx'],
      ['sites', 'sites-utf16-tabs.txt'],
    ] as const) {
      const [once, again] = [await preview(kind, fileName), await preview(kind, fileName)];
      expect(once.records.length).toBeGreaterThan(1);
      expect(again.records).toEqual(once.records);
    }
  });

  it('takes a mapping that a person chose instead of the suggestion', async () => {
    const bytes = new TextEncoder().encode('A,B,C\nLot 1,12,broom\n');
    const unread = await previewImport({ bytes, fileName: 'odd.csv', kind: 'pours', options });
    expect(unread).toMatchObject({ headerIndex: null, records: [] });
    const mapping = [
      { column: 0, field: 'siteName' },
      { column: 1, field: 'orderedYd3', unit: 'm3' },
    ] as const;
    const read = await previewImport({
      bytes,
      fileName: 'odd.csv',
      kind: 'pours',
      options: { ...options, headerIndex: 0 },
      mapping,
    });
    // 12 m3 = 15.70 yd3 (NIST SP 811).
    expect(read.records).toMatchObject([{ line: 2, siteName: 'Lot 1', orderedYd3: '15.7' }]);
    expect(read.mapping.map((one) => one.field)).toEqual(['siteName', 'orderedYd3', null]);
  });
});
