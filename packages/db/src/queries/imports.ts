import { fieldsOf, type IntakeKind } from '@strikeboard/domain/intake/fields';
import type { ColumnMapping } from '@strikeboard/domain/intake/headings';
import { and, eq, sql } from 'drizzle-orm';
import { z } from 'zod';
import type { Tx } from '../client.ts';
import { Conflict, NotFound, StaleVersion } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { imports } from '../tables/index.ts';
import { lockBoard, recordBoardChange } from './board-change.ts';
import { acceptCrews, forecastCrews } from './import-crews.ts';
import { acceptPeople, forecastPeople } from './import-people.ts';
import type { ImportBatch, ImportContext, ImportCounts, ImportForecast } from './import-plan.ts';
import { acceptPours, forecastPours } from './import-pours.ts';
import { acceptSites, forecastSites } from './import-sites.ts';
import { readCompany } from './set-up.ts';

/** A spreadsheet that was brought in. Nothing of it is the company's business until it is accepted. */
export interface StoredImport {
  id: string;
  version: number;
  kind: IntakeKind;
  fileName: string;
  sheetName: string | null;
  encoding: string;
  /** All rows of the sheet, headings included. */
  rows: string[][];
  mapping: ColumnMapping[];
  state: 'open' | 'accepted' | 'discarded';
  /** What accepting did; null before. */
  result: ImportCounts | null;
  createdBy: string;
  createdMs: number;
  acceptedMs: number | null;
}

const allFields = [...fieldsOf.people, ...fieldsOf.crews, ...fieldsOf.sites, ...fieldsOf.pours];
const mappingSchema = z.array(
  z.object({
    column: z.number().int().min(0),
    heading: z.string(),
    field: z.enum(allFields).nullable(),
    confidence: z.number().min(0).max(1),
    unit: z.enum(['in', 'ft', 'yd', 'mm', 'cm', 'm', 'yd3', 'm3', 'ft2', 'm2']).nullable(),
  }),
);
const countsSchema = z.object({
  created: z.number().int(),
  updated: z.number().int(),
  unchanged: z.number().int(),
});

/** Keeps a sheet with its mapping and returns its id; its version is 1. */
export async function saveImport(
  tx: Tx,
  read: {
    kind: IntakeKind;
    fileName: string;
    sheetName: string | null;
    encoding: string;
    rows: readonly (readonly string[])[];
    mapping: readonly ColumnMapping[];
    actorId: string;
    nowMs: number;
  },
): Promise<string> {
  const id = newId();
  const { kind, fileName, sheetName, encoding } = read;
  await tx.insert(imports).values({
    companyId: currentCompany,
    id,
    kind,
    fileName,
    sheetName,
    encoding,
    rows: read.rows.map((row) => row.map(storable)),
    mapping: read.mapping.map((one) => ({ ...one, heading: storable(one.heading) })),
    createdBy: read.actorId,
    createdAt: new Date(read.nowMs),
  });
  return id;
}

/** @throws NotFound when there is no such import */
export async function readImport(tx: Tx, importId: string): Promise<StoredImport> {
  const [row] = await tx.select().from(imports).where(isImport(importId));
  if (!row) throw new NotFound('import', importId);
  const { companyId: _, createdAt, acceptedAt, mapping, result, ...fields } = row;
  return {
    ...fields,
    mapping: mappingSchema.parse(mapping),
    result: result === null ? null : countsSchema.parse(result),
    createdMs: createdAt.getTime(),
    acceptedMs: acceptedAt?.getTime() ?? null,
  };
}

/**
 * Changes which fields the columns feed; `sheet` puts another sheet of the same file in its place. Returns the new
 * version.
 * @throws NotFound, StaleVersion; Conflict `import-closed` when it was accepted or discarded
 */
export async function setMapping(
  tx: Tx,
  change: {
    importId: string;
    baseVersion: number;
    mapping: readonly ColumnMapping[];
    sheet?: { name: string | null; rows: readonly (readonly string[])[] };
  },
): Promise<number> {
  await lockOpen(tx, change);
  const { sheet } = change;
  await tx
    .update(imports)
    .set({
      version: change.baseVersion + 1,
      mapping: change.mapping.map((one) => ({ ...one, heading: storable(one.heading) })),
      sheetName: sheet?.name,
      rows: sheet?.rows.map((row) => row.map(storable)),
    })
    .where(isImport(change.importId));
  return change.baseVersion + 1;
}

/**
 * Puts an import aside; nothing of it was saved as business, and nothing will be. Done twice it stays so.
 * @throws NotFound; Conflict `import-closed` when it was accepted
 */
export async function discardImport(tx: Tx, importId: string): Promise<void> {
  const [row] = await tx
    .select({ state: imports.state })
    .from(imports)
    .where(isImport(importId))
    .for('update');
  if (!row) throw new NotFound('import', importId);
  if (row.state === 'accepted') throw new Conflict('import-closed', { state: row.state });
  await tx
    .update(imports)
    .set({ state: 'discarded', version: sql`${imports.version} + 1` })
    .where(and(isImport(importId), eq(imports.state, 'open')));
}

/** What accepting the records would do now, and whom or what they name that is not there. Changes nothing. */
export async function resolveReferences(
  tx: Tx,
  batch: ImportBatch,
  at: { nowMs: number },
): Promise<ImportForecast> {
  const context = await contextOf(tx, at.nowMs);
  switch (batch.kind) {
    case 'people':
      return forecastPeople(tx, batch.records, context);
    case 'crews':
      return forecastCrews(tx, batch.records, context);
    case 'sites':
      return forecastSites(tx, batch.records);
    case 'pours':
      return forecastPours(tx, batch.records, context);
  }
}

/**
 * Makes the records of an import the company's business, all or nothing. What is there already by key is left as it
 * is but for its blanks, so that the same file accepted twice makes nothing twice.
 * @throws NotFound, StaleVersion
 * @throws Conflict `import-closed` when it was accepted or discarded before, `import-kind` when the records are of
 * another kind, `unresolved-references` with `problems` when a record names what is not there
 */
export async function acceptImport(
  tx: Tx,
  accept: { importId: string; baseVersion: number; batch: ImportBatch; actorId: string; nowMs: number },
): Promise<ImportCounts> {
  const { importId, baseVersion, batch, actorId, nowMs } = accept;
  await lockBoard(tx);
  const kind = await lockOpen(tx, { importId, baseVersion });
  if (kind !== batch.kind) throw new Conflict('import-kind', { kind });
  const forecast = await resolveReferences(tx, batch, { nowMs });
  const problems = forecast.problems.filter((problem) => problem.severity === 'error');
  if (problems.length > 0) throw new Conflict('unresolved-references', { problems });
  const counts = await acceptBatch(tx, batch, await contextOf(tx, nowMs));
  await tx
    .update(imports)
    .set({ state: 'accepted', result: { ...counts }, acceptedAt: new Date(nowMs), version: baseVersion + 1 })
    .where(isImport(importId));
  // Sites, people and crews have no place in a patch, so its readers read the board anew.
  if (counts.created + counts.updated > 0) {
    await recordBoardChange(tx, { kind: 'set-up', actorPersonId: actorId, visitIds: [] });
  }
  return counts;
}

function acceptBatch(tx: Tx, batch: ImportBatch, context: ImportContext): Promise<ImportCounts> {
  switch (batch.kind) {
    case 'people':
      return acceptPeople(tx, batch.records, context);
    case 'crews':
      return acceptCrews(tx, batch.records, context);
    case 'sites':
      return acceptSites(tx, batch.records, context);
    case 'pours':
      return acceptPours(tx, batch.records, context);
  }
}

async function contextOf(tx: Tx, nowMs: number): Promise<ImportContext> {
  const { zone, rules } = await readCompany(tx);
  return { nowMs, zone, wastePercent: rules.wastePercent, orderStepYd3: rules.orderStepYd3 };
}

/** Holds the import for this transaction and returns its kind. */
async function lockOpen(tx: Tx, of: { importId: string; baseVersion: number }): Promise<IntakeKind> {
  const [row] = await tx
    .select({ kind: imports.kind, state: imports.state, version: imports.version })
    .from(imports)
    .where(isImport(of.importId))
    .for('update');
  if (!row) throw new NotFound('import', of.importId);
  if (row.state !== 'open') throw new Conflict('import-closed', { state: row.state });
  if (row.version !== of.baseVersion) {
    throw new StaleVersion({ kind: 'import', id: of.importId }, { version: row.version }, ['version']);
  }
  return row.kind;
}

function isImport(importId: string) {
  return and(eq(imports.companyId, currentCompany), eq(imports.id, importId));
}

/** PostgreSQL keeps no NUL in text. */
function storable(text: string): string {
  return text.replaceAll('\u0000', '');
}
