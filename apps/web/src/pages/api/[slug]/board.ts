import { readSnapshot } from '@strikeboard/db/queries/board';
import { addDays, instantAt } from '@strikeboard/domain/zone';
import { companyEndpoint } from '../../../lib/api/endpoint.ts';
import { readBoard } from '../../../lib/api/schemas/board.ts';
import { crewsOf, lanesOnly } from '../../../lib/server/foreman-view.ts';

export const GET = companyEndpoint(readBoard, async ({ tx, query, company, person }) => {
  const range = {
    startMs: instantAt(query.from, 0, company.zone),
    endMs: instantAt(addDays(query.from, query.days), 0, company.zone),
  };
  const snapshot = await readSnapshot(tx, { range });
  return company.role === 'foreman' ? lanesOnly(snapshot, crewsOf(snapshot, person.id)) : snapshot;
});
