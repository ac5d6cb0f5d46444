import { returnToWaiting } from '@strikeboard/db/queries/placement';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { returnVisit } from '../../../../../lib/api/schemas/board.ts';
import { acting } from '../../../../../lib/server/acting.ts';

export const POST = companyEndpoint(returnVisit, async ({ tx, params, body, person, nowMs }) =>
  returnToWaiting(tx, { ...acting(person, nowMs), visitId: params.id, baseVersion: body.baseVersion }),
);
