/** What every change of a visit shares: who acts, history, telling, versions, and what undo needs. */

import { type BoardIndex, indexSnapshot } from '@strikeboard/domain/board-index';
import type { FindingCode } from '@strikeboard/domain/finding';
import type { Interval } from '@strikeboard/domain/interval';
import { and, desc, eq, gt, inArray, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { NotFound, StaleVersion } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { audit, boardChanges, companies, outbox, pours, told, visits } from '../tables/index.ts';
import { readSnapshot } from './board.ts';
import { type BoardChange, leaveWord, recordBoardChange } from './board-change.ts';
import type { KeptRows } from './visit-rows.ts';

const DAY_MS = 86_400_000;
/** Days before a placement that its checks may look at. */
const LOOK_DAYS = 8;
/** Days ahead in which another slot is looked for when a stop refuses the one that was asked for. */
const FIT_DAYS = 14;
/** Changes of the company in which the version that a stale write was based on is looked for. */
const STALE_LOOK = 2000;
/** Undoings through which a change is followed back. */
const UNDO_LOOK = 100;

export type VisitRow = typeof visits.$inferSelect;

/** Who acts, when, and how long a change settles before people are told. */
export interface Acting {
  actorId: string | null;
  nowMs: number;
  settleSeconds: number;
}

/** Reasons given for cautions, by finding code. */
export type Reasons = Partial<Record<FindingCode, string>>;

/** What undo puts back, kept beside a change as JSON. */
export interface Inverse {
  before: KeptRows;
  /** Version of each visit, and of each pour that was changed too, right after the change. */
  versions: Record<string, number>;
  /** Of an undoing: the version that each row is back at but for its number. */
  backAt?: Record<string, number>;
}

/** Holds a visit for this transaction. @throws NotFound, StaleVersion unless it is at `baseVersion` */
export async function visitAt(tx: Tx, visitId: string, baseVersion: number): Promise<VisitRow> {
  const [visit] = await tx
    .select()
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)))
    .for('no key update');
  if (!visit) throw new NotFound('visit', visitId);
  if (visit.version === baseVersion) return visit;
  throw new StaleVersion(
    { kind: 'visit', id: visitId },
    { version: visit.version, crewId: visit.crewId, during: visit.during, state: visit.state },
    await changedSince(tx, visit, baseVersion),
  );
}

/**
 * The board as a placement's checks, and the search for another slot, need it: some days around an instant, with the
 * named visits and what they have caused, wherever those stand.
 */
export async function indexAround(tx: Tx, atMs: number, visitIds: readonly string[]): Promise<BoardIndex> {
  const range = { startMs: atMs - LOOK_DAYS * DAY_MS, endMs: atMs + FIT_DAYS * DAY_MS };
  const caused = await tx
    .select({ id: visits.id })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.causedByVisitId, [...visitIds])));
  return indexSnapshot(
    await readSnapshot(tx, { range, visitIds: [...visitIds, ...caused.map(({ id }) => id)] }),
  );
}

/** Records a change with what undo needs. */
export async function recordUndoable(
  tx: Tx,
  of: Acting,
  change: {
    kind: string;
    visitIds: readonly string[];
    before: KeptRows;
    undoes?: number;
    backAt?: Record<string, number>;
  },
): Promise<BoardChange> {
  const versions = await versionsOf(tx, {
    visitIds: change.visitIds,
    pourIds: change.before.pours.map(({ id }) => id),
  });
  const inverse: Inverse = {
    before: change.before,
    versions: Object.fromEntries(versions.map(({ id, version }) => [id, version])),
    ...(change.backAt && { backAt: change.backAt }),
  };
  return recordBoardChange(tx, {
    kind: change.kind,
    actorPersonId: of.actorId,
    visitIds: change.visitIds,
    inverse: { ...inverse },
    undoes: change.undoes,
  });
}

/**
 * The first visit or pour of a change that has changed since; null when all stand as the change left them. What was
 * changed and undone stands as it did.
 */
export async function changedAfter(
  tx: Tx,
  of: { revision: number; visitIds: readonly string[]; inverse: Inverse },
): Promise<{ kind: 'visit' | 'pour'; id: string; title: string } | null> {
  const pourIds = of.inverse.before.pours.map(({ id }) => id);
  const rows = await versionsOf(tx, { visitIds: of.visitIds, pourIds });
  const moved = rows.filter(({ id, version }) => of.inverse.versions[id] !== version);
  if (moved.length === 0) return null;
  const undoings = await tx
    .select({ inverse: boardChanges.inverse })
    .from(boardChanges)
    .where(
      and(
        eq(boardChanges.companyId, currentCompany),
        gt(boardChanges.revision, of.revision),
        eq(boardChanges.kind, 'undo'),
      ),
    )
    .orderBy(desc(boardChanges.revision))
    .limit(UNDO_LOOK);
  return (
    moved.find(({ id, version }) => {
      let standsAt: number | undefined = version;
      for (const { inverse } of undoings) {
        // Written by recordUndoable and by nothing else, so it has the shape.
        const { versions, backAt } = inverse as unknown as Inverse;
        if (versions[id] === standsAt) standsAt = backAt?.[id];
      }
      return standsAt !== of.inverse.versions[id];
    }) ?? null
  );
}

/** Versions of visits and pours as they are now. */
async function versionsOf(
  tx: Tx,
  of: { visitIds: readonly string[]; pourIds: readonly string[] },
): Promise<{ kind: 'visit' | 'pour'; id: string; version: number; title: string }[]> {
  const visitRows = await tx
    .select({ id: visits.id, version: visits.version, title: visits.title })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), inArray(visits.id, [...of.visitIds])));
  const pourRows =
    of.pourIds.length === 0
      ? []
      : await tx
          .select({ id: pours.id, version: pours.version, title: pours.name })
          .from(pours)
          .where(and(eq(pours.companyId, currentCompany), inArray(pours.id, [...of.pourIds])));
  return [
    ...visitRows.map((row) => ({ kind: 'visit' as const, ...row })),
    ...pourRows.map((row) => ({ kind: 'pour' as const, ...row })),
  ];
}

/** One line of a visit's history. */
export interface VisitNote {
  action: string;
  visitId: string;
  before?: unknown;
  after?: unknown;
  reason?: string | null;
}

/** Appends to the history of visits. */
export async function noteVisits(
  tx: Tx,
  of: Pick<Acting, 'actorId' | 'nowMs'>,
  entries: readonly VisitNote[],
): Promise<void> {
  if (entries.length === 0) return;
  await tx.insert(audit).values(
    entries.map((entry) => ({
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
    })),
  );
}

/** Leaves word of a visit, due when the change has settled. */
export async function settle(tx: Tx, of: Acting, visitId: string): Promise<void> {
  await leaveWord(tx, { visitId, dueMs: of.nowMs + of.settleSeconds * 1000, createdBy: of.actorId });
}

/** Those of the visits that are firm, that someone was told of, or that wait for their word: people may be owed one. */
export async function toBeTold(tx: Tx, visitIds: readonly string[]): Promise<string[]> {
  if (visitIds.length === 0) return [];
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

const compared = ['crewId', 'during', 'state', 'wantedOn', 'title', 'plannedMin', 'partYd3'] as const;

/** Names of the fields that differ from the version a write was based on; empty when that version is not found. */
async function changedSince(tx: Tx, visit: VisitRow, baseVersion: number): Promise<string[]> {
  const rows = await tx
    .select({ inverse: boardChanges.inverse })
    .from(boardChanges)
    .where(
      and(
        eq(boardChanges.companyId, currentCompany),
        sql`${boardChanges.revision} > (select c.revision - ${STALE_LOOK} from ${companies} c where c.id = ${currentCompany})`,
        sql`${boardChanges.visitIds} @> array[${visit.id}]::uuid[]`,
      ),
    )
    .orderBy(desc(boardChanges.revision))
    .limit(50);
  for (const { inverse } of rows) {
    // Written by recordUndoable and by nothing else, so it has the shape.
    const base = (inverse as unknown as Inverse | null)?.before.visits.find(
      ({ id, version }) => id === visit.id && version === baseVersion,
    );
    if (base) return compared.filter((field) => !isSame(base[field], visit[field]));
  }
  return [];
}

/** Whether two values of a column are the same; of ranges, whatever the order of their keys in JSON. */
function isSame(one: string | number | Interval | null, other: string | number | Interval | null): boolean {
  if (one === null || other === null || typeof one !== 'object' || typeof other !== 'object')
    return one === other;
  return one.startMs === other.startMs && one.endMs === other.endMs;
}
