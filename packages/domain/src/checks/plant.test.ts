import { describe, expect, test } from 'vitest';
import { MS_PER_MIN } from '../interval.ts';
import type { Plant } from '../snapshot.ts';
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
  sampleSnapshot,
} from '../testing/sample-board.ts';
import { instantAt } from '../zone.ts';
import { plantLoadsAt } from './plant.ts';

const base = sampleSnapshot();
const [plant] = base.plants;
if (!plant) throw new Error('The sample board has a plant');
const withPlant = (change: Partial<Plant>) => ({ plants: changed(base.plants, ids.plant, change) });

describe('plant hours', () => {
  // The driveway's first truck comes 45 min after the crew, is batched 25 min before that (10 batch and check, 15
  // haul), and its second one an hour later. The plant is open 5:00 to 17:00 on weekdays.
  test.each([
    ['first load at opening', day, 4, 40, null],
    ['a minute before opening', day, 4, 39, { loadsOutside: 1, closedThatDay: false }],
    ['last load at closing', day, 15, 40, null],
    ['a minute after closing', day, 15, 41, { loadsOutside: 1, closedThatDay: false }],
    ['a Saturday', '2026-06-13', 7, 0, { loadsOutside: 2, closedThatDay: true }],
    ['a day that it is closed', '2026-06-19', 7, 0, { loadsOutside: 2, closedThatDay: true }],
  ] as const)('%s', (_name, siteDay, hour, minute, facts) => {
    const planned = dropped(sampleIndex(), ids.driveway, ids.northCrew, at(siteDay, hour, minute));
    if (facts === null) expect(codesOf(planned.findings)).not.toContain('stop plant-closed');
    else expect(findingsWith(planned, 'plant-closed')[0]).toMatchObject({ severity: 'stop', facts });
  });

  test('says when the crew would have to start', () => {
    const early = dropped(sampleIndex(), ids.driveway, ids.northCrew, at(day, 4));
    expect(findingsWith(early, 'plant-closed')[0].clears).toContainEqual({
      kind: 'start-after',
      atMs: at(day, 4, 40),
    });
    const late = dropped(sampleIndex(), ids.driveway, ids.northCrew, at(day, 17));
    const clears = findingsWith(late, 'plant-closed')[0].clears;
    expect(clears).toContainEqual({ kind: 'start-by', atMs: at(day, 15, 40) });
    expect(clears).toContainEqual({ kind: 'start-after', atMs: at('2026-06-10', 4, 40) });
    const saturday = dropped(sampleIndex(), ids.driveway, ids.northCrew, at('2026-06-13', 7));
    expect(findingsWith(saturday, 'plant-closed')[0].clears).toContainEqual({
      kind: 'start-after',
      atMs: at('2026-06-15', 4, 40),
    });
  });

  test('are those of the plant’s own zone', () => {
    // In New York the plant opens an hour before the sites' clock shows 5:00.
    const index = sampleIndex(withPlant({ zone: 'America/New_York' }));
    expect(codesOf(dropped(index, ids.driveway, ids.northCrew, at(day, 3, 40)).findings)).not.toContain(
      'stop plant-closed',
    );
    expect(codesOf(dropped(index, ids.driveway, ids.northCrew, at(day, 15, 40)).findings)).toContain(
      'stop plant-closed',
    );
  });

  const night = { ...plant, hours: [null, { fromMin: 1200, untilMin: 240 }, null, null, null, null, null] };
  test.each([
    // Tuesday 20:00 to Wednesday 4:00.
    ['before', night, day, 19, 59, false],
    ['at the start', night, day, 20, 0, true],
    ['over midnight', night, '2026-06-10', 2, 0, true],
    ['at the end', night, '2026-06-10', 4, 0, true],
    ['after', night, '2026-06-10', 4, 1, false],
    ['closed on that Tuesday', { ...night, closedDays: [day] }, '2026-06-10', 2, 0, false],
    ['hours unknown', { ...plant, hours: [] }, day, 2, 0, true],
  ])('through the night: %s', (_name, one, siteDay, hour, minute, open) => {
    expect(plantLoadsAt(one, at(siteDay, hour, minute))).toBe(open);
  });

  test('stay by the clock when it changes', () => {
    // 5:00 in Chicago is 11:00Z before and 10:00Z after 2026-03-08 (zone database). A Sunday is made open.
    const open = { ...plant, hours: Array.from({ length: 7 }, () => ({ fromMin: 300, untilMin: 1020 })) };
    for (const [instant, isOpen] of [
      ['2026-03-07T10:59:00Z', false],
      ['2026-03-07T11:00:00Z', true],
      ['2026-03-08T09:59:00Z', false],
      ['2026-03-08T10:00:00Z', true],
    ] as const)
      expect(plantLoadsAt(open, Date.parse(instant))).toBe(isOpen);
    expect(instantAt('2026-03-08', 300, 'America/Chicago')).toBe(Date.parse('2026-03-08T10:00:00Z'));
  });
});

describe('yards per hour', () => {
  // The floor takes 20 yd3/h for 3 h from 6:00 on the south crew; the driveway 10 yd3/h.
  const both = placed(sampleIndex(withPlant({ maxYd3PerHour: 29 })), ids.floor, ids.southCrew, at(day, 6));

  test('of all orders together', () => {
    const planned = dropped(both, ids.driveway, ids.northCrew, at(day, 6));
    const [over] = findingsWith(planned, 'plant-over-capacity');
    expect(over).toMatchObject({
      severity: 'caution',
      facts: { peakYd3PerHour: 30, maxYd3PerHour: 29, ownYd3PerHour: 10, otherOrders: 1 },
    });
    expect(over.against).toEqual([
      { kind: 'plant', id: ids.plant },
      { kind: 'visit', id: ids.floor },
    ]);
    expect(over.clears).toContainEqual({ kind: 'placing-rate-under', yd3PerHour: 9 });
  });

  test('at the limit they fit', () => {
    const index = placed(sampleIndex(withPlant({ maxYd3PerHour: 30 })), ids.floor, ids.southCrew, at(day, 6));
    const planned = dropped(index, ids.driveway, ids.northCrew, at(day, 6));
    expect(codesOf(planned.findings)).not.toContain('caution plant-over-capacity');
  });

  test('one after the other they fit', () => {
    // Batching of the floor: 3 h from 6:00 less the longer haul of 40 min (11 miles by the default rules).
    const planned = dropped(both, ids.driveway, ids.northCrew, at(day, 9, 30));
    expect(codesOf(planned.findings)).not.toContain('caution plant-over-capacity');
  });

  test('an order that is called off or refused takes none', () => {
    for (const state of ['called-off', 'refused'] as const) {
      const order = both.ordersByVisit.get(ids.floor)?.[0];
      if (!order) throw new Error('The floor has an order');
      const index = sampleIndex({ ...withPlant({ maxYd3PerHour: 29 }), mixOrders: [{ ...order, state }] });
      const planned = dropped(index, ids.driveway, ids.northCrew, at(day, 6));
      expect(codesOf(planned.findings)).not.toContain('caution plant-over-capacity');
    }
  });

  test('a plant without a limit takes any', () => {
    const index = placed(
      sampleIndex(withPlant({ maxYd3PerHour: null })),
      ids.floor,
      ids.southCrew,
      at(day, 6),
    );
    expect(codesOf(dropped(index, ids.driveway, ids.northCrew, at(day, 6)).findings)).not.toContain(
      'caution plant-over-capacity',
    );
  });
});

describe('the mix', () => {
  test('none chosen is a caution, and nothing is ordered', () => {
    const pours = changed(base.pours, ids.drivewayPour, { mixId: null });
    const planned = dropped(sampleIndex({ pours }), ids.driveway, ids.northCrew, at(day, 6));
    expect(findingsWith(planned, 'mix-not-carried')[0]).toMatchObject({
      severity: 'caution',
      clears: [{ kind: 'choose-mix' }],
    });
    expect(planned.change.mixOrder).toBeNull();
  });

  test('one that no plant carries stops', () => {
    for (const changes of [{ mixes: [] }, { plants: [] }]) {
      const planned = dropped(sampleIndex(changes), ids.driveway, ids.northCrew, at(day, 6));
      expect(findingsWith(planned, 'mix-not-carried')[0].severity).toBe('stop');
    }
  });

  test('is ordered from its plant, first truck to last discharged', () => {
    const { change, chain } = dropped(sampleIndex(), ids.floor, ids.southCrew, at(day, 6));
    expect(change.mixOrder).toEqual({
      plantId: ids.plant,
      mixId: ids.mix,
      orderedYd3: 60,
      loadYd3: 10,
      spacingMin: 30,
      during: { startMs: at(day, 6, 45), endMs: at(day, 6, 45) + (5 * 30 + 10) * MS_PER_MIN },
    });
    expect(chain?.placing).toEqual(change.mixOrder?.during);
  });
});
