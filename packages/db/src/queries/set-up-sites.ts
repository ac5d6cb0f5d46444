import { siteKey } from '@strikeboard/domain/intake/read-sites';
import { InputProblem, requireInRange } from '@strikeboard/domain/problem';
import { isZone } from '@strikeboard/domain/zone';
import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { sites } from '../tables/index.ts';

/** What a site's form holds. */
export interface SiteFields {
  name: string;
  address: string;
  /** IANA zone. */
  zone: string;
  /** Both or neither. */
  latDeg: number | null;
  lonDeg: number | null;
  /** Minutes of the site's day, half-open; an end past 1440 runs into the next day (night work). Null: no limit. */
  permittedFromMin: number | null;
  permittedUntilMin: number | null;
  customerName: string | null;
  accessNotes: string | null;
}

export interface SiteSetUp extends SiteFields {
  id: string;
  endedMs: number | null;
}

/** Sites by name; with `ended` those that are closed too. */
export async function listSites(tx: Tx, which: { ended: boolean } = { ended: false }): Promise<SiteSetUp[]> {
  const rows = await tx
    .select()
    .from(sites)
    .where(and(eq(sites.companyId, currentCompany), which.ended ? undefined : isNull(sites.endedAt)))
    .orderBy(asc(sites.name));
  return rows.map(({ companyId: _, naturalKey: __, createdAt: ___, endedAt, ...fields }) => ({
    ...fields,
    endedMs: endedAt?.getTime() ?? null,
  }));
}

/**
 * Adds a site and returns its id.
 * @throws InputProblem for a zone, position or hours that cannot be
 * @throws Conflict `site-taken` when a site has this name and address, spelling aside
 */
export async function createSite(tx: Tx, site: SiteFields): Promise<string> {
  requireSite(site);
  const id = newId();
  await refusingTwins(site, () =>
    tx
      .insert(sites)
      .values({ companyId: currentCompany, id, ...site, naturalKey: siteKey(site.name, site.address) }),
  );
  return id;
}

/**
 * Changes a site; fields left out stay.
 * @throws NotFound when there is no such site
 * @throws InputProblem, Conflict as in {@link createSite}
 */
export async function editSite(tx: Tx, edit: { siteId: string; fields: Partial<SiteFields> }): Promise<void> {
  const isIt = and(eq(sites.companyId, currentCompany), eq(sites.id, edit.siteId));
  const [before] = await tx.select().from(sites).where(isIt).for('update');
  if (!before) throw new NotFound('site', edit.siteId);
  const { name, address, zone, latDeg, lonDeg, permittedFromMin, permittedUntilMin } = before;
  const { customerName, accessNotes } = before;
  const after: SiteFields = {
    ...{
      name,
      address,
      zone,
      latDeg,
      lonDeg,
      permittedFromMin,
      permittedUntilMin,
      customerName,
      accessNotes,
    },
    ...edit.fields,
  };
  requireSite(after);
  await refusingTwins(after, () =>
    tx
      .update(sites)
      .set({ ...after, naturalKey: siteKey(after.name, after.address) })
      .where(isIt),
  );
}

/**
 * Closes a site: it is offered for new work no more.
 * @throws NotFound when there is no such open site
 */
export async function endSite(tx: Tx, end: { siteId: string; nowMs: number }): Promise<void> {
  const ended = await tx
    .update(sites)
    .set({ endedAt: new Date(end.nowMs) })
    .where(and(eq(sites.companyId, currentCompany), eq(sites.id, end.siteId), isNull(sites.endedAt)));
  if (ended.rowCount !== 1) throw new NotFound('site', end.siteId);
}

function requireSite(site: SiteFields): void {
  if (!isZone(site.zone)) throw new InputProblem('zone', site.zone, 'an IANA time zone');
  if ((site.latDeg === null) !== (site.lonDeg === null)) {
    throw new InputProblem('lonDeg', site.lonDeg, 'both latitude and longitude, or neither');
  }
  if (site.latDeg !== null) requireInRange('latDeg', site.latDeg, -90, 90);
  if (site.lonDeg !== null) requireInRange('lonDeg', site.lonDeg, -180, 180);
  const { permittedFromMin, permittedUntilMin } = site;
  if (permittedFromMin !== null) requireInRange('permittedFromMin', permittedFromMin, 0, 1440);
  if (permittedUntilMin !== null) {
    requireInRange('permittedUntilMin', permittedUntilMin, (permittedFromMin ?? 0) + 1, 2880);
  }
}

async function refusingTwins<T>(site: SiteFields, write: () => Promise<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if (constraintOf(error) !== 'sites_natural_key') throw error;
    throw new Conflict('site-taken', { name: site.name, address: site.address });
  }
}
