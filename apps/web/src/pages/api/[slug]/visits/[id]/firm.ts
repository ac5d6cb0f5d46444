import { makeFirm } from '@strikeboard/db/queries/placement';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { makeVisitFirm } from '../../../../../lib/api/schemas/board.ts';
import { acting } from '../../../../../lib/server/acting.ts';

export const POST = companyEndpoint(makeVisitFirm, async ({ tx, params, body, person, nowMs }) =>
  makeFirm(tx, { ...acting(person, nowMs), visitId: params.id, baseVersion: body.baseVersion }),
);
