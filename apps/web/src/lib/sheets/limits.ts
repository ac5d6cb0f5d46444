/** What a file may hold. A real company's largest sheets are a tenth of this (common practice, no source). */
export const SHEET_LIMITS = {
  bytes: 10 * 1024 * 1024,
  rows: 20_000,
  columns: 200,
  /** Of everything packed in a workbook, unpacked. */
  unpackedBytes: 100 * 1024 * 1024,
  packedFiles: 2000,
  /** Rows that a workbook merely mentions, such as formatted empty ones. */
  rowTags: 100_000,
} as const;
