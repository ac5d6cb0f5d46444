/** Pours and other visits as they are made, edited and looked into. */

import { fold } from '@strikeboard/domain/intake/text';
import type { VisitKind } from '@strikeboard/domain/vocabulary';
import { and, desc, eq, ne, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { NotFound, StaleVersion } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import {
  audit,
  members,
  notices,
  offers,
  pourSlabs,
  pours,
  shifts,
  sites,
  slabs,
  visits,
} from '../tables/index.ts';
import { type BoardChange, lockBoard, recordBoardChange } from './board-change.ts';
import { writePlacement } from './placement.ts';
import { setVisit } from './placement-rows.ts';
import { columnsOf, naming, type PourFields, partsOf, requirePump } from './pour-fields.ts';
import { readToldState } from './told-state.ts';
import {
  type Acting,
  indexAround,
  noteVisits,
  type Reasons,
  recordUndoable,
  type VisitRow,
} from './visit-changes.ts';
import { keepRows, mergeKept } from './visit-rows.ts';

const IN_FT2_PER_YD3 = 324;

/**
 * Makes a waiting pour with one slab.
 * @throws NotFound for a site, mix or pump that the company has not
 * @throws Conflict `pour-taken` when the site has a pour of that name for that day already
 */
export async function createPour(
  tx: Tx,
  of: Acting & {
    pour: Pick<PourFields, 'name' | 'orderedYd3' | 'finish' | 'placingMethod'> &
      Partial<PourFields> & { siteId: string; areaFt2: number; thicknessIn: number };
  },
): Promise<BoardChange> {
  await lockBoard(tx);
  const { siteId, areaFt2, thicknessIn, wantedOn = null, ...fields } = of.pour;
  await siteOf(tx, siteId);
  await requirePump(tx, fields.pumpId);
  const ids = { pour: newId(), slab: newId(), visit: newId() };
  await naming({ mixId: fields.mixId, pumpId: fields.pumpId, name: fields.name }, () =>
    tx.insert(pours).values({
      companyId: currentCompany,
      id: ids.pour,
      siteId,
      naturalKey: `by-hand|${siteId}|${fold(fields.name)}|${wantedOn ?? ''}`,
      ...columnsOf(fields),
      name: fields.name,
      orderedYd3: String(fields.orderedYd3),
      finish: fields.finish,
      placingMethod: fields.placingMethod,
    }),
  );
  await tx.insert(slabs).values({
    companyId: currentCompany,
    id: ids.slab,
    siteId,
    name: fields.name,
    thicknessIn: String(thicknessIn),
    areaFt2: areaFt2.toFixed(4),
    volumeYd3: ((areaFt2 * thicknessIn) / IN_FT2_PER_YD3).toFixed(4),
  });
  await tx.insert(pourSlabs).values({ companyId: currentCompany, pourId: ids.pour, slabId: ids.slab });
  await tx.insert(visits).values({
    companyId: currentCompany,
    id: ids.visit,
    kind: 'pour',
    siteId,
    pourId: ids.pour,
    partYd3: String(fields.orderedYd3),
    title: fields.name,
    wantedOn,
  });
  await noteVisits(tx, of, [{ action: 'create-pour', visitId: ids.visit, after: { ...of.pour } }]);
  return recordBoardChange(tx, { kind: 'create-pour', actorPersonId: of.actorId, visitIds: [ids.visit] });
}

/** Makes a waiting visit that is no pour. @throws NotFound for a site that the company has not */
export async function createVisit(
  tx: Tx,
  of: Acting & {
    visit: {
      kind: Exclude<VisitKind, 'pour'>;
      siteId: string;
      title: string;
      plannedMin: number;
      wantedOn: string | null;
    };
  },
): Promise<BoardChange> {
  await lockBoard(tx);
  await siteOf(tx, of.visit.siteId);
  const id = newId();
  await tx.insert(visits).values({ companyId: currentCompany, id, ...of.visit });
  await noteVisits(tx, of, [{ action: 'create-visit', visitId: id, after: of.visit }]);
  return recordBoardChange(tx, { kind: 'create-visit', actorPersonId: of.actorId, visitIds: [id] });
}

/**
 * Changes a pour. Where it stands on the board it is planned and checked anew in the same transaction, and refused like
 * a drop would be. Of several visits of one pour the yards are shared as before; what is placed already stays.
 * @throws NotFound for a pour, mix or pump that the company has not
 * @throws StaleVersion when the pour has changed since `baseVersion`
 * @throws Conflict `yards-placed` when more is placed already than the pour is to have
 * @throws Refused as placeVisit does
 */
export async function editPour(
  tx: Tx,
  of: Acting & { pourId: string; baseVersion: number; fields: Partial<PourFields>; reasons: Reasons },
): Promise<BoardChange> {
  await lockBoard(tx);
  const [pour] = await tx
    .select()
    .from(pours)
    .where(and(eq(pours.companyId, currentCompany), eq(pours.id, of.pourId)))
    .for('no key update');
  if (!pour) throw new NotFound('pour', of.pourId);
  if (pour.version !== of.baseVersion) {
    throw new StaleVersion(
      { kind: 'pour', id: pour.id },
      { version: pour.version },
      await pourChangedSince(tx, pour, of.baseVersion),
    );
  }
  const visitRows = await tx
    .select()
    .from(visits)
    .where(
      and(eq(visits.companyId, currentCompany), eq(visits.pourId, pour.id), ne(visits.state, 'called-off')),
    )
    .orderBy(visits.id);
  let before = await keepRows(
    tx,
    visitRows.map(({ id }) => id),
    [pour.id],
  );
  const { wantedOn, ...fields } = of.fields;
  await requirePump(tx, fields.pumpId);
  await naming({ mixId: fields.mixId, pumpId: fields.pumpId, name: fields.name ?? pour.name }, () =>
    tx
      .update(pours)
      .set({ ...columnsOf(fields), version: sql`${pours.version} + 1` })
      .where(and(eq(pours.companyId, currentCompany), eq(pours.id, pour.id))),
  );
  const parts = fields.orderedYd3 === undefined ? null : partsOf(fields.orderedYd3, visitRows);
  for (const visit of visitRows)
    await setVisit(tx, visit.id, {
      ...(wantedOn !== undefined && visit.state !== 'done' && { wantedOn }),
      ...(fields.name !== undefined && { title: fields.name }),
      ...(parts !== null && { partYd3: parts.get(visit.id) }),
    });
  await noteEdit(tx, of, pour, visitRows);

  const touched = new Set(visitRows.map(({ id }) => id));
  for (const visit of visitRows) {
    if (visit.during === null || visit.crewId === null || visit.state === 'done') continue;
    const index = await indexAround(tx, visit.during.startMs, [visit.id]);
    const written = await writePlacement(tx, {
      ...of,
      // A pump chosen anew is the one to book; otherwise the one that is booked stays.
      placement: {
        visitId: visit.id,
        crewId: visit.crewId,
        crewStartMs: visit.during.startMs,
        ...(fields.pumpId !== undefined && { pumpId: fields.pumpId }),
      },
      visit: { ...visit, title: fields.name ?? visit.title },
      index,
    });
    before = mergeKept(before, written.before);
    for (const id of written.visitIds) touched.add(id);
  }
  return recordUndoable(tx, of, { kind: 'edit-pour', visitIds: [...touched], before });
}

export interface VisitDetail {
  people: {
    personId: string;
    name: string;
    role: string;
    state: string;
    answer: 'none' | 'yes' | 'no';
    told: boolean;
  }[];
  notices: {
    id: string;
    personName: string;
    channel: string;
    state: string;
    body: string;
    queuedMs: number;
  }[];
  history: { id: string; atMs: number; actorName: string | null; action: string; reason: string | null }[];
}

/** Who is on a visit and what has happened to it, newest first. @throws NotFound */
export async function visitDetail(tx: Tx, visitId: string): Promise<VisitDetail> {
  const [visit] = await tx
    .select({ id: visits.id })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)));
  if (!visit) throw new NotFound('visit', visitId);
  const member = (personId: typeof shifts.personId | typeof offers.personId | typeof notices.personId) =>
    and(eq(members.companyId, currentCompany), eq(members.personId, personId));
  const shiftRows = await tx
    .select({ shift: shifts, name: members.name, role: members.role })
    .from(shifts)
    .innerJoin(members, member(shifts.personId))
    .where(
      and(
        eq(shifts.companyId, currentCompany),
        eq(shifts.visitId, visitId),
        sql`(${shifts.state} = 'held' or ${shifts.answer} = 'no')`,
      ),
    )
    .orderBy(members.name);
  const offerRows = await tx
    .select({ offer: offers, name: members.name, role: members.role })
    .from(offers)
    .innerJoin(members, member(offers.personId))
    .where(
      and(
        eq(offers.companyId, currentCompany),
        eq(offers.visitId, visitId),
        sql`${offers.state} in ('open', 'declined', 'lapsed')`,
      ),
    )
    .orderBy(members.name);
  const noticeRows = await tx
    .select({ notice: notices, name: members.name })
    .from(notices)
    .innerJoin(members, member(notices.personId))
    .where(and(eq(notices.companyId, currentCompany), eq(notices.visitId, visitId)))
    .orderBy(desc(notices.queuedAt))
    .limit(100);
  const auditRows = await tx
    .select({ entry: audit, name: members.name })
    .from(audit)
    .leftJoin(members, and(eq(members.companyId, audit.companyId), eq(members.personId, audit.actorPersonId)))
    .where(
      and(eq(audit.companyId, currentCompany), eq(audit.subjectKind, 'visit'), eq(audit.subjectId, visitId)),
    )
    .orderBy(desc(audit.id))
    .limit(200);
  const state = await readToldState(tx, [visitId]);
  // A held shift says where a person stands, else the newest of what they were asked (ids grow with time).
  const asked = [
    ...shiftRows.map(({ shift, name, role }) => ({
      rank: shift.state === 'held' ? '~' : shift.id,
      personId: shift.personId,
      name,
      role: role as string,
      state: shift.state as string,
      answer: shift.answer,
      told: state.isTold(shift),
    })),
    ...offerRows.map(({ offer, name, role }) => ({
      rank: offer.id,
      personId: offer.personId,
      name,
      role: role as string,
      state: offer.state as string,
      answer: offer.state === 'declined' ? ('no' as const) : ('none' as const),
      told: state.isTold(offer),
    })),
  ];
  const isLatest = (one: (typeof asked)[number]) =>
    !asked.some((other) => other.personId === one.personId && other.rank > one.rank);
  return {
    people: asked.filter(isLatest).map(({ rank: _, ...person }) => person),
    notices: noticeRows.map(({ notice, name }) => ({
      id: notice.id,
      personName: name,
      channel: notice.channel,
      state: notice.state,
      body: notice.body,
      queuedMs: notice.queuedAt.getTime(),
    })),
    history: auditRows.map(({ entry, name }) => ({
      id: entry.id,
      atMs: entry.at.getTime(),
      actorName: name,
      action: entry.action,
      reason: entry.reason,
    })),
  };
}

async function siteOf(tx: Tx, siteId: string): Promise<void> {
  const [site] = await tx
    .select({ id: sites.id })
    .from(sites)
    .where(and(eq(sites.companyId, currentCompany), eq(sites.id, siteId)));
  if (!site) throw new NotFound('site', siteId);
}

/** An edit stands in the pour's history, where stale edits look, and in that of each of its visits. */
async function noteEdit(
  tx: Tx,
  of: Acting & { fields: Partial<PourFields> },
  pour: typeof pours.$inferSelect,
  visitRows: readonly VisitRow[],
): Promise<void> {
  const was = { ...pour, wantedOn: visitRows[0]?.wantedOn ?? null };
  const before = Object.fromEntries(Object.keys(of.fields).map((key) => [key, was[key as keyof typeof was]]));
  await tx.insert(audit).values({
    companyId: currentCompany,
    id: newId(),
    at: new Date(of.nowMs),
    actorPersonId: of.actorId,
    action: 'edit-pour',
    subjectKind: 'pour',
    subjectId: pour.id,
    before,
    after: of.fields,
  });
  await noteVisits(
    tx,
    of,
    visitRows.map(({ id }) => ({ action: 'edit-pour', visitId: id, before, after: of.fields })),
  );
}

/** Names of the fields that were edited since a version, from the history of edits. */
async function pourChangedSince(
  tx: Tx,
  pour: typeof pours.$inferSelect,
  baseVersion: number,
): Promise<string[]> {
  const rows = await tx
    .select({ after: audit.after })
    .from(audit)
    .where(
      and(eq(audit.companyId, currentCompany), eq(audit.subjectKind, 'pour'), eq(audit.subjectId, pour.id)),
    )
    .orderBy(desc(audit.id))
    .limit(Math.max(1, pour.version - baseVersion));
  return [...new Set(rows.flatMap(({ after }) => Object.keys((after ?? {}) as object)))];
}
