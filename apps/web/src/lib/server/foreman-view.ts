import type { BoardPatch } from '@strikeboard/db/queries/board-change';
import type { Snapshot } from '@strikeboard/domain/snapshot';

/** The crews of a snapshot that a person leads or belongs to. */
export function crewsOf(snapshot: Pick<Snapshot, 'crews' | 'memberships'>, personId: string): Set<string> {
  return new Set([
    ...snapshot.crews.filter(({ foremanId }) => foremanId === personId).map(({ id }) => id),
    ...snapshot.memberships
      .filter((membership) => membership.personId === personId)
      .map(({ crewId }) => crewId),
  ]);
}

/** A snapshot with the lanes of some crews only: what a foreman sees. */
export function lanesOnly(snapshot: Snapshot, crewIds: ReadonlySet<string>): Snapshot {
  const rows = visitsOnly(snapshot, crewIds);
  const people = new Set([
    ...snapshot.memberships.filter(({ crewId }) => crewIds.has(crewId)).map(({ personId }) => personId),
    ...rows.shifts.map(({ personId }) => personId),
    ...rows.offers.map(({ personId }) => personId),
  ]);
  const siteIds = new Set(rows.visits.map(({ siteId }) => siteId));
  return {
    ...snapshot,
    ...rows,
    crews: snapshot.crews.filter(({ id }) => crewIds.has(id)),
    memberships: snapshot.memberships.filter(({ crewId }) => crewIds.has(crewId)),
    people: snapshot.people.filter(({ id }) => people.has(id)),
    busy: snapshot.busy.filter(({ personId }) => people.has(personId)),
    sites: snapshot.sites.filter(({ id }) => siteIds.has(id)),
    weather: snapshot.weather.filter(({ siteId }) => siteIds.has(siteId)),
  };
}

/** A change with the rows of some crews only. The ids stay, so that what has left the lanes is dropped. */
export function patchOfLanes(patch: BoardPatch, crewIds: ReadonlySet<string>): BoardPatch {
  return { ...patch, ...visitsOnly(patch, crewIds) };
}

type VisitRows = Pick<
  BoardPatch,
  'visits' | 'pours' | 'slabs' | 'shifts' | 'offers' | 'mixOrders' | 'bookings'
>;

function visitsOnly(rows: VisitRows, crewIds: ReadonlySet<string>): VisitRows {
  const visits = rows.visits.filter(({ crewId }) => crewId !== null && crewIds.has(crewId));
  const visitIds = new Set(visits.map(({ id }) => id));
  const pourIds = new Set(visits.map(({ pourId }) => pourId));
  const pours = rows.pours.filter(({ id }) => pourIds.has(id));
  const slabIds = new Set(pours.flatMap((pour) => pour.slabIds));
  const ofVisits = <T extends { visitId: string }>(list: readonly T[]) =>
    list.filter(({ visitId }) => visitIds.has(visitId));
  return {
    visits,
    pours,
    slabs: rows.slabs.filter(({ id }) => slabIds.has(id)),
    shifts: ofVisits(rows.shifts),
    offers: ofVisits(rows.offers),
    mixOrders: ofVisits(rows.mixOrders),
    bookings: ofVisits(rows.bookings),
  };
}
