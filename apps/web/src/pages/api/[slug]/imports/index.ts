import { inCompany } from '@strikeboard/db/client';
import { readImport as readStoredImport, saveImport } from '@strikeboard/db/queries/imports';
import { memberEndpoint } from '../../../../lib/api/endpoint.ts';
import { ProblemError } from '../../../../lib/api/problems.ts';
import { readBytes } from '../../../../lib/api/read-body.ts';
import { SHEET_LIMIT_BYTES, uploadImport } from '../../../../lib/api/schemas/imports.ts';
import { describeImport, readOptions } from '../../../../lib/server/imports.ts';
import { previewImportInWorker, readSheetInWorker } from '../../../../lib/sheets/in-worker.ts';
import { SheetProblem } from '../../../../lib/sheets/sheet-problem.ts';

export const POST = memberEndpoint(uploadImport, async ({ context, query, db, company, person, nowMs }) => {
  const bytes = await readBytes(context.request, SHEET_LIMIT_BYTES);
  const { kind, name, sheet = null } = query;
  const options = readOptions(company, nowMs);
  const { preview, rows } = await read(bytes, { kind, fileName: name, sheetName: sheet, options });
  return inCompany(db, { companyId: company.id, personId: person.id }, async (tx) => {
    const { mapping, sheetName, encoding } = preview;
    const id = await saveImport(tx, {
      ...{ kind, fileName: name, sheetName, encoding, rows, mapping },
      ...{ actorId: person.id, nowMs },
    });
    const stored = await readStoredImport(tx, id);
    const described = await describeImport(tx, { stored, preview, nowMs });
    return { ...described, sheetNames: [...preview.sheetNames] };
  });
});

/** The preview, and all rows of the sheet that it chose. */
async function read(bytes: Uint8Array, of: Omit<Parameters<typeof previewImportInWorker>[0], 'bytes'>) {
  if (bytes.byteLength === 0) {
    throw new ProblemError('malformed', 'The body is empty: send the bytes of a CSV or XLSX file.');
  }
  try {
    const [preview, sheets] = await Promise.all([
      previewImportInWorker({ ...of, bytes }),
      readSheetInWorker(bytes, of.fileName),
    ]);
    const rows = sheets.sheets.find(({ name }) => name === preview.sheetName)?.table ?? [];
    return { preview, rows };
  } catch (error) {
    if (!(error instanceof SheetProblem)) throw error;
    const errors = [{ field: 'file', value: of.fileName, expected: 'a CSV or XLSX file' }];
    throw new ProblemError('invalid', error.message, { errors });
  }
}
