import { inflateRawSync } from 'node:zlib';
import { SHEET_LIMITS } from './limits.ts';
import { SheetProblem, type WrongFile } from './sheet-problem.ts';

interface PackedFile {
  readonly name: string;
  readonly method: number;
  readonly packedSize: number;
  readonly offset: number;
}

const END_OF_DIRECTORY = 0x06054b50;
const DIRECTORY_ENTRY = 0x02014b50;
const LOCAL_HEADER = 0x04034b50;
const IN_ZIP64_FIELD = 0xffffffff;

/**
 * Unpacks a workbook once with counted limits before the workbook library may touch it, for the sizes written
 * in an archive can lie. Throws SheetProblem for bombs, for damaged archives and for archives that are no .xlsx.
 * Layout: PKWARE APPNOTE 6.3.
 */
export function inspectWorkbook(bytes: Uint8Array): void {
  const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  try {
    const files = readDirectory(buffer);
    refuseOtherArchives(files.map((file) => file.name));
    let left: number = SHEET_LIMITS.unpackedBytes;
    for (const file of files) {
      const content = unpack(buffer, file, left);
      left -= content.length;
      if (/^xl\/worksheets\/[^/]+\.xml$/i.test(file.name)) refuseTooManyRows(content);
    }
  } catch (error) {
    if (error instanceof SheetProblem) throw error;
    if (error instanceof RangeError && 'code' in error && error.code === 'ERR_BUFFER_TOO_LARGE') {
      throw new SheetProblem({ code: 'too-complex' });
    }
    throw new SheetProblem({ code: 'broken' });
  }
}

function readDirectory(buffer: Buffer): PackedFile[] {
  const end = buffer.lastIndexOf(Buffer.from([0x50, 0x4b, 0x05, 0x06]));
  if (end < 0 || buffer.readUInt32LE(end) !== END_OF_DIRECTORY) throw new SheetProblem({ code: 'broken' });
  const count = buffer.readUInt16LE(end + 10);
  if (count > SHEET_LIMITS.packedFiles) throw new SheetProblem({ code: 'too-complex' });
  const files: PackedFile[] = [];
  let at = buffer.readUInt32LE(end + 16);
  for (let index = 0; index < count; index++) {
    if (buffer.readUInt32LE(at) !== DIRECTORY_ENTRY) throw new SheetProblem({ code: 'broken' });
    const [nameLength, extraLength, commentLength] = [28, 30, 32].map((field) =>
      buffer.readUInt16LE(at + field),
    );
    const nameEnd = at + 46 + (nameLength ?? 0);
    const extra = buffer.subarray(nameEnd, nameEnd + (extraLength ?? 0));
    if ((buffer.readUInt16LE(at + 8) & 1) === 1) throw new SheetProblem({ code: 'password' });
    files.push({
      name: buffer.toString('utf8', at + 46, nameEnd),
      method: buffer.readUInt16LE(at + 10),
      ...sizes(
        buffer.readUInt32LE(at + 20),
        buffer.readUInt32LE(at + 24),
        buffer.readUInt32LE(at + 42),
        extra,
      ),
    });
    at = nameEnd + (extraLength ?? 0) + (commentLength ?? 0);
  }
  return files;
}

/** Some writers put sizes in the ZIP64 field even for small files. */
function sizes(
  packed: number,
  unpacked: number,
  offset: number,
  extra: Buffer,
): { packedSize: number; offset: number } {
  let [packedSize, place] = [packed, offset];
  for (let at = 0; at + 4 <= extra.length; at += 4 + extra.readUInt16LE(at + 2)) {
    if (extra.readUInt16LE(at) !== 1) continue;
    let field = at + 4 + (unpacked === IN_ZIP64_FIELD ? 8 : 0);
    if (packed === IN_ZIP64_FIELD) {
      packedSize = Number(extra.readBigUInt64LE(field));
      field += 8;
    }
    if (offset === IN_ZIP64_FIELD) place = Number(extra.readBigUInt64LE(field));
  }
  return { packedSize, offset: place };
}

function unpack(buffer: Buffer, file: PackedFile, left: number): Buffer {
  if (buffer.readUInt32LE(file.offset) !== LOCAL_HEADER) throw new SheetProblem({ code: 'broken' });
  const start =
    file.offset + 30 + buffer.readUInt16LE(file.offset + 26) + buffer.readUInt16LE(file.offset + 28);
  const packed = buffer.subarray(start, start + file.packedSize);
  if (packed.length !== file.packedSize) throw new SheetProblem({ code: 'broken' });
  if (file.method === 0 && packed.length <= left) return packed;
  if (file.method !== 8 || left <= 0)
    throw new SheetProblem({ code: file.method === 8 || file.method === 0 ? 'too-complex' : 'broken' });
  return packed.length === 0 ? packed : inflateRawSync(packed, { maxOutputLength: left });
}

function refuseOtherArchives(names: readonly string[]): void {
  if (names.some((name) => name.toLowerCase() === 'xl/workbook.xml')) return;
  const has = (test: RegExp): boolean => names.some((name) => test.test(name));
  const found: WrongFile = has(/^xl\/workbook\.bin$/i)
    ? 'binary-excel'
    : has(/^content\.xml$/)
      ? 'open-document'
      : has(/^index\/.*\.iwa$|^index\.zip$/i)
        ? 'apple-numbers'
        : has(/^(?:word|ppt)\//)
          ? 'word-document'
          : 'zip';
  throw new SheetProblem({ code: 'wrong-file', found });
}

/** Counts rows in the markup, so that a sheet of a million formatted rows never becomes objects. */
function refuseTooManyRows(sheet: Buffer): void {
  let tags = 0;
  for (let at = sheet.indexOf('<row'); at >= 0; at = sheet.indexOf('<row', at + 4)) tags++;
  if (tags > SHEET_LIMITS.rowTags)
    throw new SheetProblem({ code: 'too-many-rows', limit: SHEET_LIMITS.rows });
}
