import { and, eq, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { audit, visits } from '../tables/index.ts';
import { type BoardChange, lockBoard, recordBoardChange } from './board-change.ts';
import { type Acting, visitAt } from './visit-changes.ts';

/**
 * Closes a visit that is over: it is done.
 * @throws NotFound, StaleVersion
 * @throws Conflict `not-over` while it has not ended, `visit-closed` when it does not stand on the board
 */
export async function closeVisit(
  tx: Tx,
  of: Acting & { visitId: string; baseVersion: number },
): Promise<BoardChange> {
  await lockBoard(tx);
  const visit = await visitAt(tx, of.visitId, of.baseVersion);
  if (visit.during === null || (visit.state !== 'firm' && visit.state !== 'pencilled'))
    throw new Conflict('visit-closed', { state: visit.state });
  if (visit.during.endMs > of.nowMs) throw new Conflict('not-over', { endMs: visit.during.endMs });
  await tx
    .update(visits)
    .set({ state: 'done', version: sql`${visits.version} + 1` })
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visit.id)));
  await tx.insert(audit).values({
    companyId: currentCompany,
    id: newId(),
    at: new Date(of.nowMs),
    actorPersonId: of.actorId,
    action: 'close',
    subjectKind: 'visit',
    subjectId: visit.id,
    before: { state: visit.state },
    after: { state: 'done' },
  });
  return recordBoardChange(tx, { kind: 'close', actorPersonId: of.actorId, visitIds: [visit.id] });
}
