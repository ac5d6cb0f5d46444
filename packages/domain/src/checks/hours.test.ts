import { describe, expect, test } from 'vitest';
import type { Shift, Snapshot } from '../snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  sampleIndex,
  sampleSnapshot,
  sampleVisit,
} from '../testing/sample-board.ts';

const base = sampleSnapshot();

/** A board on which Ada works elsewhere for the south crew at the given times. */
function adaWorks(...times: [startMs: number, endMs: number][]): Partial<Snapshot> {
  const visits = times.map(([startMs, endMs], number) =>
    sampleVisit(`work-${number}`, {
      kind: 'prep',
      state: 'firm',
      crewId: ids.southCrew,
      during: { startMs, endMs },
    }),
  );
  const shifts = visits.map(
    (visit): Shift => ({
      id: `shift-${visit.id}`,
      visitId: visit.id,
      personId: ids.ada,
      during: visit.during ?? base.range,
      held: visit.during ?? base.range,
      state: 'held',
      answer: 'none',
      told: false,
    }),
  );
  return { visits: [...base.visits, ...visits], shifts };
}

// The driveway takes 8 h 15 min.
const drop = (changes: Partial<Snapshot>, startMs = at(day, 6)) =>
  dropped(sampleIndex(changes), ids.driveway, ids.northCrew, startMs);

describe('a long shift (company rule: 14 h from the first start to the last end)', () => {
  test.each([
    ['14 h with a break of an hour', [at(day, 15, 15), at(day, 20)], null],
    ['a minute more', [at(day, 15, 15), at(day, 20, 1)], 14 + 1 / 60],
    ['a long break on the same day counts too', [at(day, 19), at(day, 21)], 15],
    ['the next day is another shift', [at('2026-06-10', 6), at('2026-06-10', 14)], null],
  ] as const)('%s', (_name, work, hours) => {
    const planned = drop(adaWorks([...work]));
    if (hours === null) expect(codesOf(planned.findings)).not.toContain('caution overtime');
    else {
      const [long] = findingsWith(planned, 'overtime');
      expect(long.facts).toMatchObject({ rule: 'shift', people: 1, maxShiftHours: 14 });
      expect(long.facts.shiftHours).toBeCloseTo(hours, 6);
      expect(long.against).toEqual([{ kind: 'person', id: ids.ada }]);
    }
  });

  test('at night, over midnight, work after a short break is the same shift', () => {
    const planned = drop(adaWorks([at('2026-06-10', 3), at('2026-06-10', 9)]), at(day, 18));
    // 18:00 to 2:15, then 3:00 to 9:00: 15 h.
    expect(findingsWith(planned, 'overtime')[0].facts.shiftHours).toBeCloseTo(15, 6);
    expect(codesOf(planned.findings)).not.toContain('caution rest-short');
  });
});

describe('rest (company rule: 8 h)', () => {
  test.each([
    ['8 h after a late end', [at('2026-06-08', 18), at('2026-06-08', 22)], null],
    ['a minute less', [at('2026-06-08', 18), at('2026-06-08', 22, 1)], 8 - 1 / 60],
    ['later on the same day is no rest', [at('2026-06-09', 21), at('2026-06-10', 2)], null],
  ] as const)('%s', (_name, work, hours) => {
    const planned = drop(adaWorks([...work]));
    if (hours === null) expect(codesOf(planned.findings)).not.toContain('caution rest-short');
    else {
      const [rest] = findingsWith(planned, 'rest-short');
      expect(rest.facts).toMatchObject({ people: 1, leastRestHours: 8 });
      expect(rest.facts.restHours).toBeCloseTo(hours, 6);
    }
  });

  test('elapsed, when clocks go forward in the night between', () => {
    // Saturday until 22:00, Sunday 2026-03-08 from 6:00: 7 h in America/Chicago (zone database).
    const range = { startMs: at('2026-03-01', 0), endMs: at('2026-03-29', 0) };
    const memberships = base.memberships.map((row) => ({ ...row, during: range }));
    const planned = drop(
      { ...adaWorks([at('2026-03-07', 16), at('2026-03-07', 22)]), range, memberships },
      at('2026-03-08', 6),
    );
    expect(findingsWith(planned, 'rest-short')[0].facts.restHours).toBeCloseTo(7, 6);
  });
});

describe('the week (FLSA section 7(a), 29 CFR 778.105: over 40 h in a fixed workweek)', () => {
  const daily = (...days: string[]): [number, number][] => days.map((one) => [at(one, 6), at(one, 14)]);

  test.each([
    // With the driveway's 8.25 h.
    ['four more days of 8 h', daily('2026-06-08', '2026-06-10', '2026-06-11', '2026-06-12'), 40.25],
    ['three more days', daily('2026-06-08', '2026-06-10', '2026-06-11'), null],
    ['a day of next week', daily('2026-06-08', '2026-06-10', '2026-06-11', '2026-06-15'), null],
  ] as const)('%s', (_name, work, hours) => {
    const planned = drop(adaWorks(...work.map(([from, until]): [number, number] => [from, until])));
    if (hours === null) expect(codesOf(planned.findings)).not.toContain('note overtime');
    else {
      const [week] = findingsWith(planned, 'overtime');
      expect(week).toMatchObject({ severity: 'note', facts: { rule: 'week', weekHours: hours } });
    }
  });

  test('begins on Monday at midnight of the office, an hour before the sites', () => {
    // Sunday 22:00 to Monday 2:00 at the sites is 23:00 to 3:00 in New York: 1 h before, 3 h in the week.
    const planned = drop(
      adaWorks(
        [at('2026-06-07', 22), at('2026-06-08', 2)],
        ...daily('2026-06-10', '2026-06-11', '2026-06-12'),
        [at('2026-06-13', 6), at('2026-06-13', 11)],
      ),
    );
    // 3 + 8.25 + 24 + 5.
    expect(findingsWith(planned, 'overtime')[0].facts.weekHours).toBeCloseTo(40.25, 6);
  });
});

test('people who are only asked, or left off, have no hours here', () => {
  const memberships = base.memberships.filter((row) => row.personId === ids.sol);
  const planned = drop({
    ...adaWorks([at(day, 19), at(day, 23)]),
    memberships,
    people: changed(base.people, ids.ada, {}),
  });
  expect(codesOf(planned.findings)).not.toContain('caution overtime');
});
