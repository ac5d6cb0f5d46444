import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { Worker } from 'node:worker_threads';
import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import { InputProblem } from '@strikeboard/domain/problem';
import type { ImportPreview, ImportRequest } from './preview-import.ts';
import type { ReadSheet } from './read-sheet.ts';
import { SheetProblem } from './sheet-problem.ts';
import type { SheetTask, TaskAnswer } from './sheet-task.ts';

/** Files read at the same time; more wait their turn, so that a pile of uploads leaves a core for the board. */
const MAX_WORKERS = 2;
/** No sheet within the limits takes this long. */
const MAX_SECONDS = 60;
/** A sheet within the limits needs about half of it. */
const MAX_HEAP_MB = 768;

let running = 0;
const waiting: (() => void)[] = [];

/** `readSheet` in a thread of its own, so that a large file holds up nobody else's request. */
export function readSheetInWorker(bytes: Uint8Array, fileName: string): Promise<ReadSheet> {
  const copy = new Uint8Array(bytes);
  return inWorker<ReadSheet>({ name: 'read', bytes: copy, fileName }, copy.buffer);
}

/** `previewImport` in a thread of its own. Rejects with SheetProblem or InputProblem. */
export function previewImportInWorker<K extends IntakeKind>(
  request: ImportRequest<K>,
): Promise<ImportPreview<K>> {
  const bytes = new Uint8Array(request.bytes);
  return inWorker<ImportPreview<K>>({ name: 'preview', request: { ...request, bytes } }, bytes.buffer);
}

/** `moved`: the task's bytes, handed over instead of copied a second time. */
async function inWorker<T>(task: SheetTask, moved: ArrayBuffer): Promise<T> {
  if (running >= MAX_WORKERS) await new Promise<void>((resolve) => waiting.push(resolve));
  else running++;
  try {
    return await run<T>(task, moved);
  } finally {
    // The place passes straight to the next in line, or becomes free.
    const next = waiting.shift();
    if (next) next();
    else running--;
  }
}

function run<T>(task: SheetTask, moved: ArrayBuffer): Promise<T> {
  const worker = new Worker(workerFile(), {
    workerData: task,
    transferList: [moved],
    // Node flags of the server (its TypeScript loader among them) are not for this thread.
    execArgv: [],
    resourceLimits: { maxOldGenerationSizeMb: MAX_HEAP_MB },
  });
  return new Promise<T>((resolve, reject) => {
    const timer = setTimeout(() => reject(new SheetProblem({ code: 'too-complex' })), MAX_SECONDS * 1000);
    worker.on('message', (answer: TaskAnswer<T>) => {
      if (answer.ok) resolve(answer.value);
      else if ('fault' in answer) reject(new SheetProblem(answer.fault));
      else reject(new InputProblem(answer.input.field, answer.input.value, answer.input.expected));
    });
    worker.on('error', (error: Error) => {
      const outOfMemory = 'code' in error && error.code === 'ERR_WORKER_OUT_OF_MEMORY';
      reject(outOfMemory ? new SheetProblem({ code: 'too-complex' }) : error);
    });
    worker.on('exit', (code) => {
      clearTimeout(timer);
      reject(new Error(`The sheet reader ended with code ${code} and without an answer.`));
    });
  }).finally(() => worker.terminate());
}

/**
 * The thread's source file. This module may be bundled into apps/web/dist, where a URL relative to it would point
 * at nothing, so the file is looked for from here and from the working directory upwards in the source tree.
 */
export function workerFile(): string {
  const places = ['src/lib/sheets/sheet-worker.mjs', 'apps/web/src/lib/sheets/sheet-worker.mjs'];
  for (const start of [dirname(fileURLToPath(import.meta.url)), process.cwd()]) {
    for (let folder = start; ; folder = dirname(folder)) {
      const found = places.map((place) => join(folder, place)).find((path) => existsSync(path));
      if (found) return found;
      if (dirname(folder) === folder) break;
    }
  }
  throw new Error(
    'apps/web/src/lib/sheets/sheet-worker.mjs is missing: the server must run beside its sources.',
  );
}
