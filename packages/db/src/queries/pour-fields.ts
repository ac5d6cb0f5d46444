/** What can be set of a pour, as columns; the yards of its visits; and what may be wrong with either. */

import type { Finish, Jointing, PlacingMethod } from '@strikeboard/domain/vocabulary';
import { and, eq } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound } from '../errors.ts';
import { currentCompany } from '../tables/columns.ts';
import { equipment } from '../tables/index.ts';
import type { VisitRow } from './visit-changes.ts';

/** What can be set of a pour. Yards are yd³, temperatures °F, times minutes; null falls back to the company's rule. */
export interface PourFields {
  name: string;
  jobRef: string | null;
  orderedYd3: number;
  mixId: string | null;
  finish: Finish;
  placingMethod: PlacingMethod;
  jointing: Jointing;
  placingRateYd3PerHour: number | null;
  loadYd3: number | null;
  setUpMin: number | null;
  concreteTempF: number | null;
  peopleToPlace: number | null;
  peopleToFinish: number | null;
  pumpId: string | null;
  willCall: boolean;
  readiness: { item: string; done: boolean }[];
  notes: string | null;
  /** Day that the customer wants it, in the site's zone. */
  wantedOn: string | null;
}

const text = (value: number | null | undefined) =>
  value === undefined ? undefined : value === null ? null : String(value);

/** Given fields as columns; what is not given is left out. */
export function columnsOf(fields: Partial<Omit<PourFields, 'wantedOn'>>) {
  return {
    name: fields.name,
    jobRef: fields.jobRef,
    orderedYd3: fields.orderedYd3 === undefined ? undefined : String(fields.orderedYd3),
    mixId: fields.mixId,
    finish: fields.finish,
    placingMethod: fields.placingMethod,
    jointing: fields.jointing,
    placingRateYd3PerHour: text(fields.placingRateYd3PerHour),
    loadYd3: text(fields.loadYd3),
    setUpMin: fields.setUpMin,
    concreteTempF: text(fields.concreteTempF),
    peopleToPlace: fields.peopleToPlace,
    peopleToFinish: fields.peopleToFinish,
    pumpId: fields.pumpId,
    willCall: fields.willCall,
    readiness: fields.readiness,
    notes: fields.notes,
  };
}

/**
 * Yards of each visit of a pour, in thousandths and exact: those that are not done share what is left in the
 * proportion that they had. When all are done the order is put right after the fact, and all share it.
 * @throws Conflict `yards-placed` when nothing would be left for those that are to come
 */
export function partsOf(orderedYd3: number, visitRows: readonly VisitRow[]): Map<string, string> {
  const thousandths = (yd3: string | null): number => Math.round(Number(yd3 ?? 0) * 1000);
  const open = visitRows.filter(({ state }) => state !== 'done');
  const sharing = open.length > 0 ? open : visitRows;
  const parts = new Map(visitRows.map(({ id, partYd3 }) => [id, thousandths(partYd3)]));
  const before = sharing.reduce((sum, { id }) => sum + (parts.get(id) ?? 0), 0);
  const placed = [...parts.values()].reduce((sum, part) => sum + part, 0) - before;
  const toShare = Math.round(orderedYd3 * 1000) - placed;
  if (toShare < sharing.length) throw new Conflict('yards-placed', { placedYd3: placed / 1000 });
  let left = toShare;
  sharing.forEach(({ id }, at) => {
    const part =
      at === sharing.length - 1 ? left : Math.max(1, Math.floor((toShare * (parts.get(id) ?? 0)) / before));
    parts.set(id, part);
    left -= part;
  });
  return new Map([...parts].map(([id, part]) => [id, (part / 1000).toFixed(3)]));
}

/** @throws NotFound for a pump that the company has not */
export async function requirePump(tx: Tx, pumpId: string | null | undefined): Promise<void> {
  if (pumpId === null || pumpId === undefined) return;
  const rows = await tx
    .select({ id: equipment.id })
    .from(equipment)
    .where(
      and(eq(equipment.companyId, currentCompany), eq(equipment.id, pumpId), eq(equipment.kind, 'pump')),
    );
  if (rows.length === 0) throw new NotFound('pump', pumpId);
}

/** Words what the database refuses of a pour's references. */
export async function naming(
  of: { mixId?: string | null; pumpId?: string | null; name: string },
  write: () => Promise<unknown>,
): Promise<void> {
  try {
    await write();
  } catch (error) {
    const constraint = constraintOf(error);
    if (constraint === 'pours_mix_fk') throw new NotFound('mix', of.mixId ?? '');
    if (constraint === 'pours_pump_fk') throw new NotFound('pump', of.pumpId ?? '');
    if (constraint === 'pours_natural_key') throw new Conflict('pour-taken', { name: of.name });
    throw error;
  }
}
