import { readMyCalendar } from '@strikeboard/db/queries/my-calendar';
import { addDays, instantAt } from '@strikeboard/domain/zone';
import { personEndpoint } from '../../../lib/api/endpoint.ts';
import { readCalendar } from '../../../lib/api/schemas/me.ts';

export const GET = personEndpoint(readCalendar, async ({ db, query, person }) => {
  const range = {
    startMs: instantAt(query.from, 0, person.zone),
    endMs: instantAt(addDays(query.from, query.days), 0, person.zone),
  };
  return readMyCalendar(db, { personId: person.id, range });
});
