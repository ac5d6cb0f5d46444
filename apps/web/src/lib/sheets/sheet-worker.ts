import { parentPort, workerData } from 'node:worker_threads';
import { InputProblem } from '@strikeboard/domain/problem';
import { previewImport } from './preview-import.ts';
import { readSheet } from './read-sheet.ts';
import { SheetProblem } from './sheet-problem.ts';
import type { SheetTask, TaskAnswer } from './sheet-task.ts';

async function answer(task: SheetTask): Promise<TaskAnswer> {
  try {
    const value =
      task.name === 'read' ? await readSheet(task.bytes, task.fileName) : await previewImport(task.request);
    return { ok: true, value };
  } catch (error) {
    if (error instanceof SheetProblem) return { ok: false, fault: error.fault };
    if (error instanceof InputProblem) {
      return {
        ok: false,
        input: { field: error.field, value: String(error.value), expected: error.expected },
      };
    }
    throw error;
  }
}

const task: SheetTask = workerData;
parentPort?.postMessage(await answer(task));
