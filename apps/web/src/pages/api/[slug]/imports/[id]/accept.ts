import { acceptImport as accept, readImport } from '@strikeboard/db/queries/imports';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { acceptImport } from '../../../../../lib/api/schemas/imports.ts';
import { batchOf, readStored } from '../../../../../lib/server/imports.ts';

export const POST = companyEndpoint(acceptImport, async ({ tx, params, body, company, person, nowMs }) => {
  const stored = await readImport(tx, params.id);
  const batch = batchOf(stored.kind, await readStored(stored, company));
  const { baseVersion } = body;
  return accept(tx, { importId: stored.id, baseVersion, batch, actorId: person.id, nowMs });
});
