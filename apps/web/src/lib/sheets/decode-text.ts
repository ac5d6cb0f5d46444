import { SheetProblem } from './sheet-problem.ts';

export type TextEncoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

/**
 * Bytes 0x80 to 0x9F of Windows-1252 (WHATWG Encoding Standard). Kept here because Node's own decoder of that name
 * reads them as Latin-1 control characters in several releases.
 */
const WINDOWS_1252 = '€\u0081‚ƒ„…†‡ˆ‰Š‹Œ\u008dŽ\u008f\u0090‘’“”•–—˜™š›œ\u009džŸ';

/**
 * Text of a file: by its byte-order mark, else UTF-16 when every second byte is empty, else UTF-8 when it is valid,
 * else Windows-1252, which Excel writes for "CSV" in the US. Throws SheetProblem for bytes that are no text.
 */
export function decodeText(bytes: Uint8Array): { readonly text: string; readonly encoding: TextEncoding } {
  const encoding = encodingOf(bytes);
  const text = encoding === 'windows-1252' ? decodeWindows1252(bytes) : decodeUnicode(bytes, encoding);
  // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what tells binary from text.
  if (/[\u0000-\u0008\u000e-\u001f]/.test(text))
    throw new SheetProblem({ code: 'wrong-file', found: 'not-text' });
  return { text, encoding };
}

function encodingOf(bytes: Uint8Array): TextEncoding {
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return 'utf-8';
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  const head = bytes.subarray(0, 2000);
  const empty = [0, 0];
  for (const [index, byte] of head.entries()) if (byte === 0) empty[index % 2] = (empty[index % 2] ?? 0) + 1;
  const [even = 0, odd = 0] = empty;
  if (odd * 4 > head.length && even === 0) return 'utf-16le';
  if (even * 4 > head.length && odd === 0) return 'utf-16be';
  return isUtf8(bytes) ? 'utf-8' : 'windows-1252';
}

function isUtf8(bytes: Uint8Array): boolean {
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(bytes);
    return true;
  } catch {
    return false;
  }
}

function decodeUnicode(bytes: Uint8Array, encoding: TextEncoding): string {
  try {
    return new TextDecoder(encoding, { fatal: true }).decode(bytes);
  } catch {
    throw new SheetProblem({ code: 'broken' });
  }
}

function decodeWindows1252(bytes: Uint8Array): string {
  const latin1 = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('latin1');
  return latin1.replace(/[\u0080-\u009f]/g, (sign) => WINDOWS_1252[sign.charCodeAt(0) - 0x80] ?? sign);
}
