import { crc32, deflateRawSync } from 'node:zlib';
import ExcelJS from 'exceljs';
import fc from 'fast-check';
import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { readSheet } from './read-sheet.ts';
import { SheetProblem, sheetSentence } from './sheet-problem.ts';

const encode = (text: string): Uint8Array => new TextEncoder().encode(text);

async function fault(bytes: Uint8Array, fileName = 'file.csv'): Promise<SheetProblem['fault']> {
  const error: unknown = await readSheet(bytes, fileName).catch((reason: unknown) => reason);
  if (!(error instanceof SheetProblem)) throw new Error(`expected a SheetProblem, got ${String(error)}`);
  expect(error.message).toMatch(/^[A-Z].*\. .*\.$|^[A-Z].*\.$/);
  expect(sheetSentence(error.fault, 'es')).not.toBe(error.message);
  return error.fault;
}

/** A ZIP archive (PKWARE APPNOTE) whose headers may claim another size than the content has. */
function zip(files: Record<string, Uint8Array>, claimedSize?: number): Uint8Array {
  const locals: Buffer[] = [];
  const directory: Buffer[] = [];
  let offset = 0;
  for (const [name, content] of Object.entries(files)) {
    const packed = deflateRawSync(content, { level: 9 });
    const fields = Buffer.alloc(22);
    fields.writeUInt16LE(20, 0);
    fields.writeUInt16LE(8, 4);
    fields.writeUInt32LE(typeof crc32 === 'function' ? crc32(content) : 0, 10);
    fields.writeUInt32LE(packed.length, 14);
    fields.writeUInt32LE(claimedSize ?? content.length, 18);
    const lengths = Buffer.alloc(4);
    lengths.writeUInt16LE(name.length, 0);
    const local = Buffer.concat([Buffer.from('PK\u0003\u0004'), fields, lengths, Buffer.from(name), packed]);
    const rest = Buffer.alloc(14);
    rest.writeUInt32LE(offset, 10);
    directory.push(
      Buffer.concat([
        Buffer.from('PK\u0001\u0002'),
        Buffer.from([20, 0]),
        fields,
        lengths,
        rest,
        Buffer.from(name),
      ]),
    );
    locals.push(local);
    offset += local.length;
  }
  const entries = Buffer.concat(directory);
  const end = Buffer.alloc(18);
  end.writeUInt16LE(directory.length, 4);
  end.writeUInt16LE(directory.length, 6);
  end.writeUInt32LE(entries.length, 8);
  end.writeUInt32LE(offset, 12);
  return Buffer.concat([...locals, entries, Buffer.from('PK\u0005\u0006'), end]);
}

const COMPOUND = Buffer.from([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]);
const stream = (name: string): Buffer =>
  Buffer.concat([COMPOUND, Buffer.alloc(500), Buffer.from(name, 'utf16le')]);

// Signatures: MS-CFB, MS-OFFCRYPTO, ISO 32000, PKWARE APPNOTE, OpenDocument 1.3.
describe('files that are no sheet', () => {
  it.each([
    ['an old .xls', stream('Workbook'), { code: 'wrong-file', found: 'old-excel' }],
    ['a password', stream('EncryptedPackage'), { code: 'password' }],
    ['an old .doc', stream('WordDocument'), { code: 'wrong-file', found: 'word-document' }],
    ['a PDF', encode('%PDF-1.7\n1 0 obj'), { code: 'wrong-file', found: 'pdf' }],
    [
      'a web page',
      encode('\n<html><table><tr><td>Job</td></tr></table>'),
      { code: 'wrong-file', found: 'web-page' },
    ],
    [
      'Excel 2003 XML',
      encode('<?xml version="1.0"?><Workbook xmlns="urn:schemas-microsoft-com:office:spreadsheet">'),
      { code: 'wrong-file', found: 'excel-xml' },
    ],
    [
      'a picture',
      Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a]),
      { code: 'wrong-file', found: 'picture' },
    ],
    [
      'program bytes',
      Buffer.from([0x7f, 0x45, 0x4c, 0x46, 2, 1, 1, 0, 0, 0]),
      { code: 'wrong-file', found: 'not-text' },
    ],
    [
      'an .ods',
      zip({
        mimetype: encode('application/vnd.oasis.opendocument.spreadsheet'),
        'content.xml': encode('<a/>'),
      }),
      { code: 'wrong-file', found: 'open-document' },
    ],
    ['a .docx', zip({ 'word/document.xml': encode('<a/>') }), { code: 'wrong-file', found: 'word-document' }],
    ['an .xlsb', zip({ 'xl/workbook.bin': encode('x') }), { code: 'wrong-file', found: 'binary-excel' }],
    ['a folder', zip({ 'pours.csv': encode('Job,Yds') }), { code: 'wrong-file', found: 'zip' }],
    [
      'an empty archive',
      Buffer.concat([Buffer.from('PK\u0005\u0006'), Buffer.alloc(18)]),
      { code: 'wrong-file', found: 'zip' },
    ],
    ['nothing', new Uint8Array(), { code: 'empty' }],
    ['blank cells', encode('\ufeff,,\r\n , \r\n'), { code: 'empty' }],
    [
      'half an archive',
      zip({ 'xl/workbook.xml': encode('<workbook/>') }).subarray(0, 60),
      { code: 'broken' },
    ],
    ['an archive of nonsense', zip({ 'xl/workbook.xml': encode('<workbook') }), { code: 'broken' }],
    ['cut UTF-16', Buffer.from([0xff, 0xfe, 0x41, 0x00, 0x00, 0xd8]), { code: 'broken' }],
    ['an open quote', encode('Job,Yds\n"Lot 1,12\n'), { code: 'broken-quotes', line: 2 }],
    ['a quote closed early', encode('Job,Thk\nLot 1,"4" slab"\n'), { code: 'broken-quotes', line: 2 }],
  ])('%s', async (_, bytes, right) => {
    expect(await fault(bytes, 'pours.xlsx')).toEqual(right);
  });
});

describe('limits', () => {
  it('hold at their edges', async () => {
    const rows = (count: number): Uint8Array => encode(`Job\n${'Lot\n'.repeat(count - 1)}\n\n`);
    expect((await readSheet(rows(20_000), 'a.csv')).sheets[0]?.table).toHaveLength(20_000);
    expect(await fault(rows(20_001))).toEqual({ code: 'too-many-rows', limit: 20_000 });
    expect(await fault(encode(`Job\n${'\n'.repeat(50_000)}Lot\n`))).toEqual({
      code: 'too-many-rows',
      limit: 20_000,
    });
    expect(
      (await readSheet(encode(`Job\nLot${'\n'.repeat(50_000)}`), 'a.csv')).sheets[0]?.table,
    ).toHaveLength(2);
    const columns = (count: number): Uint8Array => encode(`${Array(count).fill('x').join(',')},,\n`);
    expect((await readSheet(columns(200), 'a.csv')).sheets[0]?.table[0]).toHaveLength(200);
    expect(await fault(columns(201))).toEqual({ code: 'too-many-columns', limit: 200 });
    expect(await fault(new Uint8Array(10 * 1024 * 1024 + 1))).toEqual({ code: 'too-big', limitMb: 10 });
  });

  it('stop a bomb, also one whose headers lie about its size', async () => {
    const zeros = new Uint8Array(101 * 1024 * 1024);
    expect(
      await fault(zip({ 'xl/workbook.xml': encode('<a/>'), 'xl/worksheets/sheet1.xml': zeros })),
    ).toEqual({ code: 'too-complex' });
    expect(await fault(zip({ 'xl/workbook.xml': zeros }, 10))).toEqual({ code: 'too-complex' });
  });

  it('stop rows and columns far out in a workbook', async () => {
    const book = new ExcelJS.Workbook();
    book.addWorksheet('A').getCell('A20001').value = 'x';
    expect(await fault(new Uint8Array(await book.xlsx.writeBuffer()))).toEqual({
      code: 'too-many-rows',
      limit: 20_000,
    });
    const wide = new ExcelJS.Workbook();
    wide.addWorksheet('A').getCell(1, 201).value = 'x';
    expect(await fault(new Uint8Array(await wide.xlsx.writeBuffer()))).toEqual({
      code: 'too-many-columns',
      limit: 200,
    });
    const tags = encode(`<worksheet><sheetData>${'<row r="1"/>'.repeat(100_001)}</sheetData></worksheet>`);
    const formatted = zip({ 'xl/workbook.xml': encode('<a/>'), 'xl/worksheets/sheet1.xml': tags });
    expect(await fault(formatted)).toEqual({ code: 'too-many-rows', limit: 20_000 });
  });
});

describe('round trips', () => {
  const cell = fc
    .string({ unit: fc.constantFrom(...'aZ9 ,;|\t"\'\n.ñ€”½#=-'.split('')), maxLength: 8 })
    .filter((text) => text === '' || text.trim() !== '');
  const table = fc
    .integer({ min: 2, max: 6 })
    .chain((width) =>
      fc.array(fc.array(cell, { minLength: width, maxLength: width }), { minLength: 1, maxLength: 8 }),
    )
    .map((rows) => [rows[0]?.map((_, column) => `Column ${column}`) ?? [], ...rows]);
  const trimmed = (rows: string[][]): string[][] => {
    const cut = rows.map((row) => row.slice(0, row.findLastIndex((text) => text !== '') + 1));
    return cut.slice(0, cut.findLastIndex((row) => row.length > 0) + 1);
  };

  it('give back every cell of a CSV, whatever its delimiter, line ends and mark', async () => {
    await fc.assert(
      fc.asyncProperty(
        table,
        fc.constantFrom(',', ';', '\t', '|'),
        fc.constantFrom('\n', '\r\n'),
        fc.boolean(),
        async (rows, delimiter, newline, utf16) => {
          const text = `sep=${delimiter}${newline}${Papa.unparse(rows, { delimiter, newline, quotes: true })}`;
          const bytes = utf16 ? Buffer.from(`\ufeff${text}`, 'utf16le') : encode(text);
          const { sheets } = await readSheet(bytes, 'a.csv');
          expect(sheets[0]?.table.slice(1)).toEqual(trimmed(rows));
        },
      ),
    );
  });

  it('give back every cell of a workbook', async () => {
    await fc.assert(
      fc.asyncProperty(table, async (rows) => {
        const book = new ExcelJS.Workbook();
        book.addWorksheet('A').addRows(rows);
        const { sheets } = await readSheet(new Uint8Array(await book.xlsx.writeBuffer()), 'a.xlsx');
        expect(sheets).toEqual([{ name: 'A', table: trimmed(rows) }]);
      }),
      { numRuns: 40 },
    );
  });

  it('of any bytes end in a table or a typed problem', async () => {
    const bytes = fc.oneof(
      fc.uint8Array({ maxLength: 300 }),
      fc.uint8Array({ maxLength: 300 }).map((tail) => Buffer.concat([Buffer.from('PK\u0003\u0004'), tail])),
      fc.string({ unit: 'grapheme' }).map(encode),
    );
    await fc.assert(
      fc.asyncProperty(bytes, async (given) => {
        const result = await readSheet(given, 'a.csv').catch((reason: unknown) => reason);
        expect(result instanceof SheetProblem || (result instanceof Object && 'sheets' in result)).toBe(true);
      }),
      { numRuns: 500 },
    );
  });

  it('reads Windows-1252 by its table', async () => {
    // 0x80 to 0x9F as in the WHATWG Encoding Standard.
    const { sheets, encoding } = await readSheet(
      Buffer.from([0x41, 0x2c, 0x93, 0x34, 0x94, 0x80, 0xf1, 0x92]),
      'a.csv',
    );
    expect(encoding).toBe('windows-1252');
    expect(sheets[0]?.table).toEqual([['A', '“4”€ñ’']]);
  });
});
