import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import type { ImportRequest } from './preview-import.ts';
import type { SheetFault } from './sheet-problem.ts';

/** What a worker thread is asked. */
export type SheetTask =
  | { readonly name: 'read'; readonly bytes: Uint8Array; readonly fileName: string }
  | { readonly name: 'preview'; readonly request: ImportRequest<IntakeKind> };

/** What it answers: the value, what is wrong with the file, or what is wrong with the request. */
export type TaskAnswer<T = unknown> =
  | { readonly ok: true; readonly value: T }
  | { readonly ok: false; readonly fault: SheetFault }
  | {
      readonly ok: false;
      readonly input: { readonly field: string; readonly value: string; readonly expected: string };
    };
