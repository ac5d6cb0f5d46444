/**
 * How long a preview of 5,000 pours takes, as a multiple of JSON.parse of the same table, so that figures of
 * different machines compare. Run: node --import tsx tests/bench/import-preview.ts
 */
import { previewImport } from '../../apps/web/src/lib/sheets/preview-import.ts';
import { readSheet } from '../../apps/web/src/lib/sheets/read-sheet.ts';

const ROWS = 5000;
const ROUNDS = 5;
const finishes = ['Broom', 'hard trowel', 'exp. agg.', 'Stamped - ashlar slate', 'float'];

const lines = Array.from({ length: ROWS }, (_, index) => {
  const day = `${(index % 12) + 1}/${(index % 28) + 1}/2026`;
  const yards = ((index % 400) / 4 + 1).toFixed(2);
  return `24-${index},Lot ${index % 900},Slab ${index},${day},${yards} yd,"4""","22'6"" x ${20 + (index % 60)}'",${finishes[index % 5]},off the truck,6:30 AM,"gate code 44, wash out in the bin"`;
});
const csv = `Job #,Job,Slab,Pour date,Yds,Thk,Size,Finish,Placing,Truck time,Notes\n${lines.join('\n')}\n`;
const bytes = new TextEncoder().encode(csv);
const options = { referenceDay: '2026-06-30', zone: 'America/Denver', country: 'US' } as const;

async function fastestMs(run: () => unknown): Promise<number> {
  let best = Number.POSITIVE_INFINITY;
  for (let round = 0; round < ROUNDS; round++) {
    const start = performance.now();
    await run();
    best = Math.min(best, performance.now() - start);
  }
  return best;
}

const { sheets } = await readSheet(bytes, 'pours.csv');
const json = JSON.stringify(sheets[0]?.table);
const jsonMs = await fastestMs(() => JSON.parse(json));
const readMs = await fastestMs(() => readSheet(bytes, 'pours.csv'));
const previewMs = await fastestMs(() =>
  previewImport({ bytes, fileName: 'pours.csv', kind: 'pours', options }),
);
const { records, problems } = await previewImport({ bytes, fileName: 'pours.csv', kind: 'pours', options });

console.log(`${records.length} pours, ${problems.length} problems from ${bytes.length} bytes`);
console.log(
  `JSON.parse ${jsonMs.toFixed(1)} ms, read ${readMs.toFixed(1)} ms, preview ${previewMs.toFixed(1)} ms`,
);
console.log(
  `read / JSON.parse = ${(readMs / jsonMs).toFixed(1)}, preview / JSON.parse = ${(previewMs / jsonMs).toFixed(1)}`,
);
