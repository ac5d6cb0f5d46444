import { existsSync } from 'node:fs';
import { InputProblem } from '@strikeboard/domain/problem';
import { describe, expect, it } from 'vitest';
import { previewImportInWorker, readSheetInWorker, workerFile } from './in-worker.ts';
import { SheetProblem } from './sheet-problem.ts';

const options = { referenceDay: '2026-12-01', zone: 'America/Denver', country: 'US' } as const;
const encode = (text: string): Uint8Array => new TextEncoder().encode(text);

describe('a thread of its own', () => {
  it('reads and previews as the caller would, and leaves the caller its bytes', async () => {
    expect(existsSync(workerFile())).toBe(true);
    const bytes = encode('Job,Yds,Finish,Placing\nLot 1,12,broom,chute\n');
    const read = await readSheetInWorker(bytes, 'pours.csv');
    expect(read.sheets).toEqual([
      {
        name: 'pours',
        table: [
          ['Job', 'Yds', 'Finish', 'Placing'],
          ['Lot 1', '12', 'broom', 'chute'],
        ],
      },
    ]);
    const preview = await previewImportInWorker({ bytes, fileName: 'pours.csv', kind: 'pours', options });
    expect(preview.records).toMatchObject([{ siteName: 'Lot 1', orderedYd3: '12' }]);
    expect(bytes.byteLength).toBe(44);
  });

  it('brings typed problems back', async () => {
    await expect(readSheetInWorker(encode('%PDF-1.7'), 'a.csv')).rejects.toMatchObject({
      constructor: SheetProblem,
      fault: { code: 'wrong-file', found: 'pdf' },
    });
    const wrong = previewImportInWorker({
      bytes: encode('Job,Yds\nA,1\n'),
      fileName: 'a.csv',
      kind: 'pours',
      options: { ...options, zone: 'Mars' },
    });
    await expect(wrong).rejects.toBeInstanceOf(InputProblem);
  });

  it('keeps the event loop free while a large file is read, and serves more files than threads', async () => {
    const rows = Array.from({ length: 5000 }, (_, index) => `Lot ${index},12,broom,chute,12/8/2026`);
    const bytes = encode(`Job,Yds,Finish,Placing,Wanted\n${rows.join('\n')}\n`);
    let ticks = 0;
    const ticking = setInterval(() => ticks++, 5);
    const previews = await Promise.all(
      [1, 2, 3, 4].map(() => previewImportInWorker({ bytes, fileName: 'a.csv', kind: 'pours', options })),
    );
    clearInterval(ticking);
    expect(previews.map((one) => one.records.length)).toEqual([5000, 5000, 5000, 5000]);
    expect(ticks).toBeGreaterThan(20);
  }, 30_000);
});
