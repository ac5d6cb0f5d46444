import { markBusy as mark } from '@strikeboard/db/queries/my-calendar';
import { personEndpoint } from '../../../../lib/api/endpoint.ts';
import { markBusy } from '../../../../lib/api/schemas/me.ts';

export const POST = personEndpoint(markBusy, async ({ db, body, person }) => {
  const { startMs, endMs, wholeDays, note = null } = body;
  return mark(db, { personId: person.id, startMs, endMs, wholeDays, note });
});
