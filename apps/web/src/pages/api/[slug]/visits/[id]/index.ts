import { visitDetail } from '@strikeboard/db/queries/pours';
import { listCrews } from '@strikeboard/db/queries/set-up-crews';
import { readVisitFacts } from '@strikeboard/db/queries/visit-facts';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { ProblemError } from '../../../../../lib/api/problems.ts';
import { readVisit } from '../../../../../lib/api/schemas/board.ts';

export const GET = companyEndpoint(readVisit, async ({ tx, params, company, person, nowMs }) => {
  if (company.role === 'foreman') {
    const { visit } = await readVisitFacts(tx, params.id);
    const crews = await listCrews(tx, { atMs: nowMs });
    const isOwn = crews.some(
      ({ id, foremanId, memberIds }) =>
        id === visit.crewId && (foremanId === person.id || memberIds.includes(person.id)),
    );
    if (!isOwn) throw new ProblemError('not-found', 'There is no such visit on your lanes.');
  }
  return visitDetail(tx, params.id);
});
