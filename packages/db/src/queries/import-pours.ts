import { clockText } from '@strikeboard/domain/intake/clock-text';
import { siteKey } from '@strikeboard/domain/intake/read-sites';
import type { PourRecord } from '@strikeboard/domain/intake/records';
import { fold, foldAddress } from '@strikeboard/domain/intake/text';
import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { mixes, pourSlabs, pours, sections, sites, slabs, visits } from '../tables/index.ts';
import {
  grouped,
  type ImportContext,
  type ImportCounts,
  type ImportForecast,
  inChunks,
  onlyOne,
  type ReferenceCode,
  type ReferenceProblem,
} from './import-plan.ts';
import { pourSize, type RecordSlab } from './import-pour-size.ts';

type PourRow = Pick<typeof pours.$inferSelect, 'id' | 'naturalKey' | 'jobRef' | 'notes' | 'mixId'> & {
  isPlaced: boolean;
};
type MixRow = Pick<typeof mixes.$inferSelect, 'id' | 'code' | 'name' | 'strengthPsi'>;

/** A site that is there, or one that a pour's row names in full and that will be made. */
interface SiteOf {
  id: string;
  name: string;
  address: string;
  foldedAddress: string;
  isNew: boolean;
}

interface NewPour {
  record: PourRecord;
  site: SiteOf;
  orderedYd3: string;
  slab: RecordSlab | null;
  mixId: string | null;
  notes: string | null;
}

type PourFill = { jobRef?: string; notes?: string; mixId?: string };

interface PoursPlan {
  toMake: NewPour[];
  toFill: { pourId: string; fill: PourFill }[];
  unchanged: number;
  newSites: SiteOf[];
  problems: ReferenceProblem[];
}

/** What accepting these pours would do. */
export async function forecastPours(
  tx: Tx,
  records: readonly PourRecord[],
  context: ImportContext,
): Promise<ImportForecast> {
  const plan = await planPours(tx, records, context);
  return { ...countsOf(plan), problems: plan.problems };
}

/**
 * Adds pours that wait, each with its slab and visit, and the sites that their rows name in full; fills blanks of
 * pours that are there already by key. Records that refer to nothing must be out already.
 */
export async function acceptPours(
  tx: Tx,
  records: readonly PourRecord[],
  context: ImportContext,
): Promise<ImportCounts> {
  const plan = await planPours(tx, records, context);
  await inChunks(plan.newSites, (chunk) =>
    tx.insert(sites).values(
      chunk.map(({ id, name, address }) => ({
        companyId: currentCompany,
        id,
        name,
        address,
        naturalKey: siteKey(name, address),
        zone: context.zone,
      })),
    ),
  );
  await makePours(tx, plan.toMake);
  for (const { pourId, fill } of plan.toFill) {
    await tx
      .update(pours)
      .set({ ...fill, version: sql`${pours.version} + 1` })
      .where(and(eq(pours.companyId, currentCompany), eq(pours.id, pourId)));
  }
  return countsOf(plan);
}

function countsOf(plan: PoursPlan): ImportCounts {
  return { created: plan.toMake.length, updated: plan.toFill.length, unchanged: plan.unchanged };
}

async function makePours(tx: Tx, toMake: readonly NewPour[]): Promise<void> {
  const made = toMake.map((pour) => ({ ...pour, pourId: newId(), slabId: newId(), visitId: newId() }));
  const withSlab = made.flatMap(({ slab, ...pour }) => (slab === null ? [] : [{ ...pour, slab }]));
  await inChunks(withSlab, (chunk) =>
    tx.insert(slabs).values(
      chunk.map(({ record, site, slabId, slab }) => ({
        companyId: currentCompany,
        id: slabId,
        siteId: site.id,
        name: record.name,
        thicknessIn: slab.thicknessIn,
        areaFt2: slab.areaFt2,
        volumeYd3: slab.volumeYd3,
      })),
    ),
  );
  const sectionRows = withSlab.flatMap(({ slabId, slab }) =>
    slab.sections.map(({ lengthFt, widthFt }, position) => ({
      companyId: currentCompany,
      id: newId(),
      slabId,
      position,
      shape: 'rectangle' as const,
      lengthFt,
      widthFt,
    })),
  );
  await inChunks(sectionRows, (chunk) => tx.insert(sections).values(chunk));
  await inChunks(made, (chunk) =>
    tx.insert(pours).values(
      chunk.map(({ record, site, orderedYd3, mixId, notes, pourId }) => ({
        companyId: currentCompany,
        id: pourId,
        siteId: site.id,
        name: record.name,
        naturalKey: record.naturalKey,
        jobRef: record.jobRef,
        orderedYd3,
        mixId,
        finish: record.finish,
        placingMethod: record.placingMethod,
        placingRateYd3PerHour: record.placingRateYd3PerHour,
        notes,
      })),
    ),
  );
  await inChunks(withSlab, (chunk) =>
    tx
      .insert(pourSlabs)
      .values(chunk.map(({ pourId, slabId }) => ({ companyId: currentCompany, pourId, slabId }))),
  );
  await inChunks(made, (chunk) =>
    tx.insert(visits).values(
      chunk.map(({ record, site, orderedYd3, pourId, visitId }) => ({
        companyId: currentCompany,
        id: visitId,
        kind: 'pour' as const,
        siteId: site.id,
        pourId,
        partYd3: orderedYd3,
        title: record.name,
        wantedOn: record.wantedOn,
      })),
    ),
  );
}

type Report = (
  field: string,
  value: string | null,
  code: ReferenceCode,
  severity: 'error' | 'warning',
) => void;

async function planPours(tx: Tx, records: readonly PourRecord[], context: ImportContext): Promise<PoursPlan> {
  const findSite = siteFinder(await readSites(tx));
  const findMix = mixFinder(await readMixes(tx));
  const known = await readPoursByKey(
    tx,
    records.map((record) => record.naturalKey),
  );
  const plan: PoursPlan = { toMake: [], toFill: [], unchanged: 0, newSites: [], problems: [] };
  for (const record of records) {
    const pour = known.get(record.naturalKey);
    if (pour) {
      const fill = blanksFilled(
        pour,
        record,
        findMix(record, () => {}),
      );
      if (Object.keys(fill).length > 0) plan.toFill.push({ pourId: pour.id, fill });
      else plan.unchanged++;
      continue;
    }
    const report: Report = (field, value, code, severity) =>
      plan.problems.push({ line: record.line, field, value: value ?? '', code, severity });
    const site = findSite(record, report);
    const { orderedYd3, slab, reckoned } = pourSize(record, context);
    if (orderedYd3 === null) report('orderedYd3', null, 'quantity-missing', 'error');
    if (site === null || orderedYd3 === null) continue;
    if (site.isNew && !plan.newSites.includes(site)) {
      plan.newSites.push(site);
      report('siteName', site.name, 'site-created', 'warning');
    }
    if (reckoned === 'area') report('areaFt2', slab?.areaFt2 ?? null, 'area-reckoned', 'warning');
    if (reckoned === 'thickness') {
      report('thicknessIn', slab?.thicknessIn ?? null, 'thickness-reckoned', 'warning');
    }
    const mixId = findMix(record, report);
    plan.toMake.push({ record, site, orderedYd3, slab, mixId, notes: notesOf(record, mixId) });
  }
  return plan;
}

async function readSites(tx: Tx): Promise<SiteOf[]> {
  const rows = await tx
    .select({ id: sites.id, name: sites.name, address: sites.address })
    .from(sites)
    .where(and(eq(sites.companyId, currentCompany), isNull(sites.endedAt)));
  return rows.map((row) => ({ ...row, foldedAddress: foldAddress(row.address), isNew: false }));
}

async function readMixes(tx: Tx): Promise<MixRow[]> {
  return tx
    .select({ id: mixes.id, code: mixes.code, name: mixes.name, strengthPsi: mixes.strengthPsi })
    .from(mixes)
    .where(and(eq(mixes.companyId, currentCompany), isNull(mixes.endedAt)));
}

async function readPoursByKey(tx: Tx, keys: string[]): Promise<Map<string, PourRow>> {
  const found = new Map<string, PourRow>();
  await inChunks(keys, async (chunk) => {
    const rows = await tx
      .select({
        id: pours.id,
        naturalKey: pours.naturalKey,
        jobRef: pours.jobRef,
        notes: pours.notes,
        mixId: pours.mixId,
        isPlaced: sql<boolean>`exists (select from visits v
          where v.company_id = pours.company_id and v.pour_id = pours.id and v.state <> 'waiting')`,
      })
      .from(pours)
      .where(and(eq(pours.companyId, currentCompany), inArray(pours.naturalKey, chunk)));
    for (const row of rows) found.set(row.naturalKey, row);
  });
  return found;
}

/**
 * Finds a pour's site: by name and address, by its name alone or its address alone where one site fits. One that is
 * named in full and unknown will be made, once for all pours that name it.
 */
function siteFinder(known: readonly SiteOf[]) {
  const byName = grouped(known, (site) => fold(site.name));
  const all = [...known];
  return (record: PourRecord, report: Report): SiteOf | null => {
    const { siteName, siteAddress } = record;
    const named = siteName === null ? all : (byName.get(fold(siteName)) ?? []);
    const wanted = siteAddress === null ? null : foldAddress(siteAddress);
    const fitting =
      wanted === null ? named : named.filter((site) => isSameAddress(site.foldedAddress, wanted));
    const site = onlyOne(fitting);
    if (site !== null) return site;
    if (fitting.length > 1 || siteName === null || siteAddress === null || wanted === null) {
      const field = siteName === null ? 'siteAddress' : 'siteName';
      const code = fitting.length > 1 ? 'site-ambiguous' : 'site-unknown';
      report(field, siteName ?? siteAddress, code, 'error');
      return null;
    }
    const made = { id: newId(), name: siteName, address: siteAddress, foldedAddress: wanted, isNew: true };
    all.push(made);
    byName.set(fold(siteName), [...named, made]);
    return made;
  };
}

/** Whether one folded address is the other or its beginning: "412 Alder Ct" of "412 Alder Ct, Greeley, CO 80631". */
function isSameAddress(one: string, other: string): boolean {
  return one === other || one.startsWith(`${other} `) || other.startsWith(`${one} `);
}

/** Finds a mix by code or name, or by its strength ("4000", "4000 psi") where one mix has it. */
function mixFinder(known: readonly MixRow[]) {
  const byWord = grouped(
    known.flatMap((mix) => [...new Set([fold(mix.code), fold(mix.name)])].map((word) => ({ word, mix }))),
    ({ word }) => word,
  );
  return (record: PourRecord, report: Report): string | null => {
    if (record.mixName === null) return null;
    const word = fold(record.mixName);
    const strength = /^(\d{4,5})(?: psi)?$/.exec(word)?.[1];
    const called = (byWord.get(word) ?? []).map(({ mix }) => mix);
    const fitting = called.length > 0 ? called : known.filter((mix) => String(mix.strengthPsi) === strength);
    const mix = onlyOne(fitting);
    if (mix === null) {
      report('mixName', record.mixName, fitting.length === 0 ? 'mix-unknown' : 'mix-ambiguous', 'warning');
    }
    return mix?.id ?? null;
  };
}

/** What the row says that has no place of its own on a pour is kept in its notes. */
function notesOf(record: PourRecord, mixId: string | null): string | null {
  const mix = record.mixName !== null && mixId === null ? [`Mix: ${record.mixName}`] : [];
  const truck = record.firstLoadMin === null ? [] : [`First truck: ${clockText(record.firstLoadMin)}`];
  const notes = [...(record.notes === null ? [] : [record.notes]), ...mix, ...truck].join('; ');
  return notes === '' ? null : notes;
}

/** The mix decides times of a chain, so it is filled only while the pour waits. */
function blanksFilled(pour: PourRow, record: PourRecord, mixId: string | null): PourFill {
  const fill: PourFill = {};
  const notes = notesOf(record, mixId);
  if (pour.jobRef === null && record.jobRef !== null) fill.jobRef = record.jobRef;
  if (pour.notes === null && notes !== null) fill.notes = notes;
  if (pour.mixId === null && mixId !== null && !pour.isPlaced) fill.mixId = mixId;
  return fill;
}
