import { expect, test } from 'vitest';
import type { Mix, Pour } from '../snapshot.ts';
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
} from '../testing/sample-board.ts';

const base = sampleSnapshot();

function drop(pour: Partial<Pour>, mix: Partial<Mix> = {}, rules: Partial<typeof base.rules> = {}) {
  const index = sampleIndex({
    pours: changed(base.pours, ids.drivewayPour, { orderedYd3: 40, ...pour }),
    visits: changed(base.visits, ids.driveway, { partYd3: pour.orderedYd3 ?? 40 }),
    mixes: changed(base.mixes, ids.mix, mix),
    rules: { ...base.rules, ...rules },
  });
  return dropped(index, ids.driveway, ids.northCrew, at(day, 6));
}

test.each([
  // Company rule 45 min at 70 F (common practice, no source), halved and doubled by 20 F (ACI 305R-10, 306R-16).
  ['45 min at 70 F', { placingRateYd3PerHour: 600 / 45, loadYd3: 10 }, null],
  ['46 min at 70 F', { placingRateYd3PerHour: 600 / 46, loadYd3: 10 }, 45],
  ['24 min at 90 F', { placingRateYd3PerHour: 25, loadYd3: 10, concreteTempF: 90 }, 22],
  ['60 min at 50 F', { placingRateYd3PerHour: 10, loadYd3: 10, concreteTempF: 50 }, null],
  ['a single load has no joint', { placingRateYd3PerHour: 5, orderedYd3: 9 }, null],
] as const)('spacing: %s', (_name, pour, minutes) => {
  const planned = drop(pour);
  if (minutes === null) expect(codesOf(planned.findings)).not.toContain('caution spacing-cold-joint');
  else {
    const [joint] = findingsWith(planned, 'spacing-cold-joint');
    expect(joint.severity).toBe('caution');
    expect(joint.clears).toEqual([{ kind: 'spacing-under', minutes }]);
  }
});

test.each([
  // 10 batch and check + 15 haul + 10 unload = 35 min (published planning example for the parts).
  ['at the order’s limit', {}, { dischargeLimitMin: 35 }, null, 'published'],
  ['a minute over it', {}, { dischargeLimitMin: 34 }, 34, 'published'],
  // 5 min between trucks that take 10 to unload: the fourth waits 15.
  ['trucks that wait', { placingRateYd3PerHour: 120 }, { dischargeLimitMin: 49 }, 49, 'published'],
  ['the company’s 90 min where the order states none', { placingRateYd3PerHour: 120 }, {}, null, ''],
] as const)('age at discharge: %s', (_name, pour, mix, limitMin, status) => {
  const planned = drop(pour, mix);
  if (limitMin === null) expect(codesOf(planned.findings)).not.toContain('caution discharge-late');
  else {
    const [late] = findingsWith(planned, 'discharge-late');
    expect(late).toMatchObject({ severity: 'caution', facts: { limitMin } });
    // ASTM C94/C94M-21: the limit is the order's.
    expect(late.source.status).toBe(status);
  }
});

test('age at discharge: the company’s own limit is named as such', () => {
  const [late] = findingsWith(drop({}, {}, { dischargeLimitMin: 30 }), 'discharge-late');
  expect(late.facts).toEqual({
    ageMin: 35,
    limitMin: 30,
    batchAndCheckMin: 10,
    haulMin: 15,
    waitMin: 0,
    unloadMin: 10,
  });
  expect(late.source.status).toBe('company setting');
});

test.each([
  // The plant brings 4 yd3 and more without a charge. Arithmetic.
  ['four left over', 44, null],
  ['three and a half left over', 43.5, 44],
  ['a small order', 3, 4],
  ['full loads only', 40, null],
] as const)('short load: %s', (_name, orderedYd3, yd3) => {
  const planned = drop({ orderedYd3 });
  if (yd3 === null) expect(codesOf(planned.findings)).not.toContain('note short-load');
  else {
    const [short] = findingsWith(planned, 'short-load');
    expect(short.severity).toBe('note');
    expect(short.clears).toContainEqual({ kind: 'order-at-least', yd3 });
  }
});
