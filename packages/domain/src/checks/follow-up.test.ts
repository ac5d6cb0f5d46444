import { describe, expect, test } from 'vitest';
import { withChange } from '../change-rows.ts';
import { check } from '../check.ts';
import type { Visit } from '../snapshot.ts';
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
const pours = changed(base.pours, ids.drivewayPour, { jointing: 'saw-conventional' });
// Crew at 6:00, finishing until 13:45, so the saw window is 17:45 to 1:45 (PCA, ACI 302.1R: 4 to 12 h).
const window = { startMs: at(day, 17, 45), endMs: at('2026-06-10', 1, 45) };
const saw = (changes: Partial<Visit> = {}) =>
  sampleVisit('saw', { kind: 'saw', causedByVisitId: ids.driveway, plannedMin: 120, ...changes });
const withSaw = (changes: Partial<Visit> = {}) =>
  sampleIndex({ pours, visits: [...base.visits, saw(changes)] });

describe('a saw window that nobody mans', () => {
  test.each([
    ['more than a day ahead', window.startMs - 24 * 3_600_000 - 1, 'note'],
    ['within a day', window.startMs - 24 * 3_600_000, 'caution'],
  ] as const)('%s', (_name, atMs, severity) => {
    const planned = dropped(sampleIndex({ pours }), ids.driveway, ids.northCrew, at(day, 6), atMs);
    expect(findingsWith(planned, 'follow-up-unmanned')[0]).toMatchObject({
      severity,
      during: window,
      clears: [{ kind: 'man-follow-up', window }],
    });
  });

  test('tooled joints have none', () => {
    const planned = dropped(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));
    expect(codesOf(planned.findings).some((code) => code.endsWith('follow-up-unmanned'))).toBe(false);
  });

  test('a waiting saw visit mans nothing, one that stands in the window does', () => {
    const waiting = placed(withSaw(), ids.driveway, ids.northCrew, at(day, 6));
    expect(codesOf(check(waiting, nowMs).get(ids.driveway) ?? [])).toContain('note follow-up-unmanned');
    const manned = placed(waiting, 'saw', ids.southCrew, at(day, 18));
    const findings = check(manned, nowMs);
    for (const visitId of [ids.driveway, 'saw'])
      expect(codesOf(findings.get(visitId) ?? []).some((code) => code.endsWith('follow-up-unmanned'))).toBe(
        false,
      );
  });

  test('a saw visit that stands outside the window mans nothing', () => {
    let index = placed(withSaw(), ids.driveway, ids.northCrew, at(day, 6));
    index = placed(index, 'saw', ids.southCrew, at(day, 16));
    const unmanned = check(index, nowMs)
      .get(ids.driveway)
      ?.find((one) => one.code === 'follow-up-unmanned');
    expect(unmanned).toMatchObject({
      facts: { standsOutside: true },
      against: [{ kind: 'visit', id: 'saw' }],
    });
  });

  test.each([
    ['as it opens', at(day, 17, 45), false],
    ['a minute before', at(day, 17, 44), true],
    ['after midnight', at('2026-06-10', 1, 44), false],
    ['as it closes', at('2026-06-10', 1, 45), true],
  ] as const)('a saw visit that begins %s', (_name, startMs, outside) => {
    const index = placed(withSaw(), ids.driveway, ids.northCrew, at(day, 6));
    const planned = dropped(index, 'saw', ids.southCrew, startMs);
    expect(codesOf(planned.findings).includes('caution follow-up-unmanned')).toBe(outside);
  });

  test('a saw visit whose pour is off the board goes by the window it was given', () => {
    const index = withSaw({ window: { startMs: at(day, 10), endMs: at(day, 12) } });
    expect(codesOf(dropped(index, 'saw', ids.southCrew, at(day, 10)).findings)).toEqual([]);
    expect(
      findingsWith(dropped(index, 'saw', ids.southCrew, at(day, 12)), 'follow-up-unmanned')[0].clears,
    ).toEqual([{ kind: 'start-by', atMs: at(day, 12) }]);
  });
});

describe('follow-ups of a placement', () => {
  test('saw and strip, each with its window and what is there already', () => {
    const { change } = dropped(withSaw(), ids.driveway, ids.northCrew, at(day, 6));
    expect(change.followUps).toEqual([
      {
        kind: 'saw',
        titleKey: 'follow-up.saw',
        window,
        plannedMin: 120,
        existingVisitId: 'saw',
      },
      {
        kind: 'strip',
        titleKey: 'follow-up.strip',
        // Edge forms 24 h after 7:55 (Masonry and Concrete 2004 p. 76), wanted back within 3 days.
        window: { startMs: at('2026-06-10', 7, 55), endMs: at('2026-06-13', 7, 55) },
        plannedMin: 120,
        existingVisitId: null,
      },
    ]);
  });

  test('move with the pour, and a called-off one is made anew', () => {
    const standing = placed(withSaw(), ids.driveway, ids.northCrew, at(day, 6));
    expect(standing.visits.get('saw')?.window).toEqual(window);
    const moved = withChange(
      standing,
      dropped(standing, ids.driveway, ids.northCrew, at('2026-06-10', 6)).change,
    );
    expect(moved.visits.get('saw')?.window?.startMs).toBe(at('2026-06-10', 17, 45));
    const without = withSaw({ state: 'called-off' });
    const { change } = dropped(without, ids.driveway, ids.northCrew, at(day, 6));
    expect(change.followUps.map((one) => one.existingVisitId)).toEqual([null, null]);
  });

  test('other kinds cause none and take their planned minutes', () => {
    const { change, chain } = dropped(withSaw(), 'saw', ids.southCrew, at(day, 18));
    expect(change.followUps).toEqual([]);
    expect(chain).toBeNull();
    expect(change.visit.during).toEqual({ startMs: at(day, 18), endMs: at(day, 20) });
    expect(change.mixOrder).toBeNull();
    expect(change.booking).toBeNull();
  });
});
