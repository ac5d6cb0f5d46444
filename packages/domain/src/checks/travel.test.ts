import { describe, expect, test } from 'vitest';
import { MS_PER_MIN } from '../interval.ts';
import {
  at,
  codesOf,
  day,
  dropped,
  findingsWith,
  ids,
  placed,
  sampleIndex,
} from '../testing/sample-board.ts';

// The orchard and the depot are 30 min apart by the default rules (common practice, no source); the driveway
// takes the north crew from 6:00 to 14:15 at the orchard.
const index = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));

describe('travel between the visits of a crew', () => {
  test.each([
    ['on the minute', 30, null],
    ['a minute short', 29, 1],
    ['none at all', 0, 30],
  ])('after the one before, %s', (_name, gapMin, shortByMin) => {
    const planned = dropped(index, ids.floor, ids.northCrew, at(day, 14, 15) + gapMin * MS_PER_MIN);
    if (shortByMin === null) {
      expect(codesOf(planned.findings)).not.toContain('stop travel-gap');
      expect(planned.change.shifts[0]?.held.startMs).toBe(at(day, 14, 15));
      return;
    }
    const [gap] = findingsWith(planned, 'travel-gap');
    expect(gap).toMatchObject({ severity: 'stop', facts: { gapMin, travelMin: 30, shortByMin } });
    expect(gap.against).toEqual([{ kind: 'visit', id: ids.driveway }]);
    expect(gap.clears[0]).toEqual({ kind: 'start-after', atMs: at(day, 14, 45) });
  });

  test.each([
    ['on the minute', 30, null],
    ['a minute short', 29, 1],
  ])('before the one after, %s', (_name, gapMin, shortByMin) => {
    const lengthMs = dropped(index, ids.floor, ids.northCrew, 0).change.visit.during.endMs;
    const startMs = at(day, 6) - gapMin * MS_PER_MIN - lengthMs;
    const planned = dropped(index, ids.floor, ids.northCrew, startMs);
    if (shortByMin === null) expect(codesOf(planned.findings)).not.toContain('stop travel-gap');
    else {
      const [gap] = findingsWith(planned, 'travel-gap');
      expect(gap.facts).toEqual({ gapMin, travelMin: 30, shortByMin, neighbour: 'after' });
      expect(gap.clears[0]).toEqual({ kind: 'start-by', atMs: startMs - MS_PER_MIN });
    }
  });

  test('the same site needs none', () => {
    const planned = dropped(index, ids.patio, ids.northCrew, at(day, 14, 15));
    expect(codesOf(planned.findings)).not.toContain('stop travel-gap');
    expect(planned.change.shifts[0]?.held).toEqual(planned.change.visit.during);
  });

  test('a site without coordinates takes the company’s figure', () => {
    const planned = dropped(index, ids.walk, ids.northCrew, at(day, 14, 15));
    expect(findingsWith(planned, 'travel-gap')[0].facts.travelMin).toBe(30);
  });

  test('another crew’s people can start at once', () => {
    const planned = dropped(index, ids.floor, ids.southCrew, at(day, 14, 15));
    expect(codesOf(planned.findings)).not.toContain('stop travel-gap');
  });

  test('the first visit of a day comes from home', () => {
    const planned = dropped(index, ids.floor, ids.northCrew, at('2026-06-10', 6));
    expect(planned.change.shifts[0]?.held).toEqual(planned.change.visit.during);
  });

  test('a night’s second visit after midnight does not', () => {
    const night = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 16));
    // The driveway ends at 0:15; what follows at 1:00 is still that night's work.
    const planned = dropped(night, ids.floor, ids.northCrew, at('2026-06-10', 1));
    expect(planned.change.shifts[0]?.held.startMs).toBe(at('2026-06-10', 0, 30));
    // It ends at 22:15, on the day before.
    const evening = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 14));
    const next = dropped(evening, ids.floor, ids.northCrew, at('2026-06-10', 1));
    expect(next.change.shifts[0]?.held.startMs).toBe(at('2026-06-10', 0, 30));
    // After the night's rest of 8 h the crew comes from home.
    const rested = dropped(evening, ids.floor, ids.northCrew, at('2026-06-10', 6, 15));
    expect(rested.change.shifts[0]?.held).toEqual(rested.change.visit.during);
  });
});

describe('a visit that comes in between', () => {
  test('gives the one after it its travel, and takes it back when it leaves', () => {
    const later = placed(sampleIndex(), ids.floor, ids.northCrew, at(day, 15));
    const planned = dropped(later, ids.driveway, ids.northCrew, at(day, 6));
    expect(planned.change.reheld).toHaveLength(3);
    for (const { visitId, held } of planned.change.reheld) {
      expect(visitId).toBe(ids.floor);
      expect(held.startMs).toBe(at(day, 14, 30));
    }
    const both = placed(later, ids.driveway, ids.northCrew, at(day, 6));
    const away = dropped(both, ids.driveway, ids.southCrew, at(day, 6));
    expect(away.change.reheld.map(({ held }) => held.startMs)).toEqual([
      at(day, 15),
      at(day, 15),
      at(day, 15),
    ]);
  });
});
