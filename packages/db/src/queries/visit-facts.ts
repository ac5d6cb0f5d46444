import { indexSnapshot } from '@strikeboard/domain/board-index';
import { companyRulesSchema } from '@strikeboard/domain/company-rules';
import type { Visit } from '@strikeboard/domain/snapshot';
import { factsOf, type ToldFacts } from '@strikeboard/domain/told';
import { finishes } from '@strikeboard/domain/vocabulary';
import { and, eq } from 'drizzle-orm';
import { z } from 'zod';
import type { Tx } from '../client.ts';
import { NotFound } from '../errors.ts';
import { currentCompany } from '../tables/columns.ts';
import { companies, mixes, plants, pourSlabs, pours, sites, slabs, visits } from '../tables/index.ts';
import { toMix, toPlant, toPour, toSite, toSlab, toVisit } from './snapshot-rows.ts';

/** What there is to tell of one visit as it stands. */
export interface VisitFacts {
  visit: Visit;
  companyName: string;
  units: 'us' | 'metric';
  /** Null while the visit is off the board: waiting or called off. */
  facts: ToldFacts | null;
}

/** Facts as they are kept with each person. */
export const toldFactsSchema = z.object({
  visitId: z.string(),
  companyName: z.string(),
  day: z.string(),
  crewStartMs: z.number(),
  firstLoadMs: z.number().nullable(),
  zone: z.string(),
  siteName: z.string(),
  address: z.string(),
  title: z.string(),
  partYd3: z.number().nullable(),
  finish: z.enum(finishes).nullable(),
  calledOff: z.boolean(),
});

/**
 * Reckons what there is to tell of a visit, from its own rows and no others.
 * @throws NotFound when there is no such visit
 */
export async function readVisitFacts(tx: Tx, visitId: string): Promise<VisitFacts> {
  const [row] = await tx
    .select({ visit: visits, site: sites, pour: pours, mix: mixes, plant: plants, company: companies })
    .from(visits)
    .innerJoin(companies, eq(companies.id, visits.companyId))
    .innerJoin(sites, and(eq(sites.companyId, visits.companyId), eq(sites.id, visits.siteId)))
    .leftJoin(pours, and(eq(pours.companyId, visits.companyId), eq(pours.id, visits.pourId)))
    .leftJoin(mixes, and(eq(mixes.companyId, pours.companyId), eq(mixes.id, pours.mixId)))
    .leftJoin(plants, and(eq(plants.companyId, mixes.companyId), eq(plants.id, mixes.plantId)))
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)));
  if (!row) throw new NotFound('visit', visitId);
  const { company, site, pour, mix, plant } = row;
  const slabRows = pour === null ? [] : await readSlabs(tx, pour.id);
  const visit = toVisit(row.visit, false);
  const rules = companyRulesSchema.parse(company.rules);
  const index = indexSnapshot({
    companyId: company.id,
    revision: company.revision,
    zone: company.zone,
    range: visit.during ?? { startMs: 0, endMs: 1 },
    rules,
    crews: [],
    people: [],
    memberships: [],
    sites: [toSite(site)],
    slabs: slabRows.map(toSlab),
    pours: pour === null ? [] : [toPour(pour, slabRows.map(toSlab))],
    visits: [visit],
    shifts: [],
    offers: [],
    busy: [],
    plants: plant === null ? [] : [toPlant(plant)],
    mixes: mix === null ? [] : [toMix(mix)],
    mixOrders: [],
    equipment: [],
    bookings: [],
    weather: [],
  });
  const facts = factsOf(index, visitId, company.name);
  return { visit, companyName: company.name, units: rules.units, facts };
}

async function readSlabs(tx: Tx, pourId: string): Promise<(typeof slabs.$inferSelect)[]> {
  const rows = await tx
    .select({ slab: slabs })
    .from(pourSlabs)
    .innerJoin(slabs, and(eq(slabs.companyId, pourSlabs.companyId), eq(slabs.id, pourSlabs.slabId)))
    .where(and(eq(pourSlabs.companyId, currentCompany), eq(pourSlabs.pourId, pourId)))
    .orderBy(slabs.name, slabs.id);
  return rows.map(({ slab }) => slab);
}
