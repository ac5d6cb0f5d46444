/**
 * A visit on a lane at an instant, with all that follows from it, before anything is judged or written. Checks read
 * plans only, so a card that is held over a slot and one that stands there are examined by the same code.
 */

import { type BoardIndex, crewVisitsDuring, isActive, isPlaced, type PlacedVisit } from './board-index.ts';
import { type Chain, chainOf, chainStartingAt } from './chain.ts';
import { type Interval, MS_PER_HOUR, MS_PER_MIN, widen } from './interval.ts';
import { type PlannedPerson, standingPeople, wantedPeople } from './plan-people.ts';
import { type PlannedPump, planPump } from './plan-pump.ts';
import { InputProblem } from './problem.ts';
import type { Mix, MixOrder, Plant, Pour, Shift, Site, Visit } from './snapshot.ts';
import { travelMin } from './travel.ts';
import { siteDayOf } from './zone.ts';

/** A pour's rows and its chain as it would run from instant 0. */
export interface PourBasis {
  readonly pour: Pour;
  readonly mix: Mix | null;
  readonly plant: Plant | null;
  readonly shape: Chain;
}

/** What of a visit does not depend on where it stands. */
export interface VisitBasis {
  readonly visit: Visit;
  readonly site: Site;
  readonly pour: PourBasis | null;
  readonly lengthMs: number;
}

/** A mix order as it stands, or as it would be drafted. */
export type PlannedOrder = Pick<
  MixOrder,
  'plantId' | 'mixId' | 'orderedYd3' | 'loadYd3' | 'spacingMin' | 'during'
>;

export interface Plan {
  readonly index: BoardIndex;
  readonly nowMs: number;
  readonly visit: Visit;
  readonly crewId: string;
  readonly site: Site;
  /** null for kinds without a chain. */
  readonly pour: (PourBasis & { readonly chain: Chain }) | null;
  readonly during: Interval;
  /** `during` with the travel to it. */
  readonly held: Interval;
  readonly people: readonly PlannedPerson[];
  /** People who hold, or would hold, a shift and are free for it. */
  readonly present: number;
  /** Subs who are asked. */
  readonly offered: number;
  /** Visits of the crew at the same time. */
  readonly overlapping: readonly PlacedVisit[];
  /** The crew's visit before and after this one, of those that do not overlap it. */
  readonly previous: PlacedVisit | null;
  readonly next: PlacedVisit | null;
  readonly pump: PlannedPump | null;
  readonly order: PlannedOrder | null;
}

const bases = new WeakMap<BoardIndex, Map<string, VisitBasis>>();

/** What of a visit does not depend on where it stands; kept per index. Throws InputProblem for an unknown id. */
export function basisOf(index: BoardIndex, visitId: string): VisitBasis {
  let known = bases.get(index);
  if (!known) {
    known = new Map();
    bases.set(index, known);
  }
  let basis = known.get(visitId);
  if (!basis) {
    basis = makeBasis(index, visitId);
    known.set(visitId, basis);
  }
  return basis;
}

/** A placed visit's chain where it stands; null for kinds without one and for visits off the board. */
export function chainOfPlaced(index: BoardIndex, visit: Visit): Chain | null {
  if (!isPlaced(visit)) return null;
  const shape = basisOf(index, visit.id).pour?.shape;
  return shape ? chainStartingAt(shape, visit.during.startMs) : null;
}

/** The plan of placing a visit anew. Throws InputProblem for an unknown visit, crew or pump, or a bad instant. */
export function planAt(input: {
  index: BoardIndex;
  visitId: string;
  crewId: string;
  crewStartMs: number;
  pumpId?: string | null;
  nowMs: number;
}): Plan {
  const { index, crewId, nowMs } = input;
  if (!Number.isFinite(input.crewStartMs))
    throw new InputProblem('crewStartMs', input.crewStartMs, 'an instant in epoch milliseconds');
  if (!index.crews.has(crewId)) throw new InputProblem('crewId', crewId, 'a crew of the company');
  const basis = basisOf(index, input.visitId);
  const startMs = Math.round(input.crewStartMs);
  const during = { startMs, endMs: startMs + basis.lengthMs };
  const neighbours = neighboursOf(index, basis, crewId, during);
  const held = widen(during, travelToMin(index, basis.site, neighbours.previous, startMs), 0);
  const pour = basis.pour && { ...basis.pour, chain: chainStartingAt(basis.pour.shape, startMs) };
  const people = wantedPeople({ index, visit: basis.visit, site: basis.site, crewId, during, held });
  return {
    index,
    nowMs,
    visit: basis.visit,
    crewId,
    site: basis.site,
    pour,
    during,
    held,
    people,
    ...counted(people),
    ...neighbours,
    pump: pour && planPump({ index, visit: basis.visit, ...pour, pumpId: input.pumpId ?? null }),
    order: pour && orderFor(pour),
  };
}

/** The plan of a visit where it stands: its own rows, not what a new placement would make. */
export function standingPlan(index: BoardIndex, visit: PlacedVisit, nowMs: number): Plan {
  const basis = basisOf(index, visit.id);
  const { crewId, during } = visit;
  const neighbours = neighboursOf(index, basis, crewId, during);
  const held = widen(during, travelToMin(index, basis.site, neighbours.previous, during.startMs), 0);
  const pour = basis.pour && { ...basis.pour, chain: chainStartingAt(basis.pour.shape, during.startMs) };
  const people = standingPeople({ index, visit, site: basis.site, crewId, during, held });
  const order = index.ordersByVisit.get(visit.id)?.find((row) => isActive(row.state));
  const booking = index.bookingsByVisit
    .get(visit.id)
    ?.find((row) => isActive(row.state) && index.equipment.get(row.equipmentId)?.kind === 'pump');
  return {
    index,
    nowMs,
    visit,
    crewId,
    site: basis.site,
    pour,
    during,
    held,
    people,
    ...counted(people),
    ...neighbours,
    pump: pour && planPump({ index, visit, ...pour, pumpId: null, standing: booking }),
    order: pour && (order ?? orderFor(pour)),
  };
}

/** Minutes of travel that a visit's held time contains: from the crew's visit before it that day. */
export function travelToMin(
  index: BoardIndex,
  site: Site,
  previous: PlacedVisit | null,
  startMs: number,
): number {
  if (!previous || previous.siteId === site.id) return 0;
  // A crew that has had its rest comes from home, except within one day of the site.
  const restMs = index.rules.restHours * MS_PER_HOUR;
  const sameDay = siteDayOf(previous.during.endMs - 1, site.zone) === siteDayOf(startMs, site.zone);
  if (!sameDay && startMs - previous.during.endMs >= restMs) return 0;
  return travelMin(index.sites.get(previous.siteId) ?? null, site, index.rules);
}

/** The held time of a shift, anew, for a placed visit among the crew's other visits. */
export function heldOf(index: BoardIndex, visit: PlacedVisit, shift: Shift): Interval {
  const basis = basisOf(index, visit.id);
  const { previous } = neighboursOf(index, basis, visit.crewId, visit.during);
  return widen(shift.during, travelToMin(index, basis.site, previous, visit.during.startMs), 0);
}

function neighboursOf(index: BoardIndex, basis: VisitBasis, crewId: string, during: Interval) {
  let previous: PlacedVisit | null = null;
  let next: PlacedVisit | null = null;
  for (const other of index.visitsByCrew.get(crewId) ?? []) {
    if (other.id === basis.visit.id) continue;
    if (other.during.endMs <= during.startMs) {
      if (!previous || other.during.endMs > previous.during.endMs) previous = other;
    } else if (other.during.startMs >= during.endMs) {
      next = other;
      break;
    }
  }
  const overlapping = crewVisitsDuring(index, crewId, during).filter((other) => other.id !== basis.visit.id);
  return { previous, next, overlapping };
}

function counted(people: readonly PlannedPerson[]): { present: number; offered: number } {
  let present = 0;
  let offered = 0;
  for (const one of people) {
    if (one.standing === 'present') present++;
    else if (one.standing === 'offered') offered++;
  }
  return { present, offered };
}

function orderFor(pour: PourBasis & { readonly chain: Chain }): PlannedOrder | null {
  const { mix, chain } = pour;
  if (!mix) return null;
  return {
    plantId: mix.plantId,
    mixId: mix.id,
    orderedYd3: chain.orderedYd3,
    loadYd3: chain.loadYd3,
    spacingMin: chain.spacingMin,
    during: chain.placing,
  };
}

function makeBasis(index: BoardIndex, visitId: string): VisitBasis {
  const visit = index.visits.get(visitId);
  if (!visit) throw new InputProblem('visitId', visitId, 'a visit of the board');
  const site = index.sites.get(visit.siteId);
  if (!site) throw new InputProblem('siteId', visit.siteId, 'a site of the board');
  if (visit.kind !== 'pour' || visit.pourId === null) {
    return { visit, site, pour: null, lengthMs: Math.max(1, Math.round(visit.plannedMin)) * MS_PER_MIN };
  }
  const pour = index.pours.get(visit.pourId);
  if (!pour) throw new InputProblem('pourId', visit.pourId, 'a pour of the board');
  const mix = pour.mixId === null ? null : (index.mixes.get(pour.mixId) ?? null);
  const plant = mix ? (index.plants.get(mix.plantId) ?? null) : null;
  const shape = chainOf({ pour, visit, site, mix, plant, rules: index.rules, crewStartMs: 0 });
  return { visit, site, pour: { pour, mix, plant, shape }, lengthMs: shape.endMs };
}
