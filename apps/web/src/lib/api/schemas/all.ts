import type { Contract } from '../contract.ts';
import * as board from './board.ts';
import * as imports from './imports.ts';
import * as links from './links.ts';
import * as me from './me.ts';
import * as notices from './notices.ts';
import * as pours from './pours.ts';
import * as webhooks from './webhooks.ts';
import * as yardSheet from './yard-sheet.ts';

const modules = [board, pours, imports, notices, yardSheet, me, links, webhooks];

/** Every endpoint's contract: the access table and the API's description are made from it. */
export const allContracts: readonly Contract[] = modules.flatMap((exported) =>
  // The files export schemas too.
  Object.values<unknown>(exported).filter(isContract),
);

function isContract(value: unknown): value is Contract {
  return (
    typeof value === 'object' && value !== null && 'path' in value && 'access' in value && 'output' in value
  );
}
