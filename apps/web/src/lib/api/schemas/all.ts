import type { Contract } from '../contract.ts';
import * as board from './board.ts';

/** Exports of the contract files that are contracts; they also export schemas. */
function contractsIn(exported: Record<string, unknown>): Contract[] {
  return Object.values(exported).filter(isContract);
}

function isContract(value: unknown): value is Contract {
  return (
    typeof value === 'object' && value !== null && 'path' in value && 'access' in value && 'output' in value
  );
}

/** Every endpoint's contract: the access table and the API's description are made from it. */
export const allContracts: readonly Contract[] = [board].flatMap(contractsIn);
