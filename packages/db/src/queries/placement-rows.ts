/** The rows that a placement writes: shifts, offers, the pump, the mix order and the follow-ups. */

import type { BoardIndex } from '@strikeboard/domain/board-index';
import type { Finding } from '@strikeboard/domain/finding';
import type { Interval } from '@strikeboard/domain/interval';
import type { PlannedChange, PlannedShift, Reheld } from '@strikeboard/domain/plan-placement';
import type { Visit } from '@strikeboard/domain/snapshot';
import { siteDayOf } from '@strikeboard/domain/zone';
import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Refused, sqlStateOf } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { equipmentBookings, mixOrders, offers, shifts, visits } from '../tables/index.ts';
import type { KeptRows } from './visit-rows.ts';

type VisitRow = typeof visits.$inferSelect;
type ShiftRow = KeptRows['shifts'][number];

/** Changes a visit and makes its version grow. */
export async function setVisit(
  tx: Tx,
  visitId: string,
  values: Partial<
    Pick<
      VisitRow,
      'crewId' | 'state' | 'during' | 'acceptedCodes' | 'window' | 'wantedOn' | 'title' | 'partYd3'
    >
  >,
): Promise<void> {
  await tx
    .update(visits)
    .set({ ...values, version: sql`${visits.version} + 1` })
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)));
}

/**
 * Writes all but the visit itself; `current` holds its rows as they are. Returns the ids of the follow-ups it makes.
 * @throws Refused when a person's or the pump's time was taken by something that the checks could not see
 */
export async function writePlannedRows(
  tx: Tx,
  of: { change: PlannedChange; current: KeptRows; index: BoardIndex; visit: VisitRow; zone: string },
): Promise<string[]> {
  await writeShifts(tx, of.change, of.current);
  await writeOffers(tx, of.change, of.current);
  await writeBooking(tx, of.change, of.current);
  await writeMixOrder(tx, of.change, of.current);
  return writeFollowUps(tx, of);
}

/** Ids of the waiting saw and strip visits that a change of the pour leaves without a reason. */
export function needlessFollowUps(index: BoardIndex, change: PlannedChange): string[] {
  const wanted = new Set<Visit['kind']>(change.followUps.map(({ kind }) => kind));
  return (index.followUps.get(change.visitId) ?? [])
    .filter(
      ({ kind, state }) => state === 'waiting' && (kind === 'saw' || kind === 'strip') && !wanted.has(kind),
    )
    .map(({ id }) => id);
}

/**
 * Sets the held time of other visits' shifts, where the way to them has changed. One whose new time is taken, in
 * another company, keeps the time that it had: this visit is not the one to blame.
 */
export async function rehold(tx: Tx, reheld: readonly Reheld[]): Promise<void> {
  for (const { shiftId, held } of reheld)
    await fits(tx, (inner) =>
      inner
        .update(shifts)
        .set({ held })
        .where(and(eq(shifts.companyId, currentCompany), eq(shifts.id, shiftId))),
    );
}

async function writeShifts(tx: Tx, change: PlannedChange, current: KeptRows): Promise<void> {
  const mine = current.shifts.filter((row) => row.visitId === change.visitId && row.state === 'held');
  // Gives way first, so that nothing stands in two places in between, whichever way the visit moves.
  await setStates(
    tx,
    shifts,
    mine.map(({ id }) => id),
    'released',
  );
  await rehold(tx, change.reheld);
  const wanted = change.shifts.map((planned) => ({
    planned,
    row: mine.find(({ personId }) => personId === planned.personId),
  }));
  const write = (inner: Tx, some: typeof wanted) => writeHeld(inner, change.visitId, some);
  if (wanted.length === 0 || (await fits(tx, (inner) => write(inner, wanted)))) return;
  // One by one, to say whose time it is.
  for (const one of wanted) {
    if (await fits(tx, (inner) => write(inner, [one]))) continue;
    throw taken({
      kind: 'person',
      id: one.planned.personId,
      visitId: change.visitId,
      during: one.planned.held,
    });
  }
}

async function writeHeld(
  tx: Tx,
  visitId: string,
  wanted: readonly { planned: PlannedShift; row: ShiftRow | undefined }[],
): Promise<void> {
  const kept = new Map<string, { ids: string[]; planned: PlannedShift; stays: boolean }>();
  const added: PlannedShift[] = [];
  for (const { planned, row } of wanted) {
    if (!row) {
      added.push(planned);
      continue;
    }
    // Everyone on a visit has the same hours, so this is one statement, or two.
    const stays = isSame(row.during, planned.during);
    const key = JSON.stringify([planned.during, planned.held, stays]);
    const group = kept.get(key);
    if (group) group.ids.push(row.id);
    else kept.set(key, { ids: [row.id], planned, stays });
  }
  for (const { ids, planned, stays } of kept.values()) {
    const { during, held } = planned;
    const anew = stays ? {} : { answer: 'none' as const, answeredAt: null };
    await tx
      .update(shifts)
      .set({ state: 'held', during, held, ...anew })
      .where(and(eq(shifts.companyId, currentCompany), inArray(shifts.id, ids)));
  }
  if (added.length > 0)
    await tx
      .insert(shifts)
      .values(added.map((planned) => ({ companyId: currentCompany, id: newId(), visitId, ...planned })));
}

async function writeOffers(tx: Tx, change: PlannedChange, current: KeptRows): Promise<void> {
  const open = current.offers.filter((row) => row.visitId === change.visitId && row.state === 'open');
  const isFor = (row: (typeof open)[number], { personId, during }: PlannedShift) =>
    personId === row.personId && isSame(during, row.during);
  await setStates(
    tx,
    offers,
    open.filter((row) => !change.offers.some((planned) => isFor(row, planned))).map(({ id }) => id),
    'withdrawn',
  );
  const added: PlannedShift[] = [];
  for (const planned of change.offers) {
    const row = open.find((one) => isFor(one, planned));
    if (!row) added.push(planned);
    else if (!isSame(row.held, planned.held))
      await tx
        .update(offers)
        .set({ held: planned.held })
        .where(and(eq(offers.companyId, currentCompany), eq(offers.id, row.id)));
  }
  if (added.length > 0)
    await tx.insert(offers).values(
      added.map((planned) => ({
        companyId: currentCompany,
        id: newId(),
        visitId: change.visitId,
        ...planned,
      })),
    );
}

const isLive = ({ state }: { state: string }): boolean => state !== 'refused' && state !== 'called-off';

async function writeBooking(tx: Tx, { visitId, booking }: PlannedChange, current: KeptRows): Promise<void> {
  const live = current.bookings.filter((row) => row.visitId === visitId && isLive(row));
  const kept = live.find((row) => row.equipmentId === booking?.equipmentId);
  const others = live.filter((row) => row !== kept).map(({ id }) => id);
  if (others.length > 0) {
    await tx
      .update(equipmentBookings)
      .set({ state: 'called-off' })
      .where(
        and(
          eq(equipmentBookings.companyId, currentCompany),
          inArray(equipmentBookings.id, others),
          // Other equipment than pumps is not planned by a placement and stays booked.
          sql`exists (select 1 from equipment e where e.company_id = ${equipmentBookings.companyId} and e.id = ${equipmentBookings.equipmentId} and e.kind = 'pump')`,
        ),
      );
  }
  if (!booking) return;
  const { equipmentId, during, held } = booking;
  const anew = kept && isSame(kept.during, during) ? {} : { state: 'drafted' as const };
  const isFree = await fits(tx, (inner) =>
    kept
      ? inner
          .update(equipmentBookings)
          .set({ during, held, ...anew })
          .where(and(eq(equipmentBookings.companyId, currentCompany), eq(equipmentBookings.id, kept.id)))
      : inner
          .insert(equipmentBookings)
          .values({ companyId: currentCompany, id: newId(), visitId, equipmentId, during, held }),
  );
  if (!isFree) throw taken({ kind: 'equipment', id: equipmentId, visitId, during: held });
}

async function writeMixOrder(tx: Tx, { visitId, mixOrder }: PlannedChange, current: KeptRows): Promise<void> {
  const live = current.mixOrders.filter((row) => row.visitId === visitId && isLive(row));
  const kept = live.find((row) => row.plantId === mixOrder?.plantId && row.mixId === mixOrder.mixId);
  await setStates(
    tx,
    mixOrders,
    live.filter((row) => row !== kept).map(({ id }) => id),
    'called-off',
  );
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
    await tx.insert(mixOrders).values({ companyId: currentCompany, id: newId(), visitId, ...values });
    return;
  }
  const stays =
    isSame(kept.during, mixOrder.during) &&
    Number(kept.orderedYd3) === mixOrder.orderedYd3 &&
    Number(kept.loadYd3) === mixOrder.loadYd3 &&
    Number(kept.spacingMin) === mixOrder.spacingMin;
  await tx
    .update(mixOrders)
    .set({ ...values, ...(stays ? {} : { state: 'drafted' as const }) })
    .where(and(eq(mixOrders.companyId, currentCompany), eq(mixOrders.id, kept.id)));
}

/** Keeps the follow-ups' windows true, calls off those without a reason and makes those that are missing. */
async function writeFollowUps(
  tx: Tx,
  of: { change: PlannedChange; current: KeptRows; index: BoardIndex; visit: VisitRow; zone: string },
): Promise<string[]> {
  for (const id of needlessFollowUps(of.index, of.change)) await setVisit(tx, id, { state: 'called-off' });
  const added: (typeof visits.$inferInsert & { id: string })[] = [];
  for (const { kind, window, plannedMin, existingVisitId } of of.change.followUps) {
    const wantedOn = siteDayOf(window.startMs, of.zone);
    const existing = of.current.visits.find(({ id }) => id === existingVisitId);
    if (existing) {
      if (existing.window === null || !isSame(existing.window, window))
        await setVisit(tx, existing.id, { window, ...(existing.state === 'waiting' && { wantedOn }) });
      continue;
    }
    added.push({
      companyId: of.visit.companyId,
      id: newId(),
      kind,
      siteId: of.visit.siteId,
      title: of.visit.title,
      wantedOn,
      plannedMin,
      window,
      causedByVisitId: of.visit.id,
    });
  }
  if (added.length > 0) await tx.insert(visits).values(added);
  return added.map(({ id }) => id);
}

async function setStates<T extends typeof shifts | typeof offers | typeof mixOrders>(
  tx: Tx,
  table: T,
  ids: readonly string[],
  state: T['$inferSelect']['state'],
): Promise<void> {
  if (ids.length === 0) return;
  const isOne = and(eq(table.companyId, currentCompany), inArray(table.id, [...ids]));
  await tx.execute(sql`update ${table} set state = ${state} where ${isOne}`);
}

/** Tries a write that takes time; false, and as if it had not been, where the time is taken. */
export async function fits(tx: Tx, write: (inner: Tx) => Promise<unknown>): Promise<boolean> {
  try {
    await tx.transaction(async (inner) => {
      await write(inner);
    });
    return true;
  } catch (error) {
    if (sqlStateOf(error) === '23P01') return false;
    throw error;
  }
}

/** What the database refuses becomes the finding that the checks would have given. */
function taken(of: { kind: 'person' | 'equipment'; id: string; visitId: string; during: Interval }): Refused {
  const finding: Finding = {
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
  };
  return new Refused('stops', [finding]);
}

function isSame(one: Interval, other: Interval): boolean {
  return one.startMs === other.startMs && one.endMs === other.endMs;
}
