import { callOff } from '@strikeboard/db/queries/placement';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { callOffVisit } from '../../../../../lib/api/schemas/board.ts';
import { acting } from '../../../../../lib/server/acting.ts';

export const POST = companyEndpoint(callOffVisit, async ({ tx, params, body, person, nowMs }) =>
  callOff(tx, { ...acting(person, nowMs), ...body, visitId: params.id }),
);
