/** Moves of visits: each checks again in its own transaction, writes, records the board's change and leaves word. */

import { type BoardIndex, indexSnapshot, rowsOfVisit, withVisitRows } from '@strikeboard/domain/board-index';
import { visitsOfChange } from '@strikeboard/domain/change-rows';
import { type Finding, type FindingCode, worstSeverity } from '@strikeboard/domain/finding';
import { nearestFit } from '@strikeboard/domain/fit';
import {
  needsReason,
  type PlannedPlacement,
  planPlacement,
  reheldAfter,
} from '@strikeboard/domain/plan-placement';
import type { Placement } from '@strikeboard/domain/snapshot';
import { siteDayOf } from '@strikeboard/domain/zone';
import { and, desc, eq, inArray, notInArray, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound, Refused, StaleVersion, sqlStateOf } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import {
  audit,
  boardChanges,
  equipmentBookings,
  mixOrders,
  offers,
  outbox,
  shifts,
  told,
  visits,
} from '../tables/index.ts';
import { readSnapshot } from './board.ts';
import { type BoardChange, leaveWord, lockBoard, recordBoardChange } from './board-change.ts';
import { type KeptRows, keepRows, restoreRows } from './visit-rows.ts';

const DAY_MS = 86_400_000;
/** Days around a placement that its checks may look at. */
const LOOK_DAYS = 8;
/** Days ahead in which another slot is looked for when a stop refuses the one that was asked for. */
const FIT_DAYS = 14;
const NEAREST_SHOWN = 3;

type VisitRow = typeof visits.$inferSelect;

/** Who acts, when, and how long a change settles before people are told. */
export interface Acting {
  actorId: string | null;
  nowMs: number;
  settleSeconds: number;
}

/** Reasons given for cautions, by finding code. */
export type Reasons = Partial<Record<FindingCode, string>>;

/**
 * Puts a visit on a crew's lane, or moves it there.
 * @throws NotFound for a visit or crew that the company has not
 * @throws StaleVersion when the visit has changed since `baseVersion`
 * @throws Refused with the findings: a stop (with slots that fit), or a caution without a reason
 */
export async function placeVisit(
  tx: Tx,
  of: Acting & { placement: Placement; baseVersion: number; reasons: Reasons },
): Promise<BoardChange> {
  await lockBoard(tx);
  const visit = await visitAt(tx, of.placement.visitId, of.baseVersion);
  if (visit.state === 'done' || visit.state === 'called-off')
    throw new Conflict('visit-closed', { state: visit.state });
  const index = await indexAround(tx, of.placement.crewStartMs, [visit.id]);
  if (!index.crews.has(of.placement.crewId)) throw new NotFound('crew', of.placement.crewId);
  return writePlacement(tx, { ...of, kind: 'place', visit, index });
}

/** Writes a placement of a visit that is locked and read. Also for a pour that was edited where it stands. */
export async function writePlacement(
  tx: Tx,
  of: Acting & {
    kind: string;
    placement: Placement;
    reasons: Reasons;
    visit: VisitRow;
    index: BoardIndex;
    /** Rows as they were before an edit that this placement follows; undo puts those back. */
    kept?: Pick<KeptRows, 'visits' | 'pours'>;
  },
): Promise<BoardChange> {
  const { visit, placement, index } = of;
  const planned = planPlacement(index, placement, of.nowMs);
  const accepted = acceptedReasons(of, planned.findings);
  const touched = visitsOfChange(planned.change);
  const before = await keepRows(tx, touched);
  if (of.kept) {
    const { visits: visitsBefore, pours: poursBefore } = of.kept;
    before.visits = before.visits.map((row) => visitsBefore.find(({ id }) => id === row.id) ?? row);
    before.pours = poursBefore;
  }

  await setVisit(tx, visit.id, {
    crewId: planned.change.visit.crewId,
    state: planned.change.visit.state,
    during: planned.change.visit.during,
    acceptedCodes: needsReason(planned.findings, []),
  });
  for (const reheld of planned.change.reheld) {
    await tx
      .update(shifts)
      .set({ held: reheld.held })
      .where(and(eq(shifts.companyId, currentCompany), eq(shifts.id, reheld.shiftId)));
  }
  await writeShifts(tx, planned, before);
  await writeOffers(tx, planned, before);
  await writeBooking(tx, planned, before);
  await writeMixOrder(tx, planned, before);
  const madeIds = await writeFollowUps(tx, planned, { visit, zone: zoneOf(index, visit.siteId) });

  await note(tx, of, {
    action: of.kind,
    visitId: visit.id,
    before: { crewId: visit.crewId, during: visit.during, state: visit.state },
    after: planned.change.visit,
  });
  for (const [code, reason] of accepted)
    await note(tx, of, { action: 'accept-caution', visitId: visit.id, after: { code }, reason });
  if (planned.change.visit.state === 'firm') await settle(tx, of, visit.id);
  return recordUndoable(tx, of, { kind: of.kind, visitIds: [...touched, ...madeIds], before });
}

/** Takes a visit off the board: it waits again. Its people are told if they were told of it. */
export async function returnToWaiting(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number },
): Promise<BoardChange> {
  return takeOff(tx, { ...of, kind: 'wait', reason: null, state: 'waiting' });
}

/** Calls a visit off, with the reason. Its people are told if they were told of it. */
export async function callOff(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number; reason: string },
): Promise<BoardChange> {
  return takeOff(tx, { ...of, kind: 'call-off', state: 'called-off' });
}

/** Makes a pencilled visit firm: its people are told once it has settled. */
export async function makeFirm(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number },
): Promise<BoardChange> {
  await lockBoard(tx);
  const visit = await visitAt(tx, of.visitId, of.baseVersion);
  if (visit.state !== 'pencilled') throw new Conflict('not-pencilled', { state: visit.state });
  const before = await keepRows(tx, [visit.id]);
  await setVisit(tx, visit.id, { state: 'firm' });
  await note(tx, of, {
    action: 'make-firm',
    visitId: visit.id,
    before: { state: visit.state },
    after: { state: 'firm' },
  });
  await settle(tx, of, visit.id);
  return recordUndoable(tx, of, { kind: 'make-firm', visitIds: [visit.id], before });
}

/**
 * Undoes a change, if nothing that it touched has changed since. The undoing is a change like any other, so it can be
 * undone too.
 * @throws NotFound for a revision without a change
 * @throws Conflict `not-undoable`, `undone-already`, `changed-since` or `time-taken`
 */
export async function undoChange(tx: Tx, of: Acting & { revision: number }): Promise<BoardChange> {
  await lockBoard(tx);
  const [change] = await tx
    .select()
    .from(boardChanges)
    .where(and(eq(boardChanges.companyId, currentCompany), eq(boardChanges.revision, of.revision)));
  if (!change) throw new NotFound('change', String(of.revision));
  if (change.undoneByRevision !== null)
    throw new Conflict('undone-already', { byRevision: change.undoneByRevision });
  if (change.inverse === null) throw new Conflict('not-undoable', { kind: change.kind });
  const inverse = change.inverse as unknown as Inverse;
  const current = await tx
    .select({ id: visits.id, version: visits.version, title: visits.title })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.id, change.visitIds)));
  const moved = current.find(({ id, version }) => inverse.versions[id] !== version);
  if (moved) throw new Conflict('changed-since', { visitId: moved.id, title: moved.title });

  const pourIds = inverse.before.pours.map(({ id }) => id);
  const before = await keepRows(tx, change.visitIds, pourIds);
  try {
    await tx.transaction((inner) => restoreRows(inner, inverse.before, change.visitIds));
  } catch (error) {
    if (sqlStateOf(error) !== '23P01') throw error;
    throw new Conflict('time-taken', { constraint: constraintOf(error) });
  }
  for (const visitId of change.visitIds)
    await note(tx, of, {
      action: 'undo',
      visitId,
      before: { revision: of.revision },
      after: { kind: change.kind },
    });
  for (const visitId of await toBeTold(tx, change.visitIds)) await settle(tx, of, visitId);
  return recordUndoable(tx, of, { kind: 'undo', visitIds: change.visitIds, before, undoes: of.revision });
}

/** The locked visit, at the version that the write was based on. */
export async function visitAt(tx: Tx, visitId: string, baseVersion: number): Promise<VisitRow> {
  const [visit] = await tx
    .select()
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)))
    .for('update');
  if (!visit) throw new NotFound('visit', visitId);
  if (visit.version === baseVersion) return visit;
  throw new StaleVersion(
    { kind: 'visit', id: visitId },
    { version: visit.version, crewId: visit.crewId, during: visit.during, state: visit.state },
    await changedSince(tx, visit, baseVersion),
  );
}

/** The board as a placement's checks, and the search for another slot, need it. */
export async function indexAround(tx: Tx, atMs: number, visitIds: readonly string[]): Promise<BoardIndex> {
  const range = { startMs: atMs - LOOK_DAYS * DAY_MS, endMs: atMs + FIT_DAYS * DAY_MS };
  return indexSnapshot(await readSnapshot(tx, { range, visitIds }));
}

interface Inverse {
  before: KeptRows;
  /** Version of each visit right after the change. */
  versions: Record<string, number>;
}

async function recordUndoable(
  tx: Tx,
  of: Acting,
  change: { kind: string; visitIds: readonly string[]; before: KeptRows; undoes?: number },
): Promise<BoardChange> {
  const rows = await tx
    .select({ id: visits.id, version: visits.version })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.id, [...change.visitIds])));
  const inverse: Inverse = {
    before: change.before,
    versions: Object.fromEntries(rows.map(({ id, version }) => [id, version])),
  };
  return recordBoardChange(tx, {
    kind: change.kind,
    actorPersonId: of.actorId,
    visitIds: change.visitIds,
    inverse: { ...inverse },
    undoes: change.undoes,
  });
}

/** Refuses what the checks refuse; returns the reasons that are to be kept. */
function acceptedReasons(
  of: { placement: Placement; reasons: Reasons; visit: VisitRow; index: BoardIndex; nowMs: number },
  findings: readonly Finding[],
): [FindingCode, string][] {
  const { placement, visit, index } = of;
  if (worstSeverity(findings) === 'stop') {
    const nearest = nearestFit(index, visit.id, placement.crewStartMs, {
      crewId: placement.crewId,
      limit: NEAREST_SHOWN,
      nowMs: of.nowMs,
    });
    throw new Refused(
      'stops',
      findings,
      nearest.map(({ crewId, crewStartMs }) => ({ crewId, crewStartMs })),
    );
  }
  const stays = visit.crewId === placement.crewId && visit.during?.startMs === placement.crewStartMs;
  const codes = needsReason(findings, stays ? visit.acceptedCodes : []);
  const given = codes.flatMap((code): [FindingCode, string][] => {
    const reason = of.reasons[code]?.trim();
    return reason ? [[code, reason]] : [];
  });
  if (given.length < codes.length) throw new Refused('reason-needed', findings);
  return given;
}

async function setVisit(
  tx: Tx,
  visitId: string,
  values: Partial<Pick<VisitRow, 'crewId' | 'state' | 'during' | 'acceptedCodes' | 'window'>>,
): Promise<void> {
  await tx
    .update(visits)
    .set({ ...values, version: sql`${visits.version} + 1` })
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)));
}

async function writeShifts(tx: Tx, { change }: PlannedPlacement, before: KeptRows): Promise<void> {
  const held = before.shifts.filter((row) => row.visitId === change.visitId && row.state === 'held');
  const gone = held.filter((row) => !change.shifts.some(({ personId }) => personId === row.personId));
  if (gone.length > 0) {
    await tx
      .update(shifts)
      .set({ state: 'released' })
      .where(
        and(
          eq(shifts.companyId, currentCompany),
          inArray(
            shifts.id,
            gone.map(({ id }) => id),
          ),
        ),
      );
  }
  for (const { personId, during, held: heldRange } of change.shifts) {
    const row = held.find((one) => one.personId === personId);
    const stays = row && row.during.startMs === during.startMs && row.during.endMs === during.endMs;
    await taking(tx, { kind: 'person', id: personId, visitId: change.visitId, during: heldRange }, (inner) =>
      row
        ? inner
            .update(shifts)
            .set({ during, held: heldRange, ...(stays ? {} : { answer: 'none' as const, answeredAt: null }) })
            .where(and(eq(shifts.companyId, currentCompany), eq(shifts.id, row.id)))
        : inner.insert(shifts).values({
            companyId: currentCompany,
            id: newId(),
            visitId: change.visitId,
            personId,
            during,
            held: heldRange,
          }),
    );
  }
}

async function writeOffers(tx: Tx, { change }: PlannedPlacement, before: KeptRows): Promise<void> {
  const open = before.offers.filter((row) => row.visitId === change.visitId && row.state === 'open');
  const isWanted = (row: (typeof open)[number]) =>
    change.offers.some(
      ({ personId, during }) =>
        personId === row.personId &&
        during.startMs === row.during.startMs &&
        during.endMs === row.during.endMs,
    );
  const withdrawn = open.filter((row) => !isWanted(row));
  if (withdrawn.length > 0) {
    await tx
      .update(offers)
      .set({ state: 'withdrawn' })
      .where(
        and(
          eq(offers.companyId, currentCompany),
          inArray(
            offers.id,
            withdrawn.map(({ id }) => id),
          ),
        ),
      );
  }
  for (const { personId, during, held } of change.offers) {
    const kept = open.find((row) => row.personId === personId && isWanted(row));
    if (kept)
      await tx
        .update(offers)
        .set({ held })
        .where(and(eq(offers.companyId, currentCompany), eq(offers.id, kept.id)));
    else
      await tx
        .insert(offers)
        .values({ companyId: currentCompany, id: newId(), visitId: change.visitId, personId, during, held });
  }
}

async function writeBooking(tx: Tx, { change }: PlannedPlacement, before: KeptRows): Promise<void> {
  const { booking } = change;
  const live = before.bookings.filter(
    (row) => row.visitId === change.visitId && row.state !== 'refused' && row.state !== 'called-off',
  );
  const kept = live.find((row) => row.equipmentId === booking?.equipmentId);
  // Other equipment than pumps is not planned by a placement and stays booked.
  const pumps = new Set(live.filter((row) => row !== kept).map(({ id }) => id));
  if (pumps.size > 0) {
    await tx
      .update(equipmentBookings)
      .set({ state: 'called-off' })
      .where(
        and(
          eq(equipmentBookings.companyId, currentCompany),
          inArray(equipmentBookings.id, [...pumps]),
          sql`exists (select 1 from equipment e where e.company_id = ${equipmentBookings.companyId} and e.id = ${equipmentBookings.equipmentId} and e.kind = 'pump')`,
        ),
      );
  }
  if (!booking) return;
  const { equipmentId, during, held } = booking;
  const stays = kept && kept.during.startMs === during.startMs && kept.during.endMs === during.endMs;
  await taking(tx, { kind: 'equipment', id: equipmentId, visitId: change.visitId, during: held }, (inner) =>
    kept
      ? inner
          .update(equipmentBookings)
          .set({ during, held, ...(stays ? {} : { state: 'drafted' as const }) })
          .where(and(eq(equipmentBookings.companyId, currentCompany), eq(equipmentBookings.id, kept.id)))
      : inner.insert(equipmentBookings).values({
          companyId: currentCompany,
          id: newId(),
          visitId: change.visitId,
          equipmentId,
          during,
          held,
        }),
  );
}

async function writeMixOrder(tx: Tx, { change }: PlannedPlacement, before: KeptRows): Promise<void> {
  const { mixOrder } = change;
  const live = before.mixOrders.filter(
    (row) => row.visitId === change.visitId && row.state !== 'refused' && row.state !== 'called-off',
  );
  const kept = live.find((row) => row.plantId === mixOrder?.plantId && row.mixId === mixOrder.mixId);
  const gone = live.filter((row) => row !== kept);
  if (gone.length > 0) {
    await tx
      .update(mixOrders)
      .set({ state: 'called-off' })
      .where(
        and(
          eq(mixOrders.companyId, currentCompany),
          inArray(
            mixOrders.id,
            gone.map(({ id }) => id),
          ),
        ),
      );
  }
  if (!mixOrder) return;
  const values = {
    plantId: mixOrder.plantId,
    mixId: mixOrder.mixId,
    orderedYd3: String(mixOrder.orderedYd3),
    loadYd3: String(mixOrder.loadYd3),
    spacingMin: String(mixOrder.spacingMin),
    during: mixOrder.during,
  };
  if (!kept) {
    await tx
      .insert(mixOrders)
      .values({ companyId: currentCompany, id: newId(), visitId: change.visitId, ...values });
    return;
  }
  const stays =
    kept.during.startMs === values.during.startMs &&
    kept.during.endMs === values.during.endMs &&
    Number(kept.orderedYd3) === mixOrder.orderedYd3;
  await tx
    .update(mixOrders)
    .set({ ...values, ...(stays ? {} : { state: 'drafted' as const }) })
    .where(and(eq(mixOrders.companyId, currentCompany), eq(mixOrders.id, kept.id)));
}

/** Keeps the follow-ups' windows true and makes those that are missing; returns the ids of the new ones. */
async function writeFollowUps(
  tx: Tx,
  { change }: PlannedPlacement,
  of: { visit: VisitRow; zone: string },
): Promise<string[]> {
  const made: string[] = [];
  for (const { kind, window, plannedMin, existingVisitId } of change.followUps) {
    if (existingVisitId !== null) {
      await setVisit(tx, existingVisitId, { window });
      continue;
    }
    const id = newId();
    made.push(id);
    await tx.insert(visits).values({
      companyId: currentCompany,
      id,
      kind,
      siteId: of.visit.siteId,
      title: of.visit.title,
      wantedOn: siteDayOf(window.startMs, of.zone),
      plannedMin,
      window,
      causedByVisitId: of.visit.id,
    });
  }
  return made;
}

async function takeOff(
  tx: Tx,
  of: Acting & {
    visitId: string;
    baseVersion: number;
    kind: string;
    state: 'waiting' | 'called-off';
    reason: string | null;
  },
): Promise<BoardChange> {
  await lockBoard(tx);
  const visit = await visitAt(tx, of.visitId, of.baseVersion);
  if (
    visit.state === 'done' ||
    visit.state === 'called-off' ||
    (visit.state === 'waiting' && of.state === 'waiting')
  )
    throw new Conflict('visit-closed', { state: visit.state });
  const atMs = visit.during?.startMs ?? of.nowMs;
  const index = await indexAround(tx, atMs, [visit.id]);
  const rows = rowsOfVisit(index, visit.id);
  const after = rows
    ? withVisitRows(index, {
        ...rows,
        visit: { ...rows.visit, state: 'waiting', crewId: null, during: null },
        shifts: [],
        offers: [],
        bookings: [],
        mixOrders: [],
      })
    : index;
  const reheld = reheldAfter(index, after, visit.id);
  // Follow-ups that still wait have nothing to follow any more; those that stand on the board are a person's to decide.
  const followUps = await tx
    .select({ id: visits.id })
    .from(visits)
    .where(
      and(
        eq(visits.companyId, currentCompany),
        eq(visits.causedByVisitId, visit.id),
        eq(visits.state, 'waiting'),
      ),
    );
  const touched = [
    ...new Set([visit.id, ...reheld.map(({ visitId }) => visitId), ...followUps.map(({ id }) => id)]),
  ];
  const before = await keepRows(tx, touched);

  const none: KeptRows = { visits: [], shifts: [], offers: [], mixOrders: [], bookings: [], pours: [] };
  await releaseAll(tx, visit.id);
  await setVisit(
    tx,
    visit.id,
    of.state === 'waiting'
      ? { state: 'waiting', crewId: null, during: null, acceptedCodes: [] }
      : { state: 'called-off' },
  );
  if (followUps.length > 0)
    await restoreRows(
      tx,
      none,
      followUps.map(({ id }) => id),
    );
  for (const { shiftId, held } of reheld)
    await tx
      .update(shifts)
      .set({ held })
      .where(and(eq(shifts.companyId, currentCompany), eq(shifts.id, shiftId)));
  await note(tx, of, {
    action: of.kind,
    visitId: visit.id,
    before: { crewId: visit.crewId, during: visit.during, state: visit.state },
    after: { state: of.state },
    reason: of.reason,
  });
  for (const visitId of await toBeTold(tx, [visit.id])) await settle(tx, of, visitId);
  return recordUndoable(tx, of, { kind: of.kind, visitIds: touched, before });
}

async function releaseAll(tx: Tx, visitId: string): Promise<void> {
  const mine = (table: typeof shifts | typeof offers | typeof mixOrders | typeof equipmentBookings) =>
    and(eq(table.companyId, currentCompany), eq(table.visitId, visitId));
  await tx
    .update(shifts)
    .set({ state: 'released' })
    .where(and(mine(shifts), eq(shifts.state, 'held')));
  await tx
    .update(offers)
    .set({ state: 'withdrawn' })
    .where(and(mine(offers), eq(offers.state, 'open')));
  await tx
    .update(mixOrders)
    .set({ state: 'called-off' })
    .where(and(mine(mixOrders), notInArray(mixOrders.state, ['refused', 'called-off'])));
  await tx
    .update(equipmentBookings)
    .set({ state: 'called-off' })
    .where(and(mine(equipmentBookings), notInArray(equipmentBookings.state, ['refused', 'called-off'])));
}

/** Those of the visits that are firm, that someone has been told of, or that wait for their word: people may be owed one. */
async function toBeTold(tx: Tx, visitIds: readonly string[]): Promise<string[]> {
  const rows = await tx
    .select({ id: visits.id })
    .from(visits)
    .where(
      and(
        eq(visits.companyId, currentCompany),
        inArray(visits.id, [...visitIds]),
        sql`(${visits.state} = 'firm'
          or exists (select 1 from ${told} t where t.company_id = ${visits.companyId} and t.visit_id = ${visits.id})
          or exists (select 1 from ${outbox} o where o.company_id = ${visits.companyId} and o.visit_id = ${visits.id} and o.done_at is null))`,
      ),
    );
  return rows.map(({ id }) => id);
}

async function settle(tx: Tx, of: Acting, visitId: string): Promise<void> {
  await leaveWord(tx, { visitId, dueMs: of.nowMs + of.settleSeconds * 1000, createdBy: of.actorId });
}

/** Takes a person's or a pump's time; what the database refuses becomes the finding that the checks would have given. */
async function taking(
  tx: Tx,
  of: {
    kind: 'person' | 'equipment';
    id: string;
    visitId: string;
    during: { startMs: number; endMs: number };
  },
  write: (inner: Tx) => Promise<unknown>,
): Promise<void> {
  try {
    await tx.transaction(async (inner) => {
      await write(inner);
    });
  } catch (error) {
    if (sqlStateOf(error) !== '23P01') throw error;
    throw new Refused('stops', [
      {
        code: of.kind === 'person' ? 'person-overlap' : 'pump-overlap',
        severity: 'stop',
        visitId: of.visitId,
        // What takes the time may be another company's, so only who or what is taken is named.
        against: [{ kind: of.kind, id: of.id }],
        during: of.during,
        facts: {
          takenBy: 'busy',
          fromMs: of.during.startMs,
          untilMs: of.during.endMs,
          travelOnly: false,
          leftOff: false,
        },
        formula: null,
        source: { title: 'Half-open intervals that share time', status: 'arithmetic' },
        clears: [],
      },
    ]);
  }
}

async function note(
  tx: Tx,
  of: Acting,
  entry: { action: string; visitId: string; before?: unknown; after?: unknown; reason?: string | null },
): Promise<void> {
  await tx.insert(audit).values({
    companyId: currentCompany,
    id: newId(),
    at: new Date(of.nowMs),
    actorPersonId: of.actorId,
    action: entry.action,
    subjectKind: 'visit',
    subjectId: entry.visitId,
    before: entry.before ?? null,
    after: entry.after ?? null,
    reason: entry.reason ?? null,
  });
}

const compared = ['crewId', 'during', 'state', 'wantedOn', 'title', 'plannedMin', 'partYd3'] as const;

/** Names of the fields that differ from the version a write was based on; empty when that version is not kept. */
async function changedSince(tx: Tx, visit: VisitRow, baseVersion: number): Promise<string[]> {
  const rows = await tx
    .select({ inverse: boardChanges.inverse })
    .from(boardChanges)
    .where(
      and(
        eq(boardChanges.companyId, currentCompany),
        sql`${boardChanges.visitIds} @> array[${visit.id}]::uuid[]`,
      ),
    )
    .orderBy(desc(boardChanges.revision))
    .limit(50);
  for (const { inverse } of rows) {
    const base = (inverse as unknown as Inverse | null)?.before.visits.find(
      ({ id, version }) => id === visit.id && version === baseVersion,
    );
    if (base) return compared.filter((field) => JSON.stringify(base[field]) !== JSON.stringify(visit[field]));
  }
  return [];
}

function zoneOf(index: BoardIndex, siteId: string): string {
  return index.sites.get(siteId)?.zone ?? index.zone;
}
