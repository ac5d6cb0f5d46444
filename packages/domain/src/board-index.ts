/** A snapshot, looked up: made once per snapshot, and again only for what a change touches. */

import type { CompanyRules } from './company-rules.ts';
import { type Interval, overlaps } from './interval.ts';
import type {
  Booking,
  BusyTime,
  Crew,
  CrewMembership,
  Equipment,
  Mix,
  MixOrder,
  Offer,
  Person,
  Plant,
  Pour,
  Shift,
  Site,
  Slab,
  Snapshot,
  Visit,
  WeatherHour,
} from './snapshot.ts';
import type { OrderState } from './vocabulary.ts';

/** A visit that takes a crew's time. */
export type PlacedVisit = Visit & { readonly crewId: string; readonly during: Interval };

type ById<T> = ReadonlyMap<string, T>;
type Lists<T> = ReadonlyMap<string, readonly T[]>;

export interface BoardIndex {
  readonly companyId: string;
  /** Zone of the company's office. */
  readonly zone: string;
  readonly range: Interval;
  readonly rules: CompanyRules;
  readonly crews: ById<Crew>;
  readonly people: ById<Person>;
  readonly sites: ById<Site>;
  readonly slabs: ById<Slab>;
  readonly pours: ById<Pour>;
  readonly plants: ById<Plant>;
  readonly mixes: ById<Mix>;
  readonly equipment: ById<Equipment>;
  /** By name. */
  readonly pumps: readonly Equipment[];
  readonly membershipsByCrew: Lists<CrewMembership>;
  readonly busyByPerson: Lists<BusyTime>;
  /** By hour. */
  readonly weatherBySite: Lists<WeatherHour>;
  readonly visits: ById<Visit>;
  /** Placed visits (pencilled, firm, done) by start. */
  readonly visitsByCrew: Lists<PlacedVisit>;
  readonly visitsBySite: Lists<PlacedVisit>;
  /** Visits that a pour causes, called-off ones left out, by the id of the causing visit. */
  readonly followUps: Lists<Visit>;
  readonly shiftsByVisit: Lists<Shift>;
  /** Held ones by start of the held time. */
  readonly heldByPerson: Lists<Shift>;
  readonly offersByVisit: Lists<Offer>;
  readonly bookingsByVisit: Lists<Booking>;
  /** Those that hold the piece, by start of the held time. */
  readonly bookingsByEquipment: Lists<Booking>;
  readonly ordersByVisit: Lists<MixOrder>;
  /** Those that take the plant's yards, by start. */
  readonly ordersByPlant: Lists<MixOrder>;
}

/** One visit with every row that hangs on it. */
export interface VisitRows {
  readonly visit: Visit;
  readonly shifts: readonly Shift[];
  readonly offers: readonly Offer[];
  readonly bookings: readonly Booking[];
  readonly mixOrders: readonly MixOrder[];
}

/** Whether the visit stands on a lane. */
export function isPlaced(visit: Visit): visit is PlacedVisit {
  return (
    visit.crewId !== null &&
    visit.during !== null &&
    (visit.state === 'pencilled' || visit.state === 'firm' || visit.state === 'done')
  );
}

/** Whether an order or booking still takes the plant's or the pump's time. */
export function isActive(state: OrderState): boolean {
  return state !== 'refused' && state !== 'called-off';
}

/** Looks a snapshot up. About a millisecond for a thousand visits. */
export function indexSnapshot(snapshot: Snapshot): BoardIndex {
  const placed = snapshot.visits.filter(isPlaced);
  return {
    companyId: snapshot.companyId,
    zone: snapshot.zone,
    range: snapshot.range,
    rules: snapshot.rules,
    crews: byId(snapshot.crews),
    people: byId(snapshot.people),
    sites: byId(snapshot.sites),
    slabs: byId(snapshot.slabs),
    pours: byId(snapshot.pours),
    plants: byId(snapshot.plants),
    mixes: byId(snapshot.mixes),
    equipment: byId(snapshot.equipment),
    pumps: snapshot.equipment
      .filter((piece) => piece.kind === 'pump')
      .sort((a, b) => compareText(a.name, b.name) || compareText(a.id, b.id)),
    membershipsByCrew: listsBy(snapshot.memberships, (row) => row.crewId),
    busyByPerson: listsBy(snapshot.busy, (row) => row.personId, byStart),
    weatherBySite: listsBy(
      snapshot.weather,
      (row) => row.siteId,
      (a, b) => a.startMs - b.startMs,
    ),
    visits: byId(snapshot.visits),
    visitsByCrew: listsBy(placed, crewOf, byStart),
    visitsBySite: listsBy(placed, siteOf, byStart),
    followUps: listsBy(snapshot.visits.filter(isFollowUp), causeOf, byIdOrder),
    shiftsByVisit: listsBy(snapshot.shifts, visitOf, byPerson),
    heldByPerson: listsBy(snapshot.shifts.filter(isHeld), (row) => row.personId, byHeldStart),
    offersByVisit: listsBy(snapshot.offers, visitOf, byPerson),
    bookingsByVisit: listsBy(snapshot.bookings, visitOf, byIdOrder),
    bookingsByEquipment: listsBy(snapshot.bookings.filter(holds), (row) => row.equipmentId, byHeldStart),
    ordersByVisit: listsBy(snapshot.mixOrders, visitOf, byIdOrder),
    ordersByPlant: listsBy(snapshot.mixOrders.filter(holds), (row) => row.plantId, byStart),
  };
}

/** Every row of a visit; null when there is no such visit. */
export function rowsOfVisit(index: BoardIndex, visitId: string): VisitRows | null {
  const visit = index.visits.get(visitId);
  if (!visit) return null;
  return {
    visit,
    shifts: index.shiftsByVisit.get(visitId) ?? [],
    offers: index.offersByVisit.get(visitId) ?? [],
    bookings: index.bookingsByVisit.get(visitId) ?? [],
    mixOrders: index.ordersByVisit.get(visitId) ?? [],
  };
}

/** The index with a visit's rows replaced (or added); the given index stays as it is. */
export function withVisitRows(index: BoardIndex, rows: VisitRows): BoardIndex {
  const { visit } = rows;
  const old = index.visits.get(visit.id);
  const ofVisit = (row: { visitId: string }): boolean => row.visitId === visit.id;
  const isVisit = (row: Visit): boolean => row.id === visit.id;
  const oldRows = rowsOfVisit(index, visit.id);
  const placed = isPlaced(visit) ? [visit] : [];
  return {
    ...index,
    visits: new Map(index.visits).set(visit.id, visit),
    visitsByCrew: relisted(
      index.visitsByCrew,
      old?.crewId ? [old.crewId] : [],
      isVisit,
      placed,
      crewOf,
      byStart,
    ),
    visitsBySite: relisted(index.visitsBySite, old ? [old.siteId] : [], isVisit, placed, siteOf, byStart),
    followUps: relisted(
      index.followUps,
      old?.causedByVisitId ? [old.causedByVisitId] : [],
      isVisit,
      isFollowUp(visit) ? [visit] : [],
      causeOf,
      byIdOrder,
    ),
    shiftsByVisit: relisted(index.shiftsByVisit, [visit.id], ofVisit, rows.shifts, visitOf, byPerson),
    heldByPerson: relisted(
      index.heldByPerson,
      (oldRows?.shifts ?? []).map((row) => row.personId),
      ofVisit,
      rows.shifts.filter(isHeld),
      (row) => row.personId,
      byHeldStart,
    ),
    offersByVisit: relisted(index.offersByVisit, [visit.id], ofVisit, rows.offers, visitOf, byPerson),
    bookingsByVisit: relisted(index.bookingsByVisit, [visit.id], ofVisit, rows.bookings, visitOf, byIdOrder),
    bookingsByEquipment: relisted(
      index.bookingsByEquipment,
      (oldRows?.bookings ?? []).map((row) => row.equipmentId),
      ofVisit,
      rows.bookings.filter(holds),
      (row) => row.equipmentId,
      byHeldStart,
    ),
    ordersByVisit: relisted(index.ordersByVisit, [visit.id], ofVisit, rows.mixOrders, visitOf, byIdOrder),
    ordersByPlant: relisted(
      index.ordersByPlant,
      (oldRows?.mixOrders ?? []).map((row) => row.plantId),
      ofVisit,
      rows.mixOrders.filter(holds),
      (row) => row.plantId,
      byStart,
    ),
  };
}

/** The snapshot with a visit's rows replaced (or added); the given snapshot stays as it is. */
export function snapshotWithVisitRows(snapshot: Snapshot, rows: VisitRows): Snapshot {
  const { visit } = rows;
  const without = <T extends { visitId: string }>(list: readonly T[], added: readonly T[]): T[] => [
    ...list.filter((row) => row.visitId !== visit.id),
    ...added,
  ];
  const known = snapshot.visits.some((row) => row.id === visit.id);
  return {
    ...snapshot,
    visits: known
      ? snapshot.visits.map((row) => (row.id === visit.id ? visit : row))
      : [...snapshot.visits, visit],
    shifts: without(snapshot.shifts, rows.shifts),
    offers: without(snapshot.offers, rows.offers),
    bookings: without(snapshot.bookings, rows.bookings),
    mixOrders: without(snapshot.mixOrders, rows.mixOrders),
  };
}

/** The placed visits of a crew that share time with an interval. */
export function crewVisitsDuring(index: BoardIndex, crewId: string, during: Interval): PlacedVisit[] {
  const found: PlacedVisit[] = [];
  for (const visit of index.visitsByCrew.get(crewId) ?? []) {
    if (visit.during.startMs >= during.endMs) break;
    if (overlaps(visit.during, during)) found.push(visit);
  }
  return found;
}

function byId<T extends { id: string }>(rows: readonly T[]): Map<string, T> {
  return new Map(rows.map((row) => [row.id, row]));
}

function listsBy<T>(rows: readonly T[], keyOf: (row: T) => string, order?: (a: T, b: T) => number) {
  const lists = new Map<string, T[]>();
  for (const row of rows) {
    const key = keyOf(row);
    const list = lists.get(key);
    if (list) list.push(row);
    else lists.set(key, [row]);
  }
  if (order) for (const list of lists.values()) list.sort(order);
  return lists;
}

function relisted<T>(
  lists: Lists<T>,
  oldKeys: readonly string[],
  isOld: (row: T) => boolean,
  added: readonly T[],
  keyOf: (row: T) => string,
  order: (a: T, b: T) => number,
): Lists<T> {
  if (oldKeys.length === 0 && added.length === 0) return lists;
  const next = new Map(lists);
  for (const key of new Set([...oldKeys, ...added.map(keyOf)])) {
    const kept = (lists.get(key) ?? []).filter((row) => !isOld(row));
    const list = [...kept, ...added.filter((row) => keyOf(row) === key)].sort(order);
    if (list.length > 0) next.set(key, list);
    else next.delete(key);
  }
  return next;
}

const crewOf = (visit: PlacedVisit): string => visit.crewId;
const siteOf = (visit: PlacedVisit): string => visit.siteId;
const visitOf = (row: { visitId: string }): string => row.visitId;
const isHeld = (shift: Shift): boolean => shift.state === 'held';
const holds = (row: { state: OrderState }): boolean => isActive(row.state);

type FollowUpVisit = Visit & { readonly causedByVisitId: string };
const isFollowUp = (visit: Visit): visit is FollowUpVisit =>
  visit.causedByVisitId !== null && visit.state !== 'called-off';
const causeOf = (visit: Visit): string => visit.causedByVisitId ?? '';

// Ids break ties, so that an index that was changed and one that was made anew list rows in the same order.
interface Timed {
  readonly during: Interval;
}
const byStart = (a: Timed & { id?: string }, b: Timed & { id?: string }): number =>
  a.during.startMs - b.during.startMs || compareText(a.id ?? '', b.id ?? '');
const byHeldStart = (a: { held: Interval; id: string }, b: { held: Interval; id: string }): number =>
  a.held.startMs - b.held.startMs || compareText(a.id, b.id);
const byIdOrder = (a: { id: string }, b: { id: string }): number => compareText(a.id, b.id);
const byPerson = (a: { personId: string; id: string }, b: { personId: string; id: string }): number =>
  compareText(a.personId, b.personId) || compareText(a.id, b.id);

function compareText(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
