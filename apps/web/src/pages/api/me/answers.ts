import { personEndpoint } from '../../../lib/api/endpoint.ts';
import { answerVisit } from '../../../lib/api/schemas/me.ts';
import { answerAsPerson } from '../../../lib/server/my-answer.ts';

export const POST = personEndpoint(answerVisit, async ({ db, body, person, nowMs }) => ({
  outcome: await answerAsPerson(db, { ...body, personId: person.id, nowMs }),
}));
