/**
 * A small board, written by hand, for tests of any package: two crews, six people and a sub, one boom pump, one
 * plant, four pours at three sites, all waiting. Sites and plant are in Central time, the office in Eastern time.
 */

import { type BoardIndex, indexSnapshot } from '../board-index.ts';
import { withChange } from '../change-rows.ts';
import { defaultCompanyRules } from '../company-rules.ts';
import type { Finding, FindingCode } from '../finding.ts';
import { type PlannedPlacement, planPlacement } from '../plan-placement.ts';
import type { Person, Pour, Site, Snapshot, Visit } from '../snapshot.ts';
import { instantAt } from '../zone.ts';

export const siteZone = 'America/Chicago';
export const officeZone = 'America/New_York';
/** Monday 2026-06-08, 7:00 at the sites. */
export const nowMs = Date.parse('2026-06-08T12:00:00Z');
/** Tuesday. */
export const day = '2026-06-09';

const id = (number: number): string => `01900000-0000-7000-8000-${String(number).padStart(12, '0')}`;

export const ids = {
  company: id(1),
  northCrew: id(11),
  southCrew: id(12),
  ada: id(21),
  ben: id(22),
  cal: id(23),
  dee: id(24),
  eli: id(25),
  fay: id(26),
  sol: id(27),
  orchard: id(31),
  depot: id(32),
  chapel: id(33),
  plant: id(41),
  mix: id(42),
  pump: id(51),
  drivewaySlab: id(61),
  patioSlab: id(62),
  floorSlab: id(63),
  walkSlab: id(64),
  drivewayPour: id(71),
  patioPour: id(72),
  floorPour: id(73),
  walkPour: id(74),
  driveway: id(81),
  patio: id(82),
  floor: id(83),
  walk: id(84),
} as const;

/** An instant by the sites' clock. */
export function at(siteDay: string, hour: number, minute = 0): number {
  return instantAt(siteDay, hour * 60 + minute, siteZone);
}

/** The board with any rows replaced. */
export function sampleSnapshot(changes: Partial<Snapshot> = {}): Snapshot {
  const range = {
    startMs: instantAt('2026-06-01', 0, officeZone),
    endMs: instantAt('2026-06-29', 0, officeZone),
  };
  const membership = (crewId: string, personId: string) => ({ crewId, personId, during: range });
  return {
    companyId: ids.company,
    revision: 1,
    zone: officeZone,
    range,
    rules: { ...defaultCompanyRules, placingRateYd3PerHour: 10 },
    crews: [
      { id: ids.northCrew, name: 'North', foremanId: ids.ada, sortOrder: 1 },
      { id: ids.southCrew, name: 'South', foremanId: ids.dee, sortOrder: 2 },
    ],
    people: [
      person(ids.ada, 'Ada', 'foreman'),
      person(ids.ben, 'Ben', 'finisher'),
      person(ids.cal, 'Cal', 'finisher', ['float', 'broom']),
      person(ids.dee, 'Dee', 'foreman'),
      person(ids.eli, 'Eli', 'finisher', ['float', 'broom']),
      person(ids.fay, 'Fay', 'finisher'),
      person(ids.sol, 'Sol', 'sub'),
    ],
    memberships: [
      membership(ids.northCrew, ids.ada),
      membership(ids.northCrew, ids.ben),
      membership(ids.northCrew, ids.cal),
      membership(ids.northCrew, ids.sol),
      membership(ids.southCrew, ids.dee),
      membership(ids.southCrew, ids.eli),
      membership(ids.southCrew, ids.fay),
    ],
    sites: [
      site(ids.orchard, 'Orchard house', 40.1, -88.2),
      // 0.145 degrees north: about 10 miles, 30 minutes by the default rules.
      site(ids.depot, 'Depot', 40.245, -88.2),
      site(ids.chapel, 'Chapel', null, null),
    ],
    slabs: [
      slab(ids.drivewaySlab, ids.orchard, 'Driveway', 900),
      slab(ids.patioSlab, ids.orchard, 'Patio', 400),
      slab(ids.floorSlab, ids.depot, 'Floor', 3200),
      slab(ids.walkSlab, ids.chapel, 'Walk', 800),
    ],
    pours: [
      samplePour(ids.drivewayPour, { slabIds: [ids.drivewaySlab], areaFt2: 900, orderedYd3: 12 }),
      samplePour(ids.patioPour, { slabIds: [ids.patioSlab], areaFt2: 400, orderedYd3: 6 }),
      samplePour(ids.floorPour, {
        siteId: ids.depot,
        slabIds: [ids.floorSlab],
        areaFt2: 3200,
        orderedYd3: 60,
        placingMethod: 'boom-pump',
        finish: 'trowel',
        placingRateYd3PerHour: 20,
      }),
      samplePour(ids.walkPour, {
        siteId: ids.chapel,
        slabIds: [ids.walkSlab],
        areaFt2: 800,
        orderedYd3: 10,
        placingMethod: 'boom-pump',
      }),
    ],
    visits: [
      sampleVisit(ids.driveway, { pourId: ids.drivewayPour, partYd3: 12, title: 'Driveway' }),
      sampleVisit(ids.patio, { pourId: ids.patioPour, partYd3: 6, title: 'Patio' }),
      sampleVisit(ids.floor, { pourId: ids.floorPour, partYd3: 60, title: 'Floor', siteId: ids.depot }),
      sampleVisit(ids.walk, { pourId: ids.walkPour, partYd3: 10, title: 'Walk', siteId: ids.chapel }),
    ],
    shifts: [],
    offers: [],
    busy: [],
    plants: [
      {
        id: ids.plant,
        name: 'River plant',
        zone: siteZone,
        latDeg: 40.1,
        lonDeg: -88.12,
        maxYd3PerHour: 60,
        shortLoadYd3: 4,
        hours: [...Array.from({ length: 5 }, () => ({ fromMin: 300, untilMin: 1020 })), null, null],
        closedDays: ['2026-06-19'],
      },
    ],
    mixes: [
      {
        id: ids.mix,
        plantId: ids.plant,
        code: 'F4000',
        name: 'Flatwork 4000',
        strengthPsi: 4000,
        slumpIn: 4,
        cement: 'type-i',
        dischargeLimitMin: null,
      },
    ],
    mixOrders: [],
    equipment: [
      {
        id: ids.pump,
        kind: 'pump',
        name: 'Boom 1',
        boom: true,
        reachFt: 90,
        outputYd3PerHour: 80,
        setUpMin: 30,
        washOutMin: 45,
        travelMin: 30,
      },
    ],
    bookings: [],
    weather: [],
    ...changes,
  };
}

/** A pour at the orchard: broom finish by chute, tooled joints, everything else by the company's rules. */
export function samplePour(pourId: string, changes: Partial<Pour> = {}): Pour {
  return {
    id: pourId,
    version: 1,
    siteId: ids.orchard,
    name: 'Pour',
    jobRef: null,
    slabIds: [],
    areaFt2: 400,
    thicknessIn: 4,
    vapourRetarder: false,
    orderedYd3: 6,
    mixId: ids.mix,
    finish: 'broom',
    placingMethod: 'chute',
    jointing: 'tooled',
    placingRateYd3PerHour: null,
    loadYd3: null,
    setUpMin: null,
    concreteTempF: null,
    peopleToPlace: null,
    peopleToFinish: null,
    pumpId: null,
    willCall: false,
    readiness: [],
    notes: null,
    ...changes,
  };
}

/** A waiting pour visit at the orchard. */
export function sampleVisit(visitId: string, changes: Partial<Visit> = {}): Visit {
  return {
    id: visitId,
    version: 1,
    kind: 'pour',
    state: 'waiting',
    siteId: ids.orchard,
    crewId: null,
    pourId: null,
    partYd3: null,
    title: 'Visit',
    during: null,
    wantedOn: day,
    plannedMin: 240,
    window: null,
    causedByVisitId: null,
    acceptedCodes: [],
    untold: false,
    ...changes,
  };
}

export function sampleIndex(changes: Partial<Snapshot> = {}): BoardIndex {
  return indexSnapshot(sampleSnapshot(changes));
}

/** The board with a visit dropped on a lane, whatever its findings. */
export function placed(
  index: BoardIndex,
  visitId: string,
  crewId: string,
  crewStartMs: number,
  atMs = nowMs,
): BoardIndex {
  return withChange(index, planPlacement(index, { visitId, crewId, crewStartMs }, atMs).change);
}

/** What a drop would say and write. */
export function dropped(
  index: BoardIndex,
  visitId: string,
  crewId: string,
  crewStartMs: number,
  atMs = nowMs,
): PlannedPlacement {
  return planPlacement(index, { visitId, crewId, crewStartMs }, atMs);
}

/** The findings of a code; throws when there is none, so that a test cannot pass on nothing. */
export function findingsWith(planned: PlannedPlacement, code: FindingCode): [Finding, ...Finding[]] {
  const [first, ...others] = planned.findings.filter((finding) => finding.code === code);
  if (!first) throw new Error(`No ${code} among: ${codesOf(planned.findings).join(', ')}`);
  return [first, ...others];
}

/** Severity and code of each finding, worst first. */
export function codesOf(findings: readonly Finding[]): string[] {
  return findings.map((finding) => `${finding.severity} ${finding.code}`);
}

/** The list with one row changed, found by its id. */
export function changed<T extends { id: string }>(rows: readonly T[], rowId: string, by: Partial<T>): T[] {
  return rows.map((row) => (row.id === rowId ? { ...row, ...by } : row));
}

function person(personId: string, name: string, role: Person['role'], skills: Person['skills'] = []): Person {
  return { id: personId, name, role, language: 'en', skills, hasPhone: true, hasEmail: false };
}

function site(siteId: string, name: string, latDeg: number | null, lonDeg: number | null): Site {
  return {
    id: siteId,
    name,
    address: `${name}, 410 Gravel Lane`,
    zone: siteZone,
    latDeg,
    lonDeg,
    permittedFromMin: null,
    permittedUntilMin: null,
    customerName: null,
    accessNotes: null,
  };
}

function slab(slabId: string, siteId: string, name: string, areaFt2: number) {
  return { id: slabId, siteId, name, areaFt2, thicknessIn: 4, vapourRetarder: false };
}
