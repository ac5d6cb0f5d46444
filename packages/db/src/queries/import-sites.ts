import type { SiteRecord } from '@strikeboard/domain/intake/records';
import { and, eq } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { sites } from '../tables/index.ts';
import { type ImportContext, type ImportCounts, type ImportForecast, inChunks } from './import-plan.ts';

type SiteRow = typeof sites.$inferSelect;

interface SitesPlan {
  toMake: SiteRecord[];
  toFill: { site: SiteRow; fill: Partial<SiteRow> }[];
  unchanged: number;
}

/** What accepting these sites would do. Sites refer to nothing, so there are no problems. */
export async function forecastSites(tx: Tx, records: readonly SiteRecord[]): Promise<ImportForecast> {
  return { ...countsOf(await planSites(tx, records)), problems: [] };
}

/** Adds sites, and fills blanks of those that are there already by name and address. */
export async function acceptSites(
  tx: Tx,
  records: readonly SiteRecord[],
  context: ImportContext,
): Promise<ImportCounts> {
  const plan = await planSites(tx, records);
  await inChunks(plan.toMake, (chunk) =>
    tx.insert(sites).values(
      chunk.map((record) => ({
        companyId: currentCompany,
        id: newId(),
        name: record.name,
        naturalKey: record.naturalKey,
        address: record.address,
        zone: record.timeZone ?? context.zone,
        latDeg: record.latDeg,
        lonDeg: record.lonDeg,
        ...permittedOf(record),
        customerName: record.customerName,
        accessNotes: record.accessNotes,
      })),
    ),
  );
  for (const { site, fill } of plan.toFill) {
    await tx
      .update(sites)
      .set(fill)
      .where(and(eq(sites.companyId, currentCompany), eq(sites.id, site.id)));
  }
  return countsOf(plan);
}

async function planSites(tx: Tx, records: readonly SiteRecord[]): Promise<SitesPlan> {
  const rows = await tx.select().from(sites).where(eq(sites.companyId, currentCompany));
  const byKey = new Map(rows.map((row) => [row.naturalKey, row]));
  const plan: SitesPlan = { toMake: [], toFill: [], unchanged: 0 };
  for (const record of records) {
    const site = byKey.get(record.naturalKey);
    const fill = site ? blanksFilled(site, record) : {};
    if (!site) plan.toMake.push(record);
    else if (Object.keys(fill).length > 0) plan.toFill.push({ site, fill });
    else plan.unchanged++;
  }
  return plan;
}

function countsOf(plan: SitesPlan): ImportCounts {
  return { created: plan.toMake.length, updated: plan.toFill.length, unchanged: plan.unchanged };
}

function blanksFilled(site: SiteRow, record: SiteRecord): Partial<SiteRow> {
  const fill: Partial<SiteRow> = {};
  if (site.latDeg === null && record.latDeg !== null && record.lonDeg !== null) {
    fill.latDeg = record.latDeg;
    fill.lonDeg = record.lonDeg;
  }
  if (site.permittedFromMin === null && site.permittedUntilMin === null && record.permittedFromMin !== null) {
    Object.assign(fill, permittedOf(record));
  }
  if (site.customerName === null && record.customerName !== null) fill.customerName = record.customerName;
  if (site.accessNotes === null && record.accessNotes !== null) fill.accessNotes = record.accessNotes;
  return fill;
}

/** Night work, whose end is before its start, ends on the next day: 22:00 to 6:00 is 1320 to 1800. */
function permittedOf(record: SiteRecord) {
  const { permittedFromMin, permittedUntilMin } = record;
  const isNight =
    permittedFromMin !== null && permittedUntilMin !== null && permittedUntilMin <= permittedFromMin;
  return {
    permittedFromMin,
    permittedUntilMin: isNight ? permittedUntilMin + 1440 : permittedUntilMin,
  };
}
