import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Chain, type ChainInput, chainOf, chainStartingAt } from './chain.ts';
import { defaultCompanyRules } from './company-rules.ts';
import { MS_PER_HOUR, MS_PER_MIN } from './interval.ts';
import { chainOfPlaced } from './plan.ts';
import { InputProblem } from './problem.ts';
import type { Pour } from './snapshot.ts';
import { at, day, ids, placed, sampleIndex, samplePour, sampleSnapshot } from './testing/sample-board.ts';
import { formatClock } from './zone.ts';

const { sites, mixes, plants } = sampleSnapshot();
const [site] = sites;
const [mix] = mixes;
const [plant] = plants;
if (!site || !mix || !plant) throw new Error('The sample board has a site, a mix and a plant');

function chain(pour: Partial<Pour>, more: Partial<ChainInput> = {}): Chain {
  return chainOf({
    pour: samplePour('p', { placingRateYd3PerHour: 30, ...pour }),
    visit: { partYd3: null },
    site: site as ChainInput['site'],
    mix: mix ?? null,
    plant,
    rules: defaultCompanyRules,
    crewStartMs: at(day, 6),
    ...more,
  });
}

const clock = (ms: number): string => formatClock(ms, 'America/Chicago', 'es');

describe('times', () => {
  test('a floor of 60 yd3 at 30 yd3/h, crew there at 6:00', () => {
    const floor = chain({ orderedYd3: 60, areaFt2: 3200, jointing: 'saw-conventional' });
    expect({
      firstLoad: clock(floor.firstLoadMs),
      arrivals: floor.loads.map((load) => clock(load.arriveMs)),
      lastLoad: clock(floor.lastLoadMs),
      bleedUntil: clock(floor.bleedUntilMs),
      opens: clock(floor.window.opensMs),
      firstCloses: clock(floor.window.firstClosesMs),
      lastOpens: clock(floor.window.lastOpensMs),
      closes: clock(floor.window.closesMs),
      end: clock(floor.endMs),
    }).toEqual({
      // 45 min of set-up: company rule. 10 yd3 every 20 min at 30 yd3/h: arithmetic.
      firstLoad: '6:45',
      arrivals: ['6:45', '7:05', '7:25', '7:45', '8:05', '8:25'],
      // 10 min to discharge: published planning example.
      lastLoad: '8:35',
      // At 70 F initial set 4 h and final set 6 h after placing (ACI/PCA table, from memory; window of ACI 302.1R);
      // bleeding ends at three quarters of the initial set: common practice, no source.
      bleedUntil: '11:35',
      opens: '10:45',
      firstCloses: '12:45',
      lastOpens: '12:35',
      closes: '14:35',
      // 32 person-hours by the 9 people that are needed take 3.56 h from 10:45, to 14:19; 30 min of wash-up.
      end: '14:49',
    });
    expect(floor.finishersNeeded).toBe(9);
  });

  test('saw windows run over midnight (PCA and ACI 302.1R, published: 4 to 12 h, early entry 1 to 4 h)', () => {
    const late = chain({ jointing: 'saw-conventional' }, { crewStartMs: at(day, 10, 15) });
    expect(clock(late.finishing.endMs)).toBe('17:00');
    expect(late.sawWindow).toEqual({ startMs: at(day, 21), endMs: at('2026-06-10', 5) });
    const early = chain({ jointing: 'saw-early-entry' }, { crewStartMs: at(day, 10, 15) });
    expect(early.sawWindow).toEqual({ startMs: at(day, 18), endMs: at(day, 21) });
    expect(chain({ jointing: 'tooled' }).sawWindow).toBeNull();
    expect(chain({ jointing: 'none' }).sawWindow).toBeNull();
  });

  test('one part of a pour takes its share of yards, area and people', () => {
    const pour = { orderedYd3: 60, areaFt2: 3200 };
    const half = chain(pour, { visit: { partYd3: 30 } });
    expect(half.loads.map((load) => load.yd3)).toEqual([10, 10, 10]);
    expect(half.areaFt2).toBe(1600);
    // Arithmetic: 16 person-hours over 50 min of placing and 2 h of window, 5.65.
    expect(half.finishersNeeded).toBe(6);
  });

  test('trucks that come faster than they unload wait for each other', () => {
    const fast = chain({ orderedYd3: 30, placingRateYd3PerHour: 120 });
    expect(fast.spacingMin).toBe(5);
    expect(fast.waitMin).toBe(10);
    // 10 batch and check + 10 haul (4.2 miles) + 10 wait + 10 unload.
    expect(fast.haulMin).toBe(15);
    expect(fast.oldestMin).toBe(45);
  });

  test('trucks in rotation: round trip over spacing, never more than loads', () => {
    // 10 + 15 + 10 + 5 + 15 = 55 min over 20: 3 trucks. Published planning example for the rule.
    expect(chain({ orderedYd3: 60 }).trucksInRotation).toBe(3);
    expect(chain({ orderedYd3: 10 }).trucksInRotation).toBe(1);
  });

  test('finishing never outlasts the last patch’s final set', () => {
    const tooFew = chain({ orderedYd3: 60, areaFt2: 3200, peopleToFinish: 1 });
    expect(tooFew.finishing.endMs).toBe(tooFew.window.closesMs);
  });

  test('a pour without a slab yet still has its times', () => {
    const bare = chain({ areaFt2: 0, orderedYd3: 20 });
    expect(bare.finishersNeeded).toBeNull();
    expect(bare.finishing.endMs).toBe(bare.window.lastOpensMs);
  });

  test('blackouts begin when the last load is discharged (Masonry and Concrete 2004 p. 76: foot after day 1)', () => {
    const pour = chain({});
    const foot = pour.blackouts.find((one) => one.use === 'foot');
    expect(foot?.interval.startMs).toBe(pour.lastLoadMs);
    expect(((foot?.interval.endMs ?? 0) - pour.lastLoadMs) / MS_PER_HOUR).toBeCloseTo(24, 6);
  });
});

describe('the clock of the site', () => {
  test.each([
    // RFC 5545 instants; elapsed time through both changes of America/Chicago and a night over midnight.
    ['spring: 2:00 is skipped', '2026-03-07', 22, 'America/Chicago', '3:45'],
    ['autumn: 1:00 comes twice', '2026-10-31', 22, 'America/Chicago', '1:45'],
    ['no change', '2026-06-09', 22, 'America/Chicago', '2:45'],
  ] as const)('%s', (_name, siteDay, hour, zone, opens) => {
    const night = chain({}, { crewStartMs: at(siteDay, hour) });
    // Arithmetic: set-up 45 min and 4 h to the initial set, whatever the clock does.
    expect(night.window.opensMs - night.crewStartMs).toBe(4 * MS_PER_HOUR + 45 * MS_PER_MIN);
    expect(formatClock(night.window.opensMs, zone, 'es')).toBe(opens);
  });
});

describe('properties', () => {
  const pours = fc.record({
    orderedYd3: fc.integer({ min: 1, max: 3000 }).map((tenths) => tenths / 10),
    areaFt2: fc.integer({ min: 0, max: 40_000 }),
    placingRateYd3PerHour: fc.constantFrom(null, 7, 18, 30, 33.3, 60),
    loadYd3: fc.constantFrom(null, 8, 9, 10.5),
    concreteTempF: fc.constantFrom(null, 40, 60, 85, 95),
    finish: fc.constantFrom('broom' as const, 'hard-trowel' as const, 'stamped' as const),
    jointing: fc.constantFrom('saw-conventional' as const, 'tooled' as const),
  });

  test('moving a chain is the same as reckoning it there', () => {
    fc.assert(
      fc.property(pours, fc.integer({ min: -5_000, max: 5_000 }), (pour, minutes) => {
        const atZero = chain(pour, { crewStartMs: 0 });
        const startMs = at(day, 6) + minutes * MS_PER_MIN;
        expect(chainStartingAt(atZero, startMs)).toEqual(chain(pour, { crewStartMs: startMs }));
      }),
    );
  });

  test('every link follows the one before', () => {
    fc.assert(
      fc.property(pours, (pour) => {
        const { crewStartMs, firstLoadMs, lastLoadMs, window, finishing, washUp, endMs } = chain(pour);
        const order = [crewStartMs, firstLoadMs, lastLoadMs, window.lastOpensMs, finishing.endMs, endMs];
        expect([...order].sort((a, b) => a - b)).toEqual(order);
        expect(finishing.endMs).toBeLessThanOrEqual(window.closesMs);
        expect(washUp).toEqual({ startMs: finishing.endMs, endMs });
        expect((endMs - crewStartMs) % MS_PER_MIN).toBe(0);
      }),
    );
  });

  test('loads add up to the order', () => {
    fc.assert(
      fc.property(pours, (pour) => {
        const sum = chain(pour).loads.reduce((total, load) => total + load.yd3, 0);
        expect(sum).toBeCloseTo(pour.orderedYd3, 6);
      }),
    );
  });
});

describe('on the board', () => {
  test('a placed pour has its chain, a waiting one and a strip visit have none', () => {
    const index = placed(sampleIndex(), ids.driveway, ids.northCrew, at(day, 6));
    const standing = index.visits.get(ids.driveway);
    const waiting = index.visits.get(ids.patio);
    if (!standing || !waiting) throw new Error('Both visits are on the sample board');
    expect(chainOfPlaced(index, standing)?.crewStartMs).toBe(at(day, 6));
    expect(chainOfPlaced(index, waiting)).toBeNull();
    expect(chainOfPlaced(index, { ...standing, state: 'called-off' })).toBeNull();
  });

  test.each([
    ['yards that are none', { orderedYd3: 0 }, 'partYd3'],
    ['concrete that does not set', { concreteTempF: 15 }, 'concreteTempF'],
    ['a negative set-up', { setUpMin: -5 }, 'setUpMin'],
    ['a rate of nothing', { placingRateYd3PerHour: 0 }, 'placingRateYd3PerHour'],
  ] as const)('refuses %s by name', (_name, pour, field) => {
    try {
      chain(pour);
    } catch (problem) {
      expect(problem).toBeInstanceOf(InputProblem);
      expect((problem as InputProblem).field).toBe(field);
      return;
    }
    throw new Error('Nothing was thrown');
  });
});
