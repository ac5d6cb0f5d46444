import { editPour as edit } from '@strikeboard/db/queries/pours';
import { companyEndpoint } from '../../../../lib/api/endpoint.ts';
import { editPour } from '../../../../lib/api/schemas/pours.ts';
import { acting } from '../../../../lib/server/acting.ts';

export const PATCH = companyEndpoint(editPour, async ({ tx, params, body, person, nowMs }) => {
  const { baseVersion, reasons, ...fields } = body;
  return edit(tx, { ...acting(person, nowMs), pourId: params.id, baseVersion, fields, reasons });
});
