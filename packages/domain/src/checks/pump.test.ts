import { describe, expect, test } from 'vitest';
import { rowsOfVisit, withVisitRows } from '../board-index.ts';
import { withChange } from '../change-rows.ts';
import { planPlacement } from '../plan-placement.ts';
import { InputProblem } from '../problem.ts';
import type { Equipment } from '../snapshot.ts';
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
} from '../testing/sample-board.ts';

const base = sampleSnapshot();
const [boom] = base.equipment;
if (!boom) throw new Error('The sample board has a pump');
const second: Equipment = { ...boom, id: 'boom-2', name: 'Boom 2' };
const line: Equipment = { ...boom, id: 'line-1', name: 'A line pump', boom: false };

// The walk is placed from 6:45 to 6:55; the boom travels 30, sets up 30 and washes out 45 min: held 5:45 to 7:40.
const withWalk = (equipment: Equipment[] = base.equipment) =>
  placed(sampleIndex({ equipment }), ids.walk, ids.southCrew, at(day, 6));

describe('one pump', () => {
  test('is held for travel, set-up and wash-out too', () => {
    const { change } = dropped(sampleIndex(), ids.walk, ids.southCrew, at(day, 6));
    expect(change.booking).toEqual({
      equipmentId: ids.pump,
      during: { startMs: at(day, 6, 45), endMs: at(day, 6, 55) },
      held: { startMs: at(day, 5, 45), endMs: at(day, 7, 40) },
    });
  });

  test.each([
    // The floor's pump is held from 15 min before its crew comes. Arithmetic on half-open intervals.
    ['touching', 7, 55, null],
    ['a minute earlier', 7, 54, at(day, 7, 55)],
    ['at the same time', 6, 0, at(day, 7, 55)],
  ] as const)('%s', (_name, hour, minute, startAfterMs) => {
    const planned = dropped(withWalk(), ids.floor, ids.northCrew, at(day, hour, minute));
    if (startAfterMs === null) expect(codesOf(planned.findings)).not.toContain('stop pump-overlap');
    else {
      const [overlap] = findingsWith(planned, 'pump-overlap');
      expect(overlap).toMatchObject({ severity: 'stop', facts: { pumpsThatSuit: 1, pumpsFree: 0 } });
      expect(overlap.clears).toEqual([{ kind: 'start-after', atMs: startAfterMs }]);
      expect(planned.change.booking).toBeNull();
    }
  });

  test('named by the pour, it stops with the visit that has it', () => {
    const equipment = [boom, second];
    const pours = changed(base.pours, ids.floorPour, { pumpId: ids.pump });
    const index = placed(sampleIndex({ equipment, pours }), ids.walk, ids.southCrew, at(day, 6));
    const [overlap] = findingsWith(dropped(index, ids.floor, ids.northCrew, at(day, 6)), 'pump-overlap');
    expect(overlap.against).toEqual([
      { kind: 'equipment', id: ids.pump },
      { kind: 'visit', id: ids.walk },
    ]);
    expect(overlap.clears).toEqual([{ kind: 'other-pump' }, { kind: 'start-after', atMs: at(day, 7, 55) }]);
  });

  test('called off or refused, it is free', () => {
    for (const state of ['called-off', 'refused'] as const) {
      const booking = withWalk().bookingsByVisit.get(ids.walk)?.[0];
      if (!booking) throw new Error('The walk has a booking');
      const index = sampleIndex({ bookings: [{ ...booking, state }] });
      expect(codesOf(dropped(index, ids.floor, ids.northCrew, at(day, 6)).findings)).not.toContain(
        'stop pump-overlap',
      );
    }
  });
});

describe('which pump', () => {
  test('the first that suits and is free, by name', () => {
    const index = withWalk([second, line, boom]);
    const { change } = dropped(index, ids.floor, ids.northCrew, at(day, 6));
    expect(change.booking?.equipmentId).toBe('boom-2');
    const pours = changed(base.pours, ids.floorPour, { placingMethod: 'line-pump' });
    const lineIndex = sampleIndex({ pours, equipment: [boom, line] });
    expect(dropped(lineIndex, ids.floor, ids.northCrew, at(day, 6)).change.booking?.equipmentId).toBe(
      'line-1',
    );
  });

  test('the one asked for comes before the pour’s own', () => {
    const pours = changed(base.pours, ids.floorPour, { pumpId: ids.pump });
    const index = sampleIndex({ pours, equipment: [boom, second] });
    const placement = { visitId: ids.floor, crewId: ids.northCrew, crewStartMs: at(day, 6) };
    expect(planPlacement(index, placement, nowMs).change.booking?.equipmentId).toBe(ids.pump);
    const asked = planPlacement(index, { ...placement, pumpId: 'boom-2' }, nowMs);
    expect(asked.change.booking?.equipmentId).toBe('boom-2');
  });

  test('a moved visit keeps its pump while that is free', () => {
    const index = sampleIndex({ equipment: [boom, second] });
    const placement = {
      visitId: ids.floor,
      crewId: ids.northCrew,
      crewStartMs: at(day, 6),
      pumpId: 'boom-2',
    };
    const standing = withChange(index, planPlacement(index, placement, nowMs).change);
    const moved = dropped(standing, ids.floor, ids.northCrew, at('2026-06-10', 6));
    expect(moved.change.booking?.equipmentId).toBe('boom-2');
    const taken = standing.bookingsByVisit.get(ids.floor)?.[0];
    if (!taken) throw new Error('The floor has a booking');
    const during = { startMs: at('2026-06-10', 5), endMs: at('2026-06-10', 12) };
    const elsewhere = { ...taken, id: 'walk', visitId: ids.walk, during, held: during };
    const rows = rowsOfVisit(standing, ids.walk);
    if (!rows) throw new Error('The walk is on the sample board');
    const busy = withVisitRows(standing, { ...rows, bookings: [elsewhere] });
    const otherwise = dropped(busy, ids.floor, ids.northCrew, at('2026-06-10', 6));
    expect(otherwise.change.booking?.equipmentId).toBe(ids.pump);
  });

  test('none for a chute, unless one is asked for', () => {
    const index = sampleIndex();
    expect(dropped(index, ids.driveway, ids.northCrew, at(day, 6)).change.booking).toBeNull();
    const placement = { visitId: ids.driveway, crewId: ids.northCrew, crewStartMs: at(day, 6) };
    const asked = planPlacement(index, { ...placement, pumpId: ids.pump }, nowMs);
    expect(asked.change.booking?.equipmentId).toBe(ids.pump);
  });

  test('none that suits stops, with nothing to wait for', () => {
    const [overlap] = findingsWith(
      dropped(sampleIndex({ equipment: [line] }), ids.walk, ids.southCrew, at(day, 6)),
      'pump-overlap',
    );
    expect(overlap).toMatchObject({ facts: { pumpsThatSuit: 0 }, clears: [] });
  });

  test('an unknown one is refused by name', () => {
    const placement = { visitId: ids.walk, crewId: ids.southCrew, crewStartMs: at(day, 6), pumpId: 'gone' };
    expect(() => planPlacement(sampleIndex(), placement, nowMs)).toThrow(InputProblem);
    expect(() => planPlacement(sampleIndex(), placement, nowMs)).toThrow(/pumpId/);
  });
});

test.each([
  // Arithmetic: 10 yd3 every 30 min are 20 yd3/h.
  ['as much as the trucks bring', 20, null],
  ['less', 16, 38],
  ['unknown', null, null],
] as const)('output: %s', (_name, outputYd3PerHour, minutes) => {
  const planned = dropped(
    sampleIndex({ equipment: [{ ...boom, outputYd3PerHour }] }),
    ids.floor,
    ids.northCrew,
    at(day, 6),
  );
  if (minutes === null) expect(codesOf(planned.findings)).not.toContain('caution pump-slower-than-trucks');
  else
    expect(findingsWith(planned, 'pump-slower-than-trucks')[0].clears).toContainEqual({
      kind: 'spacing-over',
      minutes,
    });
});
