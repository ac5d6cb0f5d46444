/** Who would be on a visit: who is free, who is asked, and what keeps the others away. */

import type { BoardIndex } from './board-index.ts';
import { contains, type Interval, MS_PER_MIN, overlaps } from './interval.ts';
import type { Person, Shift, Site, Visit } from './snapshot.ts';
import { travelMin } from './travel.ts';

/** What takes a person's time then. */
export interface PersonConflict {
  /** `busy` says nothing of where: another company's work, or the person's own mark. */
  readonly kind: 'same-crew' | 'other-crew' | 'busy';
  /** null for `busy`. */
  readonly visitId: string | null;
  readonly during: Interval;
  /** They do not overlap, but there is no time to get from one site to the other. */
  readonly travelOnly: boolean;
}

export interface PlannedPerson {
  readonly personId: string;
  /** null when the person is no longer among the company's people. */
  readonly person: Person | null;
  /** `present`: holds a shift. `offered`: a sub who is asked. `left-off`: taken elsewhere. */
  readonly standing: 'present' | 'offered' | 'left-off';
  readonly conflict: PersonConflict | null;
}

interface Asked {
  readonly index: BoardIndex;
  readonly visit: Visit;
  readonly site: Site;
  readonly crewId: string;
  readonly during: Interval;
  readonly held: Interval;
}

/**
 * People of a new placement: those on the visit now when it already stands on that crew (subs who are asked count as
 * on it), else the crew's members at that time. A person whom another crew's visit or something else holds is left
 * off. A sub gets an offer unless they hold the shift as it would be.
 */
export function wantedPeople(asked: Asked): PlannedPerson[] {
  const { index, visit, during } = asked;
  const shifts = index.shiftsByVisit.get(visit.id) ?? [];
  return idsWanted(asked, shifts).map((personId) => {
    const person = index.people.get(personId) ?? null;
    const conflict = conflictOf(asked, personId);
    if (conflict && conflict.kind !== 'same-crew')
      return { personId, person, standing: 'left-off', conflict };
    const accepted = shifts.some(
      (row) =>
        row.personId === personId &&
        row.state === 'held' &&
        row.during.startMs === during.startMs &&
        row.during.endMs === during.endMs,
    );
    const standing = person?.role === 'sub' && !accepted ? 'offered' : 'present';
    return { personId, person, standing, conflict };
  });
}

/** People of a visit where it stands: those who hold a shift, and subs with an open offer. */
export function standingPeople(asked: Asked): PlannedPerson[] {
  const { index, visit } = asked;
  const people: PlannedPerson[] = [];
  for (const shift of index.shiftsByVisit.get(visit.id) ?? []) {
    if (shift.state !== 'held') continue;
    const { personId } = shift;
    const conflict = conflictOf({ ...asked, during: shift.during, held: shift.held }, personId);
    const away = conflict !== null && conflict.kind !== 'same-crew';
    const person = index.people.get(personId) ?? null;
    people.push({ personId, person, standing: away ? 'left-off' : 'present', conflict });
  }
  for (const offer of index.offersByVisit.get(visit.id) ?? []) {
    const { personId } = offer;
    if (offer.state !== 'open' || people.some((one) => one.personId === personId)) continue;
    people.push({
      personId,
      person: index.people.get(personId) ?? null,
      standing: 'offered',
      conflict: null,
    });
  }
  return people;
}

function idsWanted({ index, visit, crewId, during }: Asked, shifts: readonly Shift[]): string[] {
  const ids: string[] = [];
  if (visit.crewId === crewId) {
    for (const row of shifts) if (row.state === 'held' && !ids.includes(row.personId)) ids.push(row.personId);
    for (const offer of index.offersByVisit.get(visit.id) ?? [])
      if (offer.state === 'open' && !ids.includes(offer.personId)) ids.push(offer.personId);
    // Where all have said no, a move asks the crew again.
    if (ids.length > 0) return ids;
  }
  for (const member of index.membershipsByCrew.get(crewId) ?? [])
    if (contains(member.during, during.startMs) && !ids.includes(member.personId)) ids.push(member.personId);
  return ids;
}

function conflictOf(asked: Asked, personId: string): PersonConflict | null {
  const { index, visit, crewId, during, held } = asked;
  let found: PersonConflict | null = null;
  for (const shift of index.heldByPerson.get(personId) ?? []) {
    if (shift.visitId === visit.id) continue;
    const other = index.visits.get(shift.visitId);
    const overlapping = overlaps(shift.during, during);
    if (other && other.crewId === crewId) {
      // Between the visits of one crew only travel can be short, which is a check of its own.
      if (overlapping)
        return { kind: 'same-crew', visitId: shift.visitId, during: shift.during, travelOnly: false };
    } else if (found === null && (overlaps(shift.held, held) || lacksTravel(asked, shift, other))) {
      found = {
        kind: 'other-crew',
        visitId: shift.visitId,
        during: shift.during,
        travelOnly: !overlapping,
      };
    }
  }
  if (found) return found;
  for (const busy of index.busyByPerson.get(personId) ?? [])
    if (overlaps(busy.during, held))
      return { kind: 'busy', visitId: null, during: busy.during, travelOnly: false };
  return null;
}

/** Whether a shift lies too close before or after to get from one site to the other. */
function lacksTravel({ index, site, during }: Asked, shift: Shift, other: Visit | undefined): boolean {
  const gapMs = Math.max(during.startMs - shift.during.endMs, shift.during.startMs - during.endMs);
  if (!other || other.siteId === site.id || gapMs >= MAX_TRAVEL_MS) return false;
  return gapMs < travelMin(index.sites.get(other.siteId) ?? null, site, index.rules) * MS_PER_MIN;
}

/** Shifts further apart than this are not looked at for travel. */
const MAX_TRAVEL_MS = 6 * 60 * MS_PER_MIN;
