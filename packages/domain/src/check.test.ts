import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type BoardIndex,
  indexSnapshot,
  rowsOfVisit,
  snapshotWithVisitRows,
  withVisitRows,
} from './board-index.ts';
import { rowsOfChange, snapshotWithChange, visitsOfChange, withChange } from './change-rows.ts';
import { affectedBy, check, recheck } from './check.ts';
import { planPlacement } from './plan-placement.ts';
import type { Snapshot } from './snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  ids,
  nowMs,
  placed,
  sampleIndex,
  samplePour,
  sampleSnapshot,
  sampleVisit,
} from './testing/sample-board.ts';

/** A busier board: lent and busy people, two pumps, a tight plant, follow-ups, prep work, parts of one pour, weather. */
function busySnapshot(lent = true): Snapshot {
  const base = sampleSnapshot();
  const [pump] = base.equipment;
  const [plant] = base.plants;
  if (!pump || !plant) throw new Error('The sample board has a pump and a plant');
  return {
    ...base,
    memberships: lent
      ? [...base.memberships, { crewId: ids.southCrew, personId: ids.ben, during: base.range }]
      : base.memberships,
    busy: [{ personId: ids.eli, during: { startMs: at(day, 9), endMs: at(day, 12) } }],
    equipment: lent ? [pump, { ...pump, id: 'boom-2', name: 'Boom 2', outputYd3PerHour: 15 }] : [pump],
    // The walk's concrete comes from another plant, so that a pump can be all that two pours share.
    plants: [
      { ...plant, maxYd3PerHour: 25 },
      { ...plant, id: 'plant-2' },
    ],
    mixes: [...base.mixes, ...base.mixes.map((mix) => ({ ...mix, id: 'mix-2', plantId: 'plant-2' }))],
    pours: [
      ...changed(changed(base.pours, ids.drivewayPour, { jointing: 'saw-early-entry' }), ids.walkPour, {
        mixId: 'mix-2',
      }),
      samplePour('topping', { slabIds: [ids.drivewaySlab] }),
    ],
    visits: [
      ...base.visits,
      sampleVisit('topping-visit', { pourId: 'topping', partYd3: 6 }),
      sampleVisit('floor-2', { pourId: ids.floorPour, partYd3: 20, siteId: ids.depot }),
      // Kept at another site, so that only the cause ties it to its pour.
      sampleVisit('saw', {
        kind: 'saw',
        causedByVisitId: ids.driveway,
        plannedMin: 60,
        siteId: ids.depot,
      }),
      sampleVisit('strip', { kind: 'strip', causedByVisitId: ids.driveway, plannedMin: 60 }),
      sampleVisit('prep', { kind: 'prep', siteId: ids.depot }),
    ],
    weather: Array.from({ length: 120 }, (_, hour) => ({
      siteId: ids.orchard,
      startMs: at(day, 0) + hour * 3_600_000,
      airTempF: hour % 24 < 6 ? 38 : 75,
      humidityPercent: 30,
      windMph: 15,
      rainChancePercent: hour % 30 === 0 ? 70 : null,
    })),
  };
}

const visitIds = [
  ids.driveway,
  ids.patio,
  ids.floor,
  ids.walk,
  'topping-visit',
  'floor-2',
  'saw',
  'strip',
  'prep',
];
const moves = fc.array(
  fc.record({
    visitId: fc.constantFrom(...visitIds),
    to: fc.constantFrom(ids.northCrew, ids.southCrew, ids.northCrew, 'off', 'refused'),
    // Three days, so that a crew's day gets crowded.
    quarter: fc.integer({ min: 16, max: 96 * 3 }),
  }),
  { minLength: 2, maxLength: 8 },
);

/** Takes a visit off the board, as the server would write it. */
function takenOff(index: BoardIndex, visitId: string) {
  const rows = rowsOfVisit(index, visitId);
  if (!rows) throw new Error(`${visitId} is on the board`);
  return {
    visit: { ...rows.visit, state: 'waiting' as const, crewId: null, during: null },
    shifts: rows.shifts.map((row) => ({ ...row, state: 'released' as const })),
    offers: rows.offers.map((row) => ({ ...row, state: 'withdrawn' as const })),
    bookings: rows.bookings.map((row) => ({ ...row, state: 'called-off' as const })),
    mixOrders: rows.mixOrders.map((row) => ({ ...row, state: 'called-off' as const })),
  };
}

/** All of a visit's people have said no, and so has its plant. */
function refused(index: BoardIndex, visitId: string) {
  const rows = rowsOfVisit(index, visitId);
  if (!rows) throw new Error(`${visitId} is on the board`);
  return {
    ...rows,
    shifts: rows.shifts.map((row) => ({ ...row, state: 'released' as const })),
    mixOrders: rows.mixOrders.map((row) => ({ ...row, state: 'refused' as const })),
  };
}

describe('incremental', () => {
  test('findings after each change equal those of the whole board', () => {
    fc.assert(
      fc.property(moves, fc.boolean(), (list, lent) => {
        let snapshot = busySnapshot(lent);
        let index = indexSnapshot(snapshot);
        let findings = check(index, nowMs);
        for (const { visitId, to, quarter } of list) {
          const before = index;
          let touched = [visitId];
          if (to === 'off' || to === 'refused') {
            const rows = to === 'off' ? takenOff(index, visitId) : refused(index, visitId);
            index = withVisitRows(index, rows);
            snapshot = snapshotWithVisitRows(snapshot, rows);
          } else {
            const placement = { visitId, crewId: to, crewStartMs: at('2026-06-08', 0) + quarter * 900_000 };
            const { change } = planPlacement(index, placement, nowMs);
            touched = visitsOfChange(change);
            snapshot = snapshotWithChange(snapshot, index, change);
            index = withChange(index, change);
          }
          findings = recheck({ before, after: index, previous: findings, visitIds: touched, nowMs });
          const anew = indexSnapshot(snapshot);
          expect(index).toEqual(anew);
          expect(findings).toEqual(check(anew, nowMs));
        }
      }),
      { numRuns: 200 },
    );
  });

  test.each([
    ['a pump that comes free', 'pump-overlap', () => busySnapshot(false)],
    [
      'a plant from which nothing is ordered yet',
      'plant-over-capacity',
      () => {
        const snapshot = busySnapshot();
        const pours = snapshot.pours.map((pour) => ({
          ...pour,
          mixId: ids.mix,
          placingMethod: 'chute' as const,
        }));
        return { ...snapshot, pours: changed(pours, ids.floorPour, { placingRateYd3PerHour: 20 }) };
      },
    ],
  ] as const)('%s clears the visit that stands elsewhere', (_name, code, snapshotOf) => {
    const base = placed(indexSnapshot(snapshotOf()), ids.floor, ids.southCrew, at(day, 6));
    const stands = placed(base, ids.walk, ids.northCrew, at(day, 6));
    const rows = rowsOfVisit(stands, ids.walk);
    if (!rows) throw new Error('The walk stands');
    const before = withVisitRows(stands, { ...rows, mixOrders: [] });
    const previous = check(before, nowMs);
    const has = (findings: typeof previous) =>
      (findings.get(ids.walk) ?? []).some((one) => one.code === code);
    expect(has(previous)).toBe(true);
    const after = withVisitRows(before, takenOff(before, ids.floor));
    const next = recheck({ before, after, previous, visitIds: [ids.floor], nowMs });
    expect(has(next)).toBe(false);
    expect(next).toEqual(check(after, nowMs));
  });

  test('a crew split over two sites is one crew, though nobody is shared', () => {
    let before = placed(indexSnapshot(busySnapshot(false)), ids.driveway, ids.northCrew, at(day, 6));
    before = withVisitRows(before, refused(before, ids.driveway));
    before = placed(before, 'prep', ids.northCrew, at(day, 8));
    const previous = check(before, nowMs);
    expect(codesOf(previous.get(ids.driveway) ?? [])).toContain('caution crew-overlap');
    const after = withVisitRows(before, takenOff(before, 'prep'));
    const next = recheck({ before, after, previous, visitIds: ['prep'], nowMs });
    expect(codesOf(next.get(ids.driveway) ?? [])).not.toContain('caution crew-overlap');
    expect(next).toEqual(check(after, nowMs));
  });

  test('a saw visit elsewhere hangs on the pour that caused it', () => {
    let before = placed(indexSnapshot(busySnapshot(false)), ids.driveway, ids.northCrew, at(day, 6));
    before = placed(before, 'saw', ids.southCrew, at(day, 10));
    const rows = rowsOfVisit(before, 'saw');
    if (!rows) throw new Error('The saw visit stands');
    before = withVisitRows(before, { ...rows, visit: { ...rows.visit, window: null } });
    const previous = check(before, nowMs);
    expect(codesOf(previous.get('saw') ?? [])).toContain('caution follow-up-unmanned');
    const after = withVisitRows(before, takenOff(before, ids.driveway));
    const next = recheck({ before, after, previous, visitIds: [ids.driveway], nowMs });
    expect(next.get('saw')).toEqual([]);
    expect(next).toEqual(check(after, nowMs));
  });

  test('leaves lists alone that a change cannot touch', () => {
    let before = placed(sampleIndex(), ids.floor, ids.southCrew, at('2026-06-09', 6));
    before = placed(before, ids.driveway, ids.northCrew, at('2026-06-24', 6));
    const after = placed(before, ids.driveway, ids.northCrew, at('2026-06-25', 6));
    expect([...affectedBy(before, after, [ids.driveway])]).toEqual([ids.driveway]);
    const previous = check(before, nowMs);
    const next = recheck({ before, after, previous, visitIds: [ids.driveway], nowMs });
    expect(next.get(ids.floor)).toBe(previous.get(ids.floor));
  });
});

describe('the whole board', () => {
  test('a visit says where it stands what the drop said', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(ids.driveway, ids.patio, ids.floor, ids.walk),
        fc.constantFrom(ids.northCrew, ids.southCrew),
        fc.integer({ min: 16, max: 96 * 3 }),
        (visitId, crewId, quarter) => {
          const index = placed(sampleIndex(), ids.floor, ids.southCrew, at(day, 6));
          const placement = { visitId, crewId, crewStartMs: at('2026-06-08', 0) + quarter * 900_000 };
          const { change, findings } = planPlacement(index, placement, nowMs);
          // Who was left off is no longer on the visit once it stands.
          fc.pre(!codesOf(findings).includes('caution person-overlap'));
          expect(check(withChange(index, change), nowMs).get(visitId)).toEqual(findings);
        },
      ),
      { numRuns: 100 },
    );
  });

  test('waiting, called-off and done visits have no findings', () => {
    const base = sampleSnapshot();
    const index = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));
    const visit = index.visits.get(ids.driveway);
    if (!visit) throw new Error('The driveway stands');
    for (const state of ['done', 'called-off'] as const) {
      const visits = changed(base.visits, ids.driveway, { ...visit, state });
      expect([...check(sampleIndex({ visits }), nowMs).keys()]).toEqual([]);
    }
    expect([...check(index, nowMs).keys()]).toEqual([ids.driveway]);
  });

  test('people who have said no are gone from the count, and nobody is a stop', () => {
    const index = placed(sampleIndex(), ids.driveway, ids.southCrew, at(day, 6));
    const rows = rowsOfVisit(index, ids.driveway);
    if (!rows) throw new Error('The driveway stands');
    const without = (count: number) =>
      withVisitRows(index, {
        ...rows,
        shifts: rows.shifts.map((row, number) =>
          number < count ? { ...row, state: 'released' as const } : row,
        ),
      });
    const short = (count: number) =>
      (check(without(count), nowMs).get(ids.driveway) ?? []).find((one) => one.code === 'short-handed');
    expect(short(0)).toBeUndefined();
    expect(short(1)).toMatchObject({ severity: 'caution', facts: { peopleNeeded: 3, peoplePresent: 2 } });
    expect(short(3)).toMatchObject({ severity: 'stop', facts: { peoplePresent: 0 } });
  });
});

describe('rows of a change', () => {
  test('name the visit first, then every other that it touches', () => {
    const index = placed(indexSnapshot(busySnapshot()), ids.floor, ids.northCrew, at(day, 16));
    const { change } = planPlacement(
      index,
      { visitId: ids.driveway, crewId: ids.northCrew, crewStartMs: at(day, 6) },
      nowMs,
    );
    expect(rowsOfChange(index, change).map((rows) => rows.visit.id)).toEqual([
      ids.driveway,
      'saw',
      'strip',
      ids.floor,
    ]);
    expect(visitsOfChange(change)).toEqual([ids.driveway, 'saw', 'strip', ids.floor]);
  });

  test('an answer stays with a shift that does not move, and goes with one that does', () => {
    const index = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));
    const rows = rowsOfVisit(index, ids.driveway);
    if (!rows) throw new Error('The driveway stands');
    const answered = withVisitRows(index, {
      ...rows,
      shifts: rows.shifts.map((row) => ({ ...row, answer: 'yes' as const, told: true })),
    });
    const answersAt = (hour: number) =>
      (
        placed(answered, ids.driveway, ids.northCrew, at(day, hour)).shiftsByVisit.get(ids.driveway) ?? []
      ).map((row) => `${row.answer} ${row.told}`);
    expect(answersAt(6)).toEqual(['yes true', 'yes true', 'yes true']);
    expect(answersAt(7)).toEqual(['none false', 'none false', 'none false']);
  });
});
