import { endBusy as end } from '@strikeboard/db/queries/my-calendar';
import { personEndpoint } from '../../../../../lib/api/endpoint.ts';
import { endBusy } from '../../../../../lib/api/schemas/me.ts';

export const POST = personEndpoint(endBusy, async ({ db, params, person, nowMs }) => {
  await end(db, { personId: person.id, id: params.id, nowMs });
  return { ended: true as const };
});
