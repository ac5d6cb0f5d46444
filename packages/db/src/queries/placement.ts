/** Moves of visits: each checks again in its own transaction, writes, records the board's change and leaves word. */

import { type BoardIndex, rowsOfVisit, withVisitRows } from '@strikeboard/domain/board-index';
import { visitsOfChange } from '@strikeboard/domain/change-rows';
import { type Finding, type FindingCode, worstSeverity } from '@strikeboard/domain/finding';
import { nearestFit } from '@strikeboard/domain/fit';
import { needsReason, planPlacement, reheldAfter } from '@strikeboard/domain/plan-placement';
import type { Placement } from '@strikeboard/domain/snapshot';
import { and, eq } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound, Refused, sqlStateOf } from '../errors.ts';
import { currentCompany } from '../tables/columns.ts';
import { boardChanges, visits } from '../tables/index.ts';
import { type BoardChange, lockBoard } from './board-change.ts';
import { needlessFollowUps, rehold, setVisit, writePlannedRows } from './placement-rows.ts';
import {
  type Acting,
  changedAfter,
  type Inverse,
  indexAround,
  noteVisits,
  type Reasons,
  recordUndoable,
  settle,
  toBeTold,
  type VisitRow,
  visitAt,
} from './visit-changes.ts';
import { callOffVisits, type KeptRows, keepRows, releaseRows, restoreRows } from './visit-rows.ts';

const NEAREST_SHOWN = 3;

/**
 * Puts a visit on a crew's lane, or moves it there.
 * @throws NotFound for a visit or crew that the company has not
 * @throws StaleVersion when the visit has changed since `baseVersion`
 * @throws Conflict `visit-closed` when it is done or called off
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
  const { before, visitIds, after } = await writePlacement(tx, { ...of, visit, index });
  await noteVisits(tx, of, [
    { action: 'place', visitId: visit.id, before: standing(visit), after: { ...after } },
  ]);
  return recordUndoable(tx, of, { kind: 'place', visitIds, before });
}

/**
 * Writes a placement of a visit that is held and read, keeps the reasons given and leaves word; recording the change
 * is the caller's. Returns the rows as they were and the visits that are touched.
 */
export async function writePlacement(
  tx: Tx,
  of: Acting & { placement: Placement; reasons: Reasons; visit: VisitRow; index: BoardIndex },
): Promise<{ before: KeptRows; visitIds: string[]; after: Pick<VisitRow, 'crewId' | 'state' | 'during'> }> {
  const { visit, index } = of;
  const { change, findings } = planPlacement(index, of.placement, of.nowMs);
  const accepted = acceptedReasons(of, findings);
  const touched = [...visitsOfChange(change), ...needlessFollowUps(index, change)];
  const before = await keepRows(tx, touched);
  const { crewId, state, during } = change.visit;
  await setVisit(tx, visit.id, { crewId, state, during, acceptedCodes: needsReason(findings, []) });
  const zone = index.sites.get(visit.siteId)?.zone ?? index.zone;
  const made = await writePlannedRows(tx, { change, current: before, index, visit, zone });
  await noteVisits(
    tx,
    of,
    accepted.map(([code, reason]) => ({
      action: 'accept-caution',
      visitId: visit.id,
      after: { code },
      reason,
    })),
  );
  if (state === 'firm') await settle(tx, of, visit.id);
  return { before, visitIds: [...touched, ...made], after: { crewId, state, during } };
}

/** Takes a visit off the board: it waits again. Its people are told if they were told of it. @throws as callOff */
export async function returnToWaiting(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number },
): Promise<BoardChange> {
  return takeOff(tx, { ...of, kind: 'wait', reason: null, state: 'waiting' });
}

/**
 * Calls a visit off, with the reason. Its people are told if they were told of it.
 * @throws NotFound, StaleVersion
 * @throws Conflict `visit-closed` when it is off, or done, already
 */
export async function callOff(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number; reason: string },
): Promise<BoardChange> {
  return takeOff(tx, { ...of, kind: 'call-off', state: 'called-off' });
}

/**
 * Makes a pencilled visit firm: its people are told once it has settled.
 * @throws NotFound, StaleVersion
 * @throws Conflict `not-pencilled`
 */
export async function makeFirm(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number },
): Promise<BoardChange> {
  await lockBoard(tx);
  const visit = await visitAt(tx, of.visitId, of.baseVersion);
  if (visit.state !== 'pencilled') throw new Conflict('not-pencilled', { state: visit.state });
  const before = await keepRows(tx, [visit.id]);
  await setVisit(tx, visit.id, { state: 'firm' });
  await noteVisits(tx, of, [
    { action: 'make-firm', visitId: visit.id, before: { state: visit.state }, after: { state: 'firm' } },
  ]);
  await settle(tx, of, visit.id);
  return recordUndoable(tx, of, { kind: 'make-firm', visitIds: [visit.id], before });
}

/**
 * Undoes a change, if nothing that it touched has changed since and not been put back. The undoing is a change like any
 * other, so it can be undone too.
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
  // Written by recordUndoable and by nothing else, so it has the shape.
  const inverse = change.inverse as unknown as Inverse;
  const { visitIds } = change;
  const pourIds = inverse.before.pours.map(({ id }) => id);
  const moved = await changedAfter(tx, { revision: of.revision, visitIds, inverse });
  if (moved) {
    const { kind, id, title } = moved;
    throw new Conflict('changed-since', { ...(kind === 'visit' ? { visitId: id } : { pourId: id }), title });
  }
  const before = await keepRows(tx, visitIds, pourIds);
  try {
    await tx.transaction((inner) => restoreRows(inner, inverse.before, visitIds));
  } catch (error) {
    if (sqlStateOf(error) !== '23P01') throw error;
    throw new Conflict('time-taken', { constraint: constraintOf(error) });
  }
  await noteVisits(
    tx,
    of,
    visitIds.map((visitId) => ({
      action: 'undo',
      visitId,
      before: { revision: of.revision },
      after: { kind: change.kind },
    })),
  );
  const after = await keepRows(tx, visitIds, pourIds);
  const concerned = visitIds.filter((id) => whatIsTold(before, id) !== whatIsTold(after, id));
  for (const visitId of await toBeTold(tx, concerned)) await settle(tx, of, visitId);
  const back = [...inverse.before.visits, ...inverse.before.pours];
  return recordUndoable(tx, of, {
    ...{ kind: 'undo', visitIds, before, undoes: of.revision },
    backAt: Object.fromEntries(back.map(({ id, version }) => [id, version])),
  });
}

/** All of a visit's rows that its people may be told of, as text to compare. */
function whatIsTold(rows: KeptRows, visitId: string): string {
  const visit = rows.visits.find(({ id }) => id === visitId);
  const pour = rows.pours.find(({ id }) => id === visit?.pourId);
  const people = [...rows.shifts, ...rows.offers]
    .filter((row) => row.visitId === visitId && (row.state === 'held' || row.state === 'open'))
    .map(({ personId, state, during }) => `${personId} ${state} ${during.startMs}`);
  const { version: _, ...ofPour } = pour ?? { version: 0 };
  return JSON.stringify([
    visit && [visit.state, visit.crewId, visit.during?.startMs, visit.title, visit.partYd3],
    ofPour,
    people.toSorted(),
  ]);
}

const standing = ({ crewId, during, state }: VisitRow) => ({ crewId, during, state });

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
  if (visit.state === 'done' || visit.state === 'called-off' || visit.state === of.state)
    throw new Conflict('visit-closed', { state: visit.state });
  const index = await indexAround(tx, visit.during?.startMs ?? of.nowMs, [visit.id]);
  const rows = rowsOfVisit(index, visit.id);
  const without = rows && {
    ...rows,
    visit: { ...rows.visit, state: 'waiting' as const, crewId: null, during: null },
    ...{ shifts: [], offers: [], bookings: [], mixOrders: [] },
  };
  const reheld = without ? reheldAfter(index, withVisitRows(index, without), visit.id) : [];
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
  const followUpIds = followUps.map(({ id }) => id);
  const touched = [...new Set([visit.id, ...reheld.map(({ visitId }) => visitId), ...followUpIds])];
  const before = await keepRows(tx, touched);
  await releaseRows(tx, [visit.id]);
  await setVisit(
    tx,
    visit.id,
    of.state === 'waiting'
      ? { state: 'waiting', crewId: null, during: null, acceptedCodes: [] }
      : { state: 'called-off' },
  );
  await callOffVisits(tx, followUpIds);
  await rehold(tx, reheld);
  await noteVisits(tx, of, [
    {
      action: of.kind,
      visitId: visit.id,
      before: standing(visit),
      after: { state: of.state },
      reason: of.reason,
    },
  ]);
  for (const visitId of await toBeTold(tx, [visit.id])) await settle(tx, of, visitId);
  return recordUndoable(tx, of, { kind: of.kind, visitIds: touched, before });
}
