/** One change of a company's board: its place in the order, what it leaves behind, and how others hear of it. */

import type { Booking, MixOrder, Offer, Pour, Shift, Slab, Visit } from '@strikeboard/domain/snapshot';
import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import {
  boardChanges,
  companies,
  equipmentBookings,
  mixOrders,
  offers,
  outbox,
  pourSlabs,
  pours,
  shifts,
  slabs,
  visits,
} from '../tables/index.ts';
import { toBooking, toMixOrder, toOffer, toPour, toShift, toSlab } from './snapshot-rows.ts';
import { readToldState, toldVisit } from './told-state.ts';

/** Channel of the notifications; the payload is `companyId:revision`. */
export const BOARD_CHANNEL = 'board';

/** The rows that a change leaves behind. A reader drops the rows of `visitIds` and takes these instead. */
export interface BoardPatch {
  revision: number;
  kind: string;
  actorPersonId: string | null;
  visitIds: string[];
  visits: Visit[];
  pours: Pour[];
  slabs: Slab[];
  shifts: Shift[];
  offers: Offer[];
  mixOrders: MixOrder[];
  bookings: Booking[];
}

export interface BoardChange {
  revision: number;
  patch: BoardPatch;
}

/**
 * Puts this transaction in line with the company's other changes of the board, so that what it reads from here on
 * stays true until it commits. To be called before anything is read that a decision rests on.
 */
export async function lockBoard(tx: Tx): Promise<void> {
  const rows = await tx
    .select({ id: companies.id })
    .from(companies)
    .where(eq(companies.id, currentCompany))
    // Weaker than FOR UPDATE: rows that name the company may be written meanwhile, and never wait for this.
    .for('no key update');
  if (rows.length !== 1) throw new NotFound('company', '');
}

/**
 * Records a change that has been written: the company's revision grows by one, the rows are kept beside it, and the
 * other readers are notified when the transaction commits.
 */
export async function recordBoardChange(
  tx: Tx,
  change: {
    kind: string;
    actorPersonId: string | null;
    visitIds: readonly string[];
    /** What undo would put back; left out where the change cannot be undone. */
    inverse?: Record<string, unknown>;
    /** Revision of the change that this one undoes. */
    undoes?: number;
  },
): Promise<BoardChange> {
  const [company] = await tx
    .update(companies)
    .set({ revision: sql`${companies.revision} + 1` })
    .where(eq(companies.id, currentCompany))
    .returning({ id: companies.id, revision: companies.revision });
  if (!company) throw new NotFound('company', '');
  const { revision } = company;
  const visitIds = [...new Set(change.visitIds)];
  const patch: BoardPatch = {
    revision,
    kind: change.kind,
    actorPersonId: change.actorPersonId,
    visitIds,
    ...(await readRowsOf(tx, visitIds)),
  };
  await tx.insert(boardChanges).values({
    companyId: company.id,
    revision,
    actorPersonId: change.actorPersonId,
    kind: change.kind,
    visitIds,
    patch: { ...patch },
    inverse: change.inverse ?? null,
  });
  if (change.undoes !== undefined) {
    await tx
      .update(boardChanges)
      .set({ undoneByRevision: revision })
      .where(and(eq(boardChanges.companyId, currentCompany), eq(boardChanges.revision, change.undoes)));
  }
  await tx.execute(sql`select pg_notify(${BOARD_CHANNEL}, ${`${company.id}:${revision}`})`);
  return { revision, patch };
}

/** Changes after a revision, oldest first; null when there are more than `limit` of them. */
export async function changesSince(tx: Tx, revision: number, limit = 200): Promise<BoardPatch[] | null> {
  const rows = await tx
    .select({ patch: boardChanges.patch })
    .from(boardChanges)
    .where(and(eq(boardChanges.companyId, currentCompany), sql`${boardChanges.revision} > ${revision}`))
    .orderBy(boardChanges.revision)
    .limit(limit + 1);
  // Written by recordBoardChange and by nothing else, so it has the shape.
  return rows.length > limit ? null : rows.map(({ patch }) => patch as unknown as BoardPatch);
}

/**
 * Leaves word that the people of a visit may have to be told once it has settled. Written in the transaction that
 * changes the visit, with the job that will look at it.
 */
export async function leaveWord(
  tx: Tx,
  word: { visitId: string; dueMs: number; createdBy: string | null },
): Promise<void> {
  const dueAt = new Date(word.dueMs);
  await tx.insert(outbox).values({
    companyId: currentCompany,
    id: newId(),
    visitId: word.visitId,
    dueAt,
    createdBy: word.createdBy,
  });
  await addTellJob(tx, word.visitId, dueAt);
}

/** Makes what is left untold of a visit due now. False when there is nothing. */
export async function sendNow(tx: Tx, of: { visitId: string; nowMs: number }): Promise<boolean> {
  const dueAt = new Date(of.nowMs);
  const [visit] = await tx
    .select({ id: visits.id })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, of.visitId)));
  if (!visit) throw new NotFound('visit', of.visitId);
  const due = await tx
    .update(outbox)
    .set({ dueAt })
    .where(
      and(
        eq(outbox.companyId, currentCompany),
        eq(outbox.visitId, of.visitId),
        sql`${outbox.doneAt} is null`,
      ),
    );
  if (due.rowCount === 0) return false;
  await addTellJob(tx, of.visitId, dueAt);
  return true;
}

async function addTellJob(tx: Tx, visitId: string, dueAt: Date): Promise<void> {
  await tx.execute(
    sql`select app.add_job('tell-visit', ${JSON.stringify({ visitId })}::json, ${`tell:${visitId}`}, ${dueAt.toISOString()}::timestamptz)`,
  );
}

async function readRowsOf(tx: Tx, visitIds: readonly string[]) {
  const ids = [...visitIds];
  if (ids.length === 0)
    return { visits: [], pours: [], slabs: [], shifts: [], offers: [], mixOrders: [], bookings: [] };
  const visitRows = await tx
    .select()
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.id, ids)));
  const pourIds = visitRows.flatMap(({ pourId }) => (pourId === null ? [] : [pourId]));
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
  const shiftRows = await tx
    .select()
    .from(shifts)
    .where(and(eq(shifts.companyId, currentCompany), inArray(shifts.visitId, ids)));
  const offerRows = await tx
    .select()
    .from(offers)
    .where(and(eq(offers.companyId, currentCompany), inArray(offers.visitId, ids)));
  const orderRows = await tx
    .select()
    .from(mixOrders)
    .where(and(eq(mixOrders.companyId, currentCompany), inArray(mixOrders.visitId, ids)));
  const bookingRows = await tx
    .select()
    .from(equipmentBookings)
    .where(and(eq(equipmentBookings.companyId, currentCompany), inArray(equipmentBookings.visitId, ids)));
  const toldState = await readToldState(tx, ids);
  return {
    visits: visitRows.map((row) => toldVisit(row, toldState)),
    pours: pourRows.map((row) =>
      toPour(
        row,
        slabRows.filter(({ pourId }) => pourId === row.id).map(({ slab }) => toSlab(slab)),
      ),
    ),
    slabs: slabRows.map(({ slab }) => toSlab(slab)),
    shifts: shiftRows.map((row) => toShift(row, toldState.isTold(row))),
    offers: offerRows.map(toOffer),
    mixOrders: orderRows.map(toMixOrder),
    bookings: bookingRows.map(toBooking),
  };
}
