import { inCompany } from '@strikeboard/db/client';
import { readImport as readStoredImport, setMapping } from '@strikeboard/db/queries/imports';
import { fieldsOf } from '@strikeboard/domain/intake/fields';
import { memberEndpoint } from '../../../../../lib/api/endpoint.ts';
import { invalid } from '../../../../../lib/api/problems.ts';
import { mapImport } from '../../../../../lib/api/schemas/imports.ts';
import { describeImport, readStored } from '../../../../../lib/server/imports.ts';

export const PUT = memberEndpoint(mapImport, async ({ params, body, db, company, person, nowMs }) => {
  const of = { companyId: company.id, personId: person.id };
  const stored = await inCompany(db, of, (tx) => readStoredImport(tx, params.id));
  const fields: readonly string[] = fieldsOf[stored.kind];
  const errors = body.mapping.flatMap(({ field }, index) =>
    field === null || fields.includes(field)
      ? []
      : [{ field: `mapping.${index}.field`, value: field, expected: `one of ${fields.join(', ')}` }],
  );
  if (errors.length > 0) throw invalid(errors);
  const mapping = stored.mapping.map((column) => {
    const chosen = body.mapping.find((one) => one.column === column.column);
    return chosen
      ? { ...column, field: chosen.field, unit: chosen.unit ?? column.unit, confidence: 1 }
      : column;
  });
  const changed = { ...stored, mapping, version: body.baseVersion + 1 };
  const preview = await readStored(changed, company);
  return inCompany(db, of, async (tx) => {
    await setMapping(tx, { importId: stored.id, baseVersion: body.baseVersion, mapping });
    return describeImport(tx, { stored: changed, preview, nowMs });
  });
});
