import { discardImport as discard } from '@strikeboard/db/queries/imports';
import { companyEndpoint } from '../../../../../lib/api/endpoint.ts';
import { discardImport } from '../../../../../lib/api/schemas/imports.ts';

export const POST = companyEndpoint(discardImport, async ({ tx, params }) => {
  await discard(tx, params.id);
  return { discarded: true as const };
});
