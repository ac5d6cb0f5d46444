/** Every row that hangs on some visits, taken before a change so that undo can put them back. */

import type { Interval } from '@strikeboard/domain/interval';
import { and, eq, inArray, notInArray, type SQL, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { currentCompany } from '../tables/columns.ts';
import { equipmentBookings, mixOrders, offers, pours, shifts, visits } from '../tables/index.ts';

type Kept<Row> = Omit<Row, 'companyId' | 'startsAt' | 'createdAt'>;

/** Rows as they were. JSON: instants of columns are ISO texts, ranges epoch milliseconds. */
export interface KeptRows {
  visits: Kept<typeof visits.$inferSelect>[];
  shifts: (Omit<Kept<typeof shifts.$inferSelect>, 'answeredAt'> & { answeredAt: string | null })[];
  offers: (Omit<Kept<typeof offers.$inferSelect>, 'answeredAt'> & { answeredAt: string | null })[];
  mixOrders: Kept<typeof mixOrders.$inferSelect>[];
  bookings: Kept<typeof equipmentBookings.$inferSelect>[];
  pours: Kept<typeof pours.$inferSelect>[];
}

function kept<Row extends { companyId: string; createdAt: Date }>(row: Row): Kept<Row> {
  const { companyId, createdAt, ...rest } = row;
  if ('startsAt' in rest) delete rest.startsAt;
  return rest as Kept<Row>;
}

const iso = (at: Date | null): string | null => at?.toISOString() ?? null;
const date = (text: string | null): Date | null => (text === null ? null : new Date(text));

/** Takes the rows of some visits, and of some pours, as they are now. */
export async function keepRows(
  tx: Tx,
  visitIds: readonly string[],
  pourIds: readonly string[] = [],
): Promise<KeptRows> {
  const ids = [...visitIds];
  const of = <T extends typeof shifts | typeof offers | typeof mixOrders | typeof equipmentBookings>(
    table: T,
  ) => and(eq(table.companyId, currentCompany), inArray(table.visitId, ids));
  if (ids.length === 0) return { visits: [], shifts: [], offers: [], mixOrders: [], bookings: [], pours: [] };
  const visitRows = await tx
    .select()
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.id, ids)));
  const pourRows =
    pourIds.length === 0
      ? []
      : await tx
          .select()
          .from(pours)
          .where(and(eq(pours.companyId, currentCompany), inArray(pours.id, [...pourIds])));
  return {
    visits: visitRows.map(kept),
    shifts: (await tx.select().from(shifts).where(of(shifts))).map((row) => ({
      ...kept(row),
      answeredAt: iso(row.answeredAt),
    })),
    offers: (await tx.select().from(offers).where(of(offers))).map((row) => ({
      ...kept(row),
      answeredAt: iso(row.answeredAt),
    })),
    mixOrders: (await tx.select().from(mixOrders).where(of(mixOrders))).map(kept),
    bookings: (await tx.select().from(equipmentBookings).where(of(equipmentBookings))).map(kept),
    pours: pourRows.map(kept),
  };
}

/** Rows of two takings, each once; of a row in both the first. */
export function mergeKept(first: KeptRows, then: KeptRows): KeptRows {
  const merged = <Row extends { id: string }>(rows: readonly Row[], others: readonly Row[]): Row[] => [
    ...rows,
    ...others.filter(({ id }) => !rows.some((row) => row.id === id)),
  ];
  return {
    visits: merged(first.visits, then.visits),
    shifts: merged(first.shifts, then.shifts),
    offers: merged(first.offers, then.offers),
    mixOrders: merged(first.mixOrders, then.mixOrders),
    bookings: merged(first.bookings, then.bookings),
    pours: merged(first.pours, then.pours),
  };
}

/** Releases, withdraws and calls off all that hangs on some visits, but for the rows that are to stay. */
export async function releaseRows(
  tx: Tx,
  visitIds: readonly string[],
  stay: ReadonlySet<string> = new Set(),
): Promise<void> {
  const ids = [...visitIds];
  if (ids.length === 0) return;
  const mine = (
    table: typeof shifts | typeof offers | typeof mixOrders | typeof equipmentBookings,
  ): SQL[] => [
    eq(table.companyId, currentCompany),
    inArray(table.visitId, ids),
    ...(stay.size > 0 ? [notInArray(table.id, [...stay])] : []),
  ];
  await tx
    .update(shifts)
    .set({ state: 'released' })
    .where(and(...mine(shifts), eq(shifts.state, 'held')));
  await tx
    .update(offers)
    .set({ state: 'withdrawn' })
    .where(and(...mine(offers), eq(offers.state, 'open')));
  await tx
    .update(mixOrders)
    .set({ state: 'called-off' })
    .where(and(...mine(mixOrders), notInArray(mixOrders.state, ['refused', 'called-off'])));
  await tx
    .update(equipmentBookings)
    .set({ state: 'called-off' })
    .where(and(...mine(equipmentBookings), notInArray(equipmentBookings.state, ['refused', 'called-off'])));
}

/** Calls off visits that still wait for a reason that is gone. */
export async function callOffVisits(tx: Tx, visitIds: readonly string[]): Promise<void> {
  if (visitIds.length === 0) return;
  await tx
    .update(visits)
    .set({ state: 'called-off', version: sql`${visits.version} + 1` })
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.id, [...visitIds])));
}

/**
 * Puts rows back as they were. What came since is released, withdrawn or called off, never deleted; what someone has
 * answered since, for the very time that comes back, stays answered. Holding rows give way first, so that nothing
 * stands in two places in between; what the database still refuses is the caller's to word.
 */
export async function restoreRows(tx: Tx, rows: KeptRows, visitIds: readonly string[]): Promise<void> {
  if (visitIds.length === 0) return;
  const answered = await answeredSince(tx, rows, visitIds);
  await releaseRows(tx, visitIds, answered);
  for (const { id, version, ...before } of rows.pours) {
    await tx
      .update(pours)
      .set({ ...before, version: sql`${pours.version} + 1` })
      .where(and(eq(pours.companyId, currentCompany), eq(pours.id, id)));
  }
  for (const { id, version, ...before } of rows.visits) {
    await tx
      .update(visits)
      .set({ ...before, version: sql`${visits.version} + 1` })
      .where(and(eq(visits.companyId, currentCompany), eq(visits.id, id)));
  }
  // A follow-up that the change made has nothing to go back to.
  await callOffVisits(
    tx,
    visitIds.filter((id) => !rows.visits.some((row) => row.id === id)),
  );
  for (const { id, answeredAt, ...before } of rows.shifts) {
    if (answered.has(id)) continue;
    await tx
      .update(shifts)
      .set({ ...before, answeredAt: date(answeredAt) })
      .where(and(eq(shifts.companyId, currentCompany), eq(shifts.id, id)));
  }
  for (const { id, answeredAt, ...before } of rows.offers) {
    if (answered.has(id)) continue;
    await tx
      .update(offers)
      .set({ ...before, answeredAt: date(answeredAt) })
      .where(and(eq(offers.companyId, currentCompany), eq(offers.id, id)));
  }
  for (const { id, ...before } of rows.mixOrders)
    await tx
      .update(mixOrders)
      .set(before)
      .where(and(eq(mixOrders.companyId, currentCompany), eq(mixOrders.id, id)));
  for (const { id, ...before } of rows.bookings)
    await tx
      .update(equipmentBookings)
      .set(before)
      .where(and(eq(equipmentBookings.companyId, currentCompany), eq(equipmentBookings.id, id)));
}

/** Ids of shifts and offers that were answered after the rows were taken, for the time that the rows put back. */
async function answeredSince(tx: Tx, rows: KeptRows, visitIds: readonly string[]): Promise<Set<string>> {
  const now = await keepRows(tx, visitIds);
  const returning = new Map(
    rows.visits.map(({ id, state, during }) => [id, isOnBoard(state) ? during : null]),
  );
  const isAnswered = (
    row: KeptRows['shifts'][number] | KeptRows['offers'][number],
    before: typeof row | undefined,
  ) =>
    row.answeredAt !== null &&
    row.answeredAt !== (before?.answeredAt ?? null) &&
    isSame(row.during, returning.get(row.visitId) ?? null);
  const ids = new Set<string>();
  for (const row of now.shifts)
    if (
      isAnswered(
        row,
        rows.shifts.find(({ id }) => id === row.id),
      )
    )
      ids.add(row.id);
  for (const row of now.offers)
    if (
      isAnswered(
        row,
        rows.offers.find(({ id }) => id === row.id),
      )
    )
      ids.add(row.id);
  return ids;
}

function isOnBoard(state: KeptRows['visits'][number]['state']): boolean {
  return state === 'pencilled' || state === 'firm' || state === 'done';
}

function isSame(one: Interval, other: Interval | null): boolean {
  return other !== null && one.startMs === other.startMs && one.endMs === other.endMs;
}
