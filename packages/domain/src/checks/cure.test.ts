import { describe, expect, test } from 'vitest';
import { MS_PER_HOUR, MS_PER_MIN } from '../interval.ts';
import type { Snapshot } from '../snapshot.ts';
import {
  at,
  changed,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  placed,
  sampleIndex,
  samplePour,
  sampleSnapshot,
  sampleVisit,
} from '../testing/sample-board.ts';
import type { VisitKind } from '../vocabulary.ts';

const base = sampleSnapshot();
/** The driveway's crew comes at 6:00; its last load is discharged at 7:55. */
const placedMs = at(day, 7, 55);
const withDriveway = (changes: Partial<Snapshot> = {}) =>
  placed(sampleIndex(changes), ids.driveway, ids.northCrew, at(day, 6));

/** The second pour of the same slab, such as a topping. */
const topping = {
  pours: [...base.pours, samplePour('topping', { slabIds: [ids.drivewaySlab] })],
  visits: [...base.visits, sampleVisit('topping-visit', { pourId: 'topping', partYd3: 6 })],
};

describe('a pour beside a green slab (adjacent pour 24 h: common practice, no source)', () => {
  test.each([
    // The truck comes 45 min after the crew; blackouts are half-open.
    ['the truck comes as the blackout ends', 24 * 60 - 45, null],
    ['a minute before', 24 * 60 - 46, 1],
    ['two hours after', 120, 24 * 60 - 45 - 120],
  ])('%s', (_name, afterMin, missingMin) => {
    const startMs = placedMs + afterMin * MS_PER_MIN;
    const planned = dropped(withDriveway(), ids.patio, ids.southCrew, startMs);
    if (missingMin === null) expect(codesOf(planned.findings)).not.toContain('caution adjacent-green');
    else {
      const [green] = findingsWith(planned, 'adjacent-green');
      expect(green).toMatchObject({ severity: 'caution', facts: { use: 'adjacent-pour', releaseHours: 24 } });
      expect(green.against).toEqual([{ kind: 'visit', id: ids.driveway }]);
      expect(green.clears).toEqual([{ kind: 'start-after', atMs: startMs + missingMin * MS_PER_MIN }]);
      expect(green.source.status).toBe('common practice, no source');
    }
  });

  test('looks both ways: dropped before one that stands', () => {
    const planned = dropped(withDriveway(), ids.patio, ids.southCrew, at('2026-06-08', 14));
    const [green] = findingsWith(planned, 'adjacent-green');
    expect(green.facts.thisIs).toBe('earlier');
    // The patio is done at 14:55 on Monday, the driveway's truck comes at 6:45: 8 h 10 min short.
    expect(green.clears).toEqual([
      { kind: 'start-by', atMs: at('2026-06-08', 14) - 8 * MS_PER_HOUR - 10 * MS_PER_MIN },
    ]);
  });

  test('elapsed time through the change of clocks, and longer in the cold', () => {
    const range = { startMs: at('2026-03-01', 0), endMs: at('2026-03-29', 0) };
    const memberships = base.memberships.map((row) => ({ ...row, during: range }));
    const index = placed(
      sampleIndex({ range, memberships }),
      ids.driveway,
      ids.northCrew,
      at('2026-03-07', 6),
    );
    // 24 h after 7:55 on Saturday is 8:55 on Sunday 2026-03-08.
    const released = findingsWith(
      dropped(index, ids.patio, ids.southCrew, at('2026-03-07', 12)),
      'adjacent-green',
    )[0].facts.releasedMs;
    expect(released).toBe(at('2026-03-08', 8, 55));
    const pours = changed(base.pours, ids.drivewayPour, { concreteTempF: 50 });
    const cold = placed(sampleIndex({ pours }), ids.driveway, ids.northCrew, at(day, 6));
    const [green] = findingsWith(dropped(cold, ids.patio, ids.southCrew, at(day, 14)), 'adjacent-green');
    // ASTM C1074, Q 5,000 K: 1 / 0.5475 of the hours at 50 F.
    expect(green.facts.releaseHours).toBeCloseTo(24 / 0.5475, 1);
  });

  test('two parts of one pour in one go are one placing', () => {
    const visits = [
      ...changed(base.visits, ids.driveway, { partYd3: 6 }),
      sampleVisit('part-2', { pourId: ids.drivewayPour, partYd3: 6 }),
    ];
    const index = placed(sampleIndex({ visits }), ids.driveway, ids.northCrew, at(day, 6));
    // The first part is discharged at 6:55; 45 min is the longest gap at 70 F (company rule).
    const joined = dropped(index, 'part-2', ids.southCrew, at(day, 6, 55));
    expect(codesOf(joined.findings)).not.toContain('caution adjacent-green');
    const late = dropped(index, 'part-2', ids.southCrew, at(day, 6, 56));
    expect(codesOf(late.findings)).toContain('caution adjacent-green');
  });
});

describe('the same slab', () => {
  test('is not placed upon within the foot blackout (Masonry and Concrete 2004 p. 76: after day 1)', () => {
    const planned = dropped(withDriveway(topping), 'topping-visit', ids.southCrew, at(day, 15));
    const [stop] = findingsWith(planned, 'cure-blackout');
    expect(stop).toMatchObject({ severity: 'stop', facts: { use: 'foot', releaseHours: 24 } });
    expect(stop.source).toEqual({
      title: 'Masonry and Concrete (2004) p. 76, foot traffic after day 1',
      status: 'published',
    });
    const later = dropped(withDriveway(topping), 'topping-visit', ids.southCrew, at('2026-06-10', 7, 10));
    expect(codesOf(later.findings)).not.toContain('stop cure-blackout');
  });

  test('by the company’s own hours where it has set them', () => {
    const rules = { ...base.rules, cureHours: { foot: 48 } };
    const planned = dropped(
      withDriveway({ ...topping, rules }),
      'topping-visit',
      ids.southCrew,
      at('2026-06-10', 9),
    );
    expect(findingsWith(planned, 'cure-blackout')[0]).toMatchObject({
      facts: { releaseHours: 48 },
      source: { status: 'company setting' },
    });
  });
});

describe('other visits at the site', () => {
  test.each([
    // Masonry and Concrete (2004) p. 76: foot and edge forms 24 h, light vehicles 7 days.
    ['prep the same day', 'prep', null, 12, 'caution cure-blackout'],
    ['prep in the same week: no machines on the slab', 'prep', null, 72, 'note cure-blackout'],
    ['prep after a week', 'prep', null, 169, null],
    ['seal the same day', 'seal', null, 12, 'caution cure-blackout'],
    ['seal the day after', 'seal', null, 24, null],
    ['strip its forms the same day', 'strip', ids.driveway, 12, 'caution cure-blackout'],
    ['strip its forms the day after', 'strip', ids.driveway, 24, null],
    ['strip another pour’s forms', 'strip', ids.patio, 12, null],
    ['saw', 'saw', ids.driveway, 12, null],
    ['protect', 'protect', ids.driveway, 1, null],
  ] as const)('%s', (_name, kind, causedByVisitId, afterHours, expected) => {
    const visits = [...base.visits, sampleVisit('other', { kind: kind as VisitKind, causedByVisitId })];
    const startMs = placedMs + afterHours * MS_PER_HOUR;
    const codes = codesOf(dropped(withDriveway({ visits }), 'other', ids.southCrew, startMs).findings);
    if (expected === null) expect(codes.filter((code) => code.endsWith('cure-blackout'))).toEqual([]);
    else expect(codes).toContain(expected);
  });

  test('a pour says nothing of its own follow-up, which moves with it', () => {
    const visits = [...base.visits, sampleVisit('strip', { kind: 'strip', causedByVisitId: ids.driveway })];
    const index = placed(withDriveway({ visits }), 'strip', ids.southCrew, at(day, 20));
    const pour = dropped(index, ids.driveway, ids.northCrew, at(day, 6));
    expect(codesOf(pour.findings).some((code) => code.endsWith('cure-blackout'))).toBe(false);
    const strip = dropped(index, 'strip', ids.southCrew, at(day, 20));
    expect(codesOf(strip.findings)).toContain('caution cure-blackout');
  });

  test('another site’s slab is nobody’s business', () => {
    const planned = dropped(withDriveway(), ids.floor, ids.southCrew, at(day, 15));
    expect(codesOf(planned.findings).filter((code) => /cure|green/.test(code))).toEqual([]);
  });
});
