import { SheetProblem } from './sheet-problem.ts';

const startsWith = (bytes: Uint8Array, ...values: number[]): boolean =>
  values.every((value, index) => bytes[index] === value);

/**
 * Tells a workbook from text by its first bytes, whatever the file is called; throws SheetProblem for what is
 * surely something else. Signatures: PKWARE APPNOTE, MS-CFB, ISO 32000 and the picture formats.
 */
export function sniff(bytes: Uint8Array): 'zip' | 'text' {
  if (bytes.length === 0) throw new SheetProblem({ code: 'empty' });
  if (startsWith(bytes, 0x50, 0x4b, 0x03, 0x04)) return 'zip';
  if (startsWith(bytes, 0x50, 0x4b, 0x05, 0x06)) throw new SheetProblem({ code: 'wrong-file', found: 'zip' });
  if (startsWith(bytes, 0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1))
    throw new SheetProblem(compound(bytes));
  // BIFF2 to BIFF4 worksheets, before the compound file.
  if (bytes[0] === 0x09 && [0x00, 0x02, 0x04].includes(bytes[1] ?? -1) && bytes[3] === 0x00) {
    throw new SheetProblem({ code: 'wrong-file', found: 'old-excel' });
  }
  const isPicture =
    startsWith(bytes, 0x89, 0x50, 0x4e, 0x47) ||
    startsWith(bytes, 0xff, 0xd8, 0xff) ||
    startsWith(bytes, 0x47, 0x49, 0x46, 0x38) ||
    startsWith(bytes.subarray(4), 0x66, 0x74, 0x79, 0x70);
  if (isPicture) throw new SheetProblem({ code: 'wrong-file', found: 'picture' });
  if (startsWith(bytes, 0x1f, 0x8b)) throw new SheetProblem({ code: 'wrong-file', found: 'zip' });
  if (startsWith(bytes, 0x50, 0x41, 0x52, 0x31))
    throw new SheetProblem({ code: 'wrong-file', found: 'not-text' });
  return 'text';
}

/** Throws SheetProblem for text that is markup with a spreadsheet's name. */
export function refuseMarkup(text: string): void {
  const head = text.slice(0, 4000).trimStart().toLowerCase();
  if (head.startsWith('%pdf-')) throw new SheetProblem({ code: 'wrong-file', found: 'pdf' });
  if (head.startsWith('{\\rtf')) throw new SheetProblem({ code: 'wrong-file', found: 'word-document' });
  if (head.startsWith('<?xml') && head.includes('office:spreadsheet')) {
    throw new SheetProblem({ code: 'wrong-file', found: 'excel-xml' });
  }
  if (
    /^(?:<\?xml[^>]*>\s*)?(?:<!--.*?-->\s*)?<(?:!doctype|html|head|body|table|meta|style|div)\b/s.test(head)
  ) {
    throw new SheetProblem({ code: 'wrong-file', found: 'web-page' });
  }
}

/** A compound file is an .xls, another old Office file, or (MS-OFFCRYPTO) an .xlsx under a password. */
function compound(bytes: Uint8Array): SheetProblem['fault'] {
  const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const has = (stream: string): boolean => buffer.includes(Buffer.from(stream, 'utf16le'));
  if (has('EncryptedPackage') || has('EncryptionInfo')) return { code: 'password' };
  if (has('WordDocument')) return { code: 'wrong-file', found: 'word-document' };
  return { code: 'wrong-file', found: 'old-excel' };
}
