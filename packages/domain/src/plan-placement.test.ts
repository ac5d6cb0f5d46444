import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { withChange } from './change-rows.ts';
import { needsReason, planPlacement } from './plan-placement.ts';
import { InputProblem } from './problem.ts';
import type { Snapshot } from './snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  ids,
  nowMs,
  placed,
  sampleIndex,
  sampleSnapshot,
} from './testing/sample-board.ts';
import { addDays } from './zone.ts';

const base = sampleSnapshot();

describe('a drop', () => {
  test('writes the crew’s members, and asks its sub', () => {
    const { change, chain } = dropped(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));
    const during = { startMs: at(day, 6), endMs: at(day, 14, 15) };
    expect(change).toEqual({
      visitId: ids.driveway,
      visit: { crewId: ids.northCrew, state: 'firm', during },
      shifts: [ids.ada, ids.ben, ids.cal].map((personId) => ({ personId, during, held: during })),
      offers: [{ personId: ids.sol, during, held: during }],
      booking: null,
      mixOrder: {
        plantId: ids.plant,
        mixId: ids.mix,
        orderedYd3: 12,
        loadYd3: 10,
        spacingMin: 60,
        during: { startMs: at(day, 6, 45), endMs: at(day, 7, 55) },
      },
      followUps: [
        {
          kind: 'strip',
          titleKey: 'follow-up.strip',
          window: { startMs: at('2026-06-10', 7, 55), endMs: at('2026-06-13', 7, 55) },
          plannedMin: 120,
          existingVisitId: null,
        },
      ],
      reheld: [],
    });
    expect(chain?.crewStartMs).toBe(during.startMs);
  });

  test.each([
    // Default telling horizon of 7 days, by days of the site; now is Monday 2026-06-08, 7:00 there.
    ['today', '2026-06-08', 6, 'firm'],
    ['seven days on, late', '2026-06-15', 23, 'firm'],
    ['eight days on, early', '2026-06-16', 0, 'pencilled'],
    ['in the past, recorded late', '2026-06-05', 6, 'firm'],
  ] as const)('is %s', (_name, siteDay, hour, state) => {
    expect(dropped(sampleIndex(), ids.driveway, ids.northCrew, at(siteDay, hour)).change.visit.state).toBe(
      state,
    );
  });

  test('of a visit that people know of keeps it firm, however far it is pushed', () => {
    const firm = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));
    const { change } = dropped(firm, ids.driveway, ids.northCrew, at('2026-06-24', 6));
    expect(change.visit.state).toBe('firm');
    const visits = changed(base.visits, ids.driveway, { state: 'called-off' });
    const again = dropped(sampleIndex({ visits }), ids.driveway, ids.northCrew, at('2026-06-24', 6));
    expect(again.change.visit.state).toBe('pencilled');
  });

  test('by the site’s day, when it is another day at the office', () => {
    // 23:30 on the 15th in Chicago is the 16th in New York.
    const { change } = dropped(sampleIndex(), ids.driveway, ids.northCrew, at('2026-06-15', 23, 30));
    expect(change.visit.state).toBe('firm');
  });

  test.each([
    ['visit', { visitId: 'x' }, 'visitId'],
    ['crew', { crewId: 'x' }, 'crewId'],
    ['pump', { pumpId: 'x' }, 'pumpId'],
    ['instant', { crewStartMs: Number.NaN }, 'crewStartMs'],
  ] as const)('with an unknown %s is refused by name', (_name, wrong, field) => {
    const placement = { visitId: ids.driveway, crewId: ids.northCrew, crewStartMs: at(day, 6), ...wrong };
    const drop = (): unknown => planPlacement(sampleIndex(), placement, nowMs);
    expect(drop).toThrow(InputProblem);
    expect(drop).toThrow(new RegExp(`^${field}:`));
  });
});

describe('moving a visit on its crew', () => {
  const standing = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));

  test('keeps the people it has, not the crew’s', () => {
    // Cal has said no.
    const shifts = (standing.shiftsByVisit.get(ids.driveway) ?? []).map((row) =>
      row.personId === ids.cal ? { ...row, state: 'released' as const, answer: 'no' as const } : row,
    );
    const visit = standing.visits.get(ids.driveway);
    if (!visit) throw new Error('The driveway stands');
    const index = sampleIndex({ shifts, visits: changed(base.visits, ids.driveway, visit) });
    const moved = dropped(index, ids.driveway, ids.northCrew, at('2026-06-10', 6));
    expect(moved.change.shifts.map((row) => row.personId)).toEqual([ids.ada, ids.ben]);
    const other = dropped(index, ids.driveway, ids.southCrew, at('2026-06-10', 6));
    expect(other.change.shifts.map((row) => row.personId)).toEqual([ids.dee, ids.eli, ids.fay]);
  });

  test('asks the crew again when all have said no', () => {
    const shifts = (standing.shiftsByVisit.get(ids.driveway) ?? []).map((row) => ({
      ...row,
      state: 'released' as const,
    }));
    const visit = standing.visits.get(ids.driveway);
    if (!visit) throw new Error('The driveway stands');
    const index = sampleIndex({ shifts, visits: changed(base.visits, ids.driveway, visit) });
    const moved = dropped(index, ids.driveway, ids.northCrew, at('2026-06-10', 6));
    expect(moved.change.shifts).toHaveLength(3);
  });

  test('asks a sub again, unless the shift they took is the same', () => {
    const taken = (standing.shiftsByVisit.get(ids.driveway) ?? []).map((row, number) =>
      number === 0 ? { ...row, id: 'sol', personId: ids.sol } : row,
    );
    const visit = standing.visits.get(ids.driveway);
    if (!visit) throw new Error('The driveway stands');
    const index = sampleIndex({ shifts: taken, visits: changed(base.visits, ids.driveway, visit) });
    const same = dropped(index, ids.driveway, ids.northCrew, at(day, 6)).change;
    expect(same.shifts.map((row) => row.personId)).toContain(ids.sol);
    expect(same.offers).toEqual([]);
    const later = dropped(index, ids.driveway, ids.northCrew, at(day, 6, 15)).change;
    expect(later.shifts.map((row) => row.personId)).not.toContain(ids.sol);
    expect(later.offers.map((row) => row.personId)).toEqual([ids.sol]);
  });

  test('to where it stands changes no row', () => {
    const again = withChange(standing, dropped(standing, ids.driveway, ids.northCrew, at(day, 6)).change);
    expect(again).toEqual(standing);
  });

  test('away and back leaves the people’s time as it was, to be told again only if they were told of the move', () => {
    const away = placed(standing, ids.driveway, ids.southCrew, at('2026-06-10', 9));
    expect(away.heldByPerson.get(ids.ada)).toBeUndefined();
    const back = placed(away, ids.driveway, ids.northCrew, at(day, 6));
    const heldOf = (index: typeof back) =>
      (index.shiftsByVisit.get(ids.driveway) ?? [])
        .filter((row) => row.state === 'held')
        .map(({ personId, during, held }) => ({ personId, during, held }));
    expect(heldOf(back)).toEqual(heldOf(standing));
  });
});

describe('reasons', () => {
  test('are asked for every caution that has none yet, not for notes', () => {
    const readiness = [{ item: 'inspection', done: false }];
    const pours = changed(base.pours, ids.drivewayPour, { readiness, mixId: null });
    const { findings } = dropped(sampleIndex({ pours }), ids.driveway, ids.northCrew, at('2026-06-12', 6));
    expect(codesOf(findings)).toEqual([
      'caution mix-not-carried',
      'caution spacing-cold-joint',
      'note not-ready',
    ]);
    expect(needsReason(findings, [])).toEqual(['mix-not-carried', 'spacing-cold-joint']);
    expect(needsReason(findings, ['spacing-cold-joint'])).toEqual(['mix-not-carried']);
    expect(needsReason(findings, ['mix-not-carried', 'spacing-cold-joint'])).toEqual([]);
  });
});

describe('properties', () => {
  const slots = fc.integer({ min: 0, max: 7 * 96 }).map((quarter) => at('2026-06-08', 0) + quarter * 900_000);
  const visitIds = fc.constantFrom(ids.driveway, ids.patio, ids.floor, ids.walk);
  const crewIds = fc.constantFrom(ids.northCrew, ids.southCrew);
  const place = fc.record({ visitId: visitIds, crewId: crewIds, crewStartMs: slots });
  const board = (
    places: { visitId: string; crewId: string; crewStartMs: number }[],
    changes: Partial<Snapshot> = {},
  ) =>
    places.reduce(
      (index, one) => placed(index, one.visitId, one.crewId, one.crewStartMs),
      sampleIndex(changes),
    );

  test('more people never make a stop out of a pass', () => {
    fc.assert(
      fc.property(fc.array(place, { maxLength: 3 }), place, (places, one) => {
        const extra = { ...(base.people[0] ?? base.people[1]), id: 'extra', name: 'Extra' };
        const memberships = [
          ...base.memberships,
          { crewId: one.crewId, personId: 'extra', during: base.range },
        ];
        const few = board(places);
        const more = {
          ...few,
          people: new Map(few.people).set('extra', extra as (typeof base.people)[number]),
          membershipsByCrew: new Map(few.membershipsByCrew).set(
            one.crewId,
            memberships.filter((row) => row.crewId === one.crewId),
          ),
        };
        const stops = (index: typeof few) =>
          planPlacement(index, one, nowMs).findings.filter((finding) => finding.severity === 'stop').length;
        expect(stops(more)).toBeLessThanOrEqual(stops(few));
      }),
      { numRuns: 60 },
    );
  });

  test('a week later everything is the same, in a zone without a change between', () => {
    // Both weeks are summer time in America/Chicago; the plant's closed day is left out.
    const plants = base.plants.map((one) => ({ ...one, closedDays: [] }));
    const week = 7 * 24 * 3_600_000;
    const later = (one: { visitId: string; crewId: string; crewStartMs: number }) => ({
      ...one,
      crewStartMs: one.crewStartMs + week,
    });
    fc.assert(
      fc.property(fc.array(place, { maxLength: 3 }), place, (places, one) => {
        const now = board(places, { plants });
        const then = places.reduce(
          (index, each) => placed(index, each.visitId, each.crewId, each.crewStartMs + week, nowMs + week),
          sampleIndex({ plants }),
        );
        const here = planPlacement(now, one, nowMs);
        const there = planPlacement(then, later(one), nowMs + week);
        // Daylight moves by a minute or two in a week.
        const codes = (planned: typeof here) =>
          codesOf(planned.findings).filter((code) => !code.endsWith('after-dark'));
        expect(codes(there)).toEqual(codes(here));
        expect(there.change.shifts.map((row) => row.personId)).toEqual(
          here.change.shifts.map((row) => row.personId),
        );
        expect(there.change.visit.during.startMs - here.change.visit.during.startMs).toBe(week);
        expect(addDays('2026-06-08', 7)).toBe('2026-06-15');
      }),
      { numRuns: 60 },
    );
  });

  test('without a stop nobody is held twice, and no pump', () => {
    fc.assert(
      fc.property(fc.array(place, { maxLength: 4 }), (places) => {
        let index = sampleIndex();
        for (const one of places) {
          const planned = planPlacement(index, one, nowMs);
          if (!planned.findings.some((finding) => finding.severity === 'stop'))
            index = withChange(index, planned.change);
        }
        for (const rows of [...index.heldByPerson.values(), ...index.bookingsByEquipment.values()])
          for (const [number, row] of rows.entries()) {
            const next = rows[number + 1];
            if (next) expect(row.held.endMs).toBeLessThanOrEqual(next.held.startMs);
          }
      }),
      { numRuns: 200 },
    );
  });

  test('held time contains the time itself, and every figure is a figure', () => {
    fc.assert(
      fc.property(fc.array(place, { maxLength: 3 }), place, (places, one) => {
        const { change, findings } = planPlacement(board(places), one, nowMs);
        for (const { during, held } of [...change.shifts, ...change.offers]) {
          expect(held.startMs).toBeLessThanOrEqual(during.startMs);
          expect(held.endMs).toBeGreaterThanOrEqual(during.endMs);
        }
        for (const finding of findings) {
          for (const value of Object.values(finding.facts)) expect(value).not.toBeNaN();
          for (const value of Object.values(finding.facts))
            if (typeof value === 'number') expect(Number.isFinite(value)).toBe(true);
          expect(JSON.parse(JSON.stringify(finding))).toEqual(finding);
        }
      }),
      { numRuns: 100 },
    );
  });
});
