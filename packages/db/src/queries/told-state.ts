import type { Visit } from '@strikeboard/domain/snapshot';
import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { currentCompany } from '../tables/columns.ts';
import { outbox, type shifts, told, type visits } from '../tables/index.ts';
import { toVisit } from './snapshot-rows.ts';

/** What has been told of some visits, and what is still to be told of any. */
export interface ToldState {
  /** Visits with a change that nobody has been told of yet. */
  readonly untold: ReadonlySet<string>;
  /** Whether the person was last told of the shift at the start that it has. */
  isTold(shift: Pick<typeof shifts.$inferSelect, 'visitId' | 'personId' | 'during'>): boolean;
}

/** Reads what is left to tell in the company, and what the people of the given visits were told. */
export async function readToldState(tx: Tx, visitIds: readonly string[]): Promise<ToldState> {
  const pending = await tx
    .selectDistinct({ visitId: outbox.visitId })
    .from(outbox)
    .where(and(eq(outbox.companyId, currentCompany), isNull(outbox.doneAt)));
  const untold = new Set(pending.map(({ visitId }) => visitId));
  if (visitIds.length === 0) return { untold, isTold: () => false };
  const rows = await tx
    .select({
      visitId: told.visitId,
      personId: told.personId,
      crewStartMs: sql<string>`${told.facts} ->> 'crewStartMs'`,
      calledOff: sql<boolean>`(${told.facts} ->> 'calledOff')::boolean`,
    })
    .from(told)
    .where(and(eq(told.companyId, currentCompany), inArray(told.visitId, [...visitIds])));
  const starts = new Map(
    rows.map((row) => [`${row.visitId} ${row.personId}`, row.calledOff ? null : Number(row.crewStartMs)]),
  );
  return {
    untold,
    isTold: ({ visitId, personId, during }) => starts.get(`${visitId} ${personId}`) === during.startMs,
  };
}

/** A visit with what is known of its telling. */
export function toldVisit(row: typeof visits.$inferSelect, state: ToldState): Visit {
  return toVisit(row, state.untold.has(row.id));
}
