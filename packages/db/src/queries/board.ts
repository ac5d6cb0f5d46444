/** The board's snapshot: one query per table, as the acting company's row-level security lets it. */

import { companyRulesSchema } from '@strikeboard/domain/company-rules';
import type { Interval } from '@strikeboard/domain/interval';
import type { Snapshot, Visit } from '@strikeboard/domain/snapshot';
import { and, eq, gte, inArray, isNull, lt, ne, or, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { NotFound } from '../errors.ts';
import { currentCompany, parseRange } from '../tables/columns.ts';
import {
  companies,
  crewMemberships,
  crews,
  equipment,
  equipmentBookings,
  members,
  mixes,
  mixOrders,
  offers,
  plants,
  pourSlabs,
  pours,
  shifts,
  sites,
  slabs,
  visits,
} from '../tables/index.ts';
import {
  toBooking,
  toCrew,
  toEquipment,
  toMix,
  toMixOrder,
  toOffer,
  toPerson,
  toPlant,
  toPour,
  toShift,
  toSite,
  toSlab,
} from './snapshot-rows.ts';
import { readToldState, toldVisit } from './told-state.ts';

const DAY_MS = 86_400_000;
/** Slabs placed this long before the range may still be curing in it. */
const CURE_DAYS = 35;
/** Weekly hours are counted from the week before. */
const HOURS_DAYS = 8;

/**
 * Reads the board of a range of instants: what stands in it or near enough to matter for a check, all that waits, and
 * the visits named besides.
 */
export async function readSnapshot(
  tx: Tx,
  of: { range: Interval; visitIds?: readonly string[] },
): Promise<Snapshot> {
  const { range } = of;
  const at = (ms: number) => new Date(ms);
  const untilMs = range.endMs + DAY_MS;
  const since = {
    cure: at(range.startMs - CURE_DAYS * DAY_MS),
    hours: at(range.startMs - HOURS_DAYS * DAY_MS),
  };
  const until = at(untilMs);

  const [company] = await tx.select().from(companies).where(eq(companies.id, currentCompany));
  if (!company) throw new NotFound('company', '');

  const visitRows = await tx
    .select()
    .from(visits)
    .where(
      and(
        eq(visits.companyId, currentCompany),
        ne(visits.state, 'called-off'),
        or(
          eq(visits.state, 'waiting'),
          and(gte(visits.startsAt, since.cure), lt(visits.startsAt, until)),
          of.visitIds && of.visitIds.length > 0 ? inArray(visits.id, [...of.visitIds]) : undefined,
        ),
      ),
    );
  const pourIds = [...new Set(visitRows.flatMap(({ pourId }) => (pourId === null ? [] : [pourId])))];
  const siteIds = [...new Set(visitRows.map(({ siteId }) => siteId))];
  const near = <T extends typeof shifts | typeof offers | typeof mixOrders | typeof equipmentBookings>(
    table: T,
  ) =>
    and(
      eq(table.companyId, currentCompany),
      or(
        and(gte(table.startsAt, since.hours), lt(table.startsAt, until)),
        of.visitIds && of.visitIds.length > 0 ? inArray(table.visitId, [...of.visitIds]) : undefined,
      ),
    );

  const pourRows =
    pourIds.length === 0
      ? []
      : await tx
          .select()
          .from(pours)
          .where(and(eq(pours.companyId, currentCompany), inArray(pours.id, pourIds)));
  const slabRows =
    pourIds.length === 0
      ? []
      : await tx
          .select({ pourId: pourSlabs.pourId, slab: slabs })
          .from(pourSlabs)
          .innerJoin(slabs, and(eq(slabs.companyId, pourSlabs.companyId), eq(slabs.id, pourSlabs.slabId)))
          .where(and(eq(pourSlabs.companyId, currentCompany), inArray(pourSlabs.pourId, pourIds)))
          .orderBy(slabs.name, slabs.id);
  const shiftRows = await tx.select().from(shifts).where(near(shifts));
  const offerRows = await tx.select().from(offers).where(near(offers));
  const orderRows = await tx.select().from(mixOrders).where(near(mixOrders));
  const bookingRows = await tx.select().from(equipmentBookings).where(near(equipmentBookings));
  const crewRows = await tx
    .select()
    .from(crews)
    .where(and(eq(crews.companyId, currentCompany), isNull(crews.endedAt)));
  const memberRows = await tx.select().from(members).where(eq(members.companyId, currentCompany));
  const membershipRows = await tx
    .select()
    .from(crewMemberships)
    .where(
      and(
        eq(crewMemberships.companyId, currentCompany),
        lt(crewMemberships.startsAt, until),
        or(isNull(crewMemberships.endsAt), gte(crewMemberships.endsAt, since.hours)),
      ),
    );
  const siteRows = await tx
    .select()
    .from(sites)
    .where(
      and(
        eq(sites.companyId, currentCompany),
        or(isNull(sites.endedAt), siteIds.length > 0 ? inArray(sites.id, siteIds) : undefined),
      ),
    );
  const plantRows = await tx
    .select()
    .from(plants)
    .where(and(eq(plants.companyId, currentCompany), isNull(plants.endedAt)));
  const mixRows = await tx
    .select()
    .from(mixes)
    .where(and(eq(mixes.companyId, currentCompany), isNull(mixes.endedAt)));
  const equipmentRows = await tx
    .select()
    .from(equipment)
    .where(and(eq(equipment.companyId, currentCompany), isNull(equipment.endedAt)));
  const busyRows = await tx
    .select({ personId: sql<string>`person_id`, during: sql<Interval>`during`.mapWith(parseRange) })
    .from(sql`app.busy_times(${at(range.startMs - DAY_MS)}, ${until})`);
  const toldState = await readToldState(tx, [...new Set(shiftRows.map(({ visitId }) => visitId))]);

  const slabsByPour = new Map<string, ReturnType<typeof toSlab>[]>();
  for (const { pourId, slab } of slabRows)
    slabsByPour.set(pourId, [...(slabsByPour.get(pourId) ?? []), toSlab(slab)]);
  const endMs = untilMs + DAY_MS;

  return {
    companyId: company.id,
    revision: company.revision,
    zone: company.zone,
    range,
    rules: companyRulesSchema.parse(company.rules),
    crews: crewRows.map(toCrew),
    people: memberRows.map(toPerson),
    memberships: membershipRows.map((row) => ({
      crewId: row.crewId,
      personId: row.personId,
      during: { startMs: row.startsAt.getTime(), endMs: row.endsAt?.getTime() ?? endMs },
    })),
    sites: siteRows.map(toSite),
    slabs: [...new Map(slabRows.map(({ slab }) => [slab.id, toSlab(slab)])).values()],
    pours: pourRows.map((row) => toPour(row, slabsByPour.get(row.id) ?? [])),
    visits: visitRows.map((row): Visit => toldVisit(row, toldState)),
    shifts: shiftRows.map((row) => toShift(row, toldState.isTold(row))),
    offers: offerRows.map(toOffer),
    busy: busyRows,
    plants: plantRows.map(toPlant),
    mixes: mixRows.map(toMix),
    mixOrders: orderRows.map(toMixOrder),
    equipment: equipmentRows.map(toEquipment),
    bookings: bookingRows.map(toBooking),
    weather: [],
  };
}
