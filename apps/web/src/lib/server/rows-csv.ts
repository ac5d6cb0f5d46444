/**
 * Rows as a CSV file that reads back as the same rows: the thread takes files. Every cell is quoted, so that
 * nothing in it is taken for a separator.
 */
export function csvOf(rows: readonly (readonly string[])[]): Uint8Array {
  const width = rows.reduce((most, row) => Math.max(most, row.length), 1);
  const lines = rows.map((row) =>
    Array.from({ length: width }, (_, index) => `"${(row[index] ?? '').replaceAll('"', '""')}"`).join(','),
  );
  return new TextEncoder().encode(`\uFEFF${lines.join('\r\n')}\r\n`);
}
