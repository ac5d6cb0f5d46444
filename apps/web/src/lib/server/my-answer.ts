import { type Database, inCompany } from '@strikeboard/db/client';
import { answerVisit } from '@strikeboard/db/queries/answers';
import { membershipBySlug } from '@strikeboard/db/queries/sign-in';
import { ProblemError } from '../api/problems.ts';

/** Records a person's own answer in one of their companies. @throws ProblemError 404 for a company they are not in */
export async function answerAsPerson(
  db: Database,
  given: {
    personId: string;
    companySlug: string;
    visitId: string;
    answer: 'yes' | 'no';
    seenStartMs: number | null;
    nowMs: number;
  },
): Promise<'recorded' | 'not-free' | 'not-asked'> {
  const { personId, companySlug, visitId, answer, seenStartMs, nowMs } = given;
  const membership = await membershipBySlug(db, personId, companySlug);
  if (!membership) throw new ProblemError('not-found', 'There is no such work of yours.');
  const of = { companyId: membership.companyId, personId };
  const result = await inCompany(db, of, (tx) =>
    answerVisit(tx, { visitId, personId, answer, nowMs, seenStartMs }),
  );
  return result.outcome;
}
