import { createVisit as create } from '@strikeboard/db/queries/pours';
import { companyEndpoint } from '../../../../lib/api/endpoint.ts';
import { createVisit } from '../../../../lib/api/schemas/board.ts';
import { acting } from '../../../../lib/server/acting.ts';

export const POST = companyEndpoint(createVisit, async ({ tx, body, person, nowMs }) => {
  const visit = { ...body, wantedOn: body.wantedOn ?? null };
  return create(tx, { ...acting(person, nowMs), visit });
});
