import { undoChange as undo } from '@strikeboard/db/queries/placement';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { undoChange } from '../../../../../lib/api/schemas/board.ts';
import { acting } from '../../../../../lib/server/acting.ts';

export const POST = companyEndpoint(undoChange, async ({ tx, params, person, nowMs }) =>
  undo(tx, { ...acting(person, nowMs), revision: Number(params.revision) }),
);
