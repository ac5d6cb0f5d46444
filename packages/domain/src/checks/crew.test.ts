import { describe, expect, test } from 'vitest';
import type { BoardIndex } from '../board-index.ts';
import type { Snapshot } from '../snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  nowMs,
  placed,
  sampleIndex,
  sampleSnapshot,
  sampleVisit,
} from '../testing/sample-board.ts';

const base = sampleSnapshot();

/** The board with the driveway on the north crew, 6:00 to 14:15. */
const withDriveway = (changes: Partial<Snapshot> = {}): BoardIndex =>
  placed(sampleIndex(changes), ids.driveway, ids.northCrew, at(day, 6));

describe('a crew twice at one time', () => {
  test('stops with the same people', () => {
    const planned = dropped(withDriveway(), ids.patio, ids.northCrew, at(day, 10));
    const [overlap] = findingsWith(planned, 'crew-overlap');
    expect(overlap.severity).toBe('stop');
    expect(overlap.against[0]).toEqual({ kind: 'visit', id: ids.driveway });
    expect(overlap.facts).toEqual({ visits: 1, samePeople: 3 });
    const people = findingsWith(planned, 'person-overlap');
    expect(people.map((one) => one.severity)).toEqual(['stop', 'stop', 'stop']);
    expect(people.map((one) => one.against[0]?.id).sort()).toEqual([ids.ada, ids.ben, ids.cal]);
  });

  test('is a split crew when other people are meant', () => {
    // Ada and Ben stay on the driveway; the patio already stands with Cal alone.
    const driveway = withDriveway();
    const [shift] = driveway.shiftsByVisit.get(ids.driveway) ?? [];
    if (!shift) throw new Error('The driveway has shifts');
    const during = { startMs: at(day, 10), endMs: at(day, 16) };
    const index = placed(
      sampleIndex({
        visits: changed(base.visits, ids.patio, { crewId: ids.northCrew, state: 'firm', during }),
        shifts: [{ ...shift, id: 'cal', visitId: ids.patio, personId: ids.cal, during, held: during }],
        memberships: base.memberships.filter((row) => row.personId !== ids.cal),
      }),
      ids.driveway,
      ids.northCrew,
      at(day, 6),
    );
    const planned = dropped(index, ids.driveway, ids.northCrew, at(day, 6));
    expect(findingsWith(planned, 'crew-overlap')[0].severity).toBe('caution');
    expect(codesOf(planned.findings)).not.toContain('stop person-overlap');
  });

  test('touching is not overlapping (RFC 5545: the end is not part of it)', () => {
    // The patio is at the same site.
    const end = withDriveway().visits.get(ids.driveway)?.during?.endMs ?? 0;
    expect(end).toBe(at(day, 14, 15));
    const touching = dropped(withDriveway(), ids.patio, ids.northCrew, end);
    expect(codesOf(touching.findings)).not.toContain('stop crew-overlap');
    const minuteEarlier = dropped(withDriveway(), ids.patio, ids.northCrew, end - 60_000);
    expect(codesOf(minuteEarlier.findings)).toContain('stop crew-overlap');
    const { during } = touching.change.visit;
    const startMs = at(day, 6) - (during.endMs - during.startMs);
    const before = dropped(withDriveway(), ids.patio, ids.northCrew, startMs);
    expect(codesOf(before.findings)).not.toContain('stop crew-overlap');
    const into = dropped(withDriveway(), ids.patio, ids.northCrew, startMs + 60_000);
    expect(codesOf(into.findings)).toContain('stop crew-overlap');
  });
});

describe('a person taken elsewhere', () => {
  test('by another crew is left off and counts as absent', () => {
    // Ada is lent to the south crew for the week, and is on its pour from 6:00.
    const memberships = [
      ...base.memberships,
      { crewId: ids.southCrew, personId: ids.ada, during: base.range },
    ];
    const index = placed(sampleIndex({ memberships }), ids.walk, ids.southCrew, at(day, 6));
    const planned = dropped(index, ids.driveway, ids.northCrew, at(day, 6));
    const [overlap, ...others] = findingsWith(planned, 'person-overlap');
    expect(others).toEqual([]);
    expect(overlap.severity).toBe('caution');
    expect(overlap.against).toEqual([
      { kind: 'person', id: ids.ada },
      { kind: 'visit', id: ids.walk },
    ]);
    expect(planned.change.shifts.map((shift) => shift.personId)).toEqual([ids.ben, ids.cal]);
    expect(findingsWith(planned, 'short-handed')[0].facts).toMatchObject({
      peopleNeeded: 3,
      peoplePresent: 2,
    });
  });

  test.each([
    // The depot is 30 min away. Ada's work there ends at 11:00.
    ['with time to drive over', 30, false],
    ['without', 29, true],
  ] as const)('by work that ends before, %s', (_name, gapMin, leftOff) => {
    const during = { startMs: at(day, 9), endMs: at(day, 11) };
    const visits = [
      ...base.visits,
      sampleVisit('prep', { kind: 'prep', state: 'firm', crewId: ids.southCrew, siteId: ids.depot, during }),
    ];
    const shift = { id: 's', visitId: 'prep', personId: ids.ada, during, held: during };
    const shifts = [{ ...shift, state: 'held' as const, answer: 'none' as const, told: false }];
    const startMs = at(day, 11) + gapMin * 60_000;
    const planned = dropped(sampleIndex({ visits, shifts }), ids.driveway, ids.northCrew, startMs);
    expect(planned.change.shifts.some((row) => row.personId === ids.ada)).toBe(!leftOff);
    if (leftOff) expect(findingsWith(planned, 'person-overlap')[0].facts).toMatchObject({ travelOnly: true });
  });

  test('while the crew travels is taken too', () => {
    // From the driveway at 14:15 the crew takes until 14:45 to the depot.
    const busy = [{ personId: ids.cal, during: { startMs: at(day, 14, 15), endMs: at(day, 14, 40) } }];
    const index = placed(sampleIndex({ busy }), ids.driveway, ids.northCrew, at(day, 6));
    const planned = dropped(index, ids.floor, ids.northCrew, at(day, 14, 45));
    expect(findingsWith(planned, 'person-overlap')[0].against).toEqual([{ kind: 'person', id: ids.cal }]);
  });

  test('in another company is busy, and nothing more is said', () => {
    const busy = [{ personId: ids.sol, during: { startMs: at(day, 12), endMs: at(day, 15) } }];
    const planned = dropped(sampleIndex({ busy }), ids.driveway, ids.northCrew, at(day, 6));
    const [overlap] = findingsWith(planned, 'person-overlap');
    expect(overlap.against).toEqual([{ kind: 'person', id: ids.sol }]);
    expect(overlap.facts).toMatchObject({ takenBy: 'busy', leftOff: true });
    expect(planned.change.offers).toEqual([]);
  });

  test('touching busy time keeps nobody away', () => {
    const busy = [{ personId: ids.sol, during: { startMs: at(day, 14, 15), endMs: at(day, 16) } }];
    const planned = dropped(sampleIndex({ busy }), ids.driveway, ids.northCrew, at(day, 6));
    expect(planned.change.offers.map((offer) => offer.personId)).toEqual([ids.sol]);
  });

  test('who marks themselves busy later shows on the visit that stands', () => {
    const shifts = [...(withDriveway().shiftsByVisit.get(ids.driveway) ?? [])];
    const visit = withDriveway().visits.get(ids.driveway);
    if (!visit) throw new Error('The driveway stands');
    const busy = [{ personId: ids.ben, during: { startMs: at(day, 8), endMs: at(day, 9) } }];
    const index = sampleIndex({ shifts, busy, visits: changed(base.visits, ids.driveway, visit) });
    const planned = dropped(index, ids.driveway, ids.northCrew, at(day, 6));
    expect(findingsWith(planned, 'person-overlap')[0].against[0]?.id).toBe(ids.ben);
    expect(planned.change.shifts.map((shift) => shift.personId)).toEqual([ids.ada, ids.cal]);
  });
});

describe('a head count', () => {
  test.each([
    // Common practice, no source: 3 people per 10 yd3/h by chute, 2 by boom, at least 2.
    ['10 yd3/h by chute', { placingRateYd3PerHour: 10 }, null],
    ['15 yd3/h by chute', { placingRateYd3PerHour: 15 }, { peopleNeeded: 5, peoplePresent: 3 }],
    ['15 yd3/h by boom', { placingRateYd3PerHour: 15, placingMethod: 'boom-pump' as const }, null],
    ['stated to place', { peopleToPlace: 4 }, { peopleNeeded: 4, peopleToPlace: 4 }],
    ['stated to finish', { peopleToFinish: 6 }, { peopleNeeded: 6, peopleToFinish: 6 }],
    ['stated and met', { peopleToPlace: 2, peopleToFinish: 3 }, null],
  ])('%s', (_name, pour, facts) => {
    const pours = changed(base.pours, ids.drivewayPour, pour);
    const planned = dropped(sampleIndex({ pours }), ids.driveway, ids.northCrew, at(day, 6));
    if (facts === null) expect(codesOf(planned.findings)).not.toContain('caution short-handed');
    else expect(findingsWith(planned, 'short-handed')[0]).toMatchObject({ severity: 'caution', facts });
  });

  test('says what would clear it: people, or a rate that those present can place', () => {
    const pours = changed(base.pours, ids.drivewayPour, { placingRateYd3PerHour: 20 });
    const [short] = findingsWith(
      dropped(sampleIndex({ pours }), ids.driveway, ids.northCrew, at(day, 6)),
      'short-handed',
    );
    // 3 people place 10 yd3/h by chute: common practice, no source.
    expect(short.clears).toContainEqual({ kind: 'more-people', people: 3 });
    expect(short.clears).toContainEqual({ kind: 'placing-rate-under', yd3PerHour: 10 });
  });

  test('of nobody stops, for a pour and for a prep visit alike', () => {
    const memberships = base.memberships.filter((row) => row.crewId !== ids.northCrew);
    const visits = changed(base.visits, ids.patio, { kind: 'prep', pourId: null, partYd3: null });
    const index = sampleIndex({ memberships, visits });
    for (const visitId of [ids.driveway, ids.patio]) {
      const planned = dropped(index, visitId, ids.northCrew, at(day, 6));
      expect(findingsWith(planned, 'short-handed')[0].severity).toBe('stop');
    }
  });

  test('of asked subs only is a caution, since they may say yes', () => {
    const memberships = base.memberships.filter((row) => row.personId === ids.sol);
    const planned = dropped(sampleIndex({ memberships }), ids.driveway, ids.northCrew, at(day, 6));
    expect(findingsWith(planned, 'short-handed')[0]).toMatchObject({
      severity: 'caution',
      facts: { peoplePresent: 0, peopleOffered: 1 },
    });
  });
});

test.each([
  // Cal and Eli do float and broom only; Ada, who names no skill, does any.
  ['someone can do any finish', 'stamped' as const, base.people, false],
  [
    'nobody present names it',
    'stamped' as const,
    base.people.map((one) => ({ ...one, skills: ['broom' as const] })),
    true,
  ],
  [
    'only an asked sub names it',
    'stamped' as const,
    base.people.map((one) => ({
      ...one,
      skills: one.id === ids.sol ? (['stamped'] as const).slice() : ['broom' as const],
    })),
    true,
  ],
  [
    'everybody names it',
    'broom' as const,
    base.people.map((one) => ({ ...one, skills: ['broom' as const] })),
    false,
  ],
])('skill: %s', (_name, finish, people, missing) => {
  const pours = changed(base.pours, ids.drivewayPour, { finish });
  const planned = dropped(sampleIndex({ pours, people }), ids.driveway, ids.northCrew, at(day, 6));
  expect(codesOf(planned.findings).includes('caution skill-missing')).toBe(missing);
});

test('a membership that has ended or not begun brings nobody', () => {
  const memberships = base.memberships.map((row) =>
    row.personId === ids.ben ? { ...row, during: { startMs: nowMs, endMs: at(day, 6) } } : row,
  );
  const planned = dropped(sampleIndex({ memberships }), ids.driveway, ids.northCrew, at(day, 6));
  expect(planned.change.shifts.map((shift) => shift.personId)).toEqual([ids.ada, ids.cal]);
});
