import { placeVisit as place } from '@strikeboard/db/queries/placement';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { placeVisit } from '../../../../../lib/api/schemas/board.ts';
import { acting } from '../../../../../lib/server/acting.ts';

export const POST = companyEndpoint(placeVisit, async ({ tx, params, body, person, nowMs }) => {
  const { crewId, crewStartMs, pumpId, baseVersion, reasons } = body;
  const placement = { visitId: params.id, crewId, crewStartMs, ...(pumpId === undefined ? {} : { pumpId }) };
  return place(tx, { ...acting(person, nowMs), placement, baseVersion, reasons });
});
