import { createPour as create } from '@strikeboard/db/queries/pours';
import { companyEndpoint } from '../../../../lib/api/endpoint.ts';
import { createPour } from '../../../../lib/api/schemas/pours.ts';
import { acting } from '../../../../lib/server/acting.ts';

export const POST = companyEndpoint(createPour, async ({ tx, body, person, nowMs }) =>
  create(tx, { ...acting(person, nowMs), pour: body }),
);
