import { inCompany } from '@strikeboard/db/client';
import { readImport as readStoredImport } from '@strikeboard/db/queries/imports';
import { memberEndpoint } from '../../../../../lib/api/endpoint.ts';
import { readImport } from '../../../../../lib/api/schemas/imports.ts';
import { describeImport, readStored } from '../../../../../lib/server/imports.ts';

export const GET = memberEndpoint(readImport, async ({ params, db, company, person, nowMs }) => {
  const of = { companyId: company.id, personId: person.id };
  const stored = await inCompany(db, of, (tx) => readStoredImport(tx, params.id));
  const preview = await readStored(stored, company);
  return inCompany(db, of, (tx) => describeImport(tx, { stored, preview, nowMs }));
});
