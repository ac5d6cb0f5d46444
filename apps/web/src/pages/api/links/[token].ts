import { openEndpoint } from '../../../lib/api/endpoint.ts';
import { ProblemError } from '../../../lib/api/problems.ts';
import { answerLink, readLink } from '../../../lib/api/schemas/links.ts';
import { answerThroughLink, readLinkPage } from '../../../lib/server/link-page.ts';

const gone = () => new ProblemError('not-found', 'This link does not open anything any more.');

export const GET = openEndpoint(readLink, async ({ db, params, nowMs }) => {
  const page = await readLinkPage(db, params.token, nowMs);
  if (!page) throw gone();
  return page;
});

export const POST = openEndpoint(answerLink, async ({ db, params, body, nowMs }) => {
  const outcome = await answerThroughLink(db, { token: params.token, ...body, nowMs });
  if (outcome === null) throw gone();
  return { outcome };
});
