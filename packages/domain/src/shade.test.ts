import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { worstSeverity } from './finding.ts';
import { planPlacement } from './plan-placement.ts';
import { InputProblem } from './problem.ts';
import { shadeLane, shades } from './shade.ts';
import { at, day, ids, nowMs, placed, sampleIndex } from './testing/sample-board.ts';

const index = placed(
  placed(sampleIndex(), ids.floor, ids.southCrew, at(day, 6)),
  ids.driveway,
  ids.northCrew,
  at('2026-06-10', 6),
);

describe('shading', () => {
  test('says of every slot what a drop there would', () => {
    const expected = { stop: shades.stop, caution: shades.caution, note: shades.fits };
    fc.assert(
      fc.property(
        fc.constantFrom(ids.driveway, ids.patio, ids.floor, ids.walk),
        fc.constantFrom(ids.northCrew, ids.southCrew),
        fc.array(fc.integer({ min: 0, max: 96 * 5 }), { minLength: 1, maxLength: 12 }),
        (visitId, crewId, quarters) => {
          const slots = quarters.map((quarter) => at('2026-06-08', 0) + quarter * 900_000);
          const drops = slots.map((crewStartMs) => {
            const worst = worstSeverity(
              planPlacement(index, { visitId, crewId, crewStartMs }, nowMs).findings,
            );
            return worst === null ? shades.fits : expected[worst];
          });
          expect([...shadeLane(index, visitId, crewId, slots, nowMs)]).toEqual(drops);
        },
      ),
      { numRuns: 60 },
    );
  });

  test('tells the three kinds apart', () => {
    // At night the plant is closed; by day the walk has one finisher too few, and the patio fits.
    const slots = [at(day, 1), at(day, 12)];
    expect([...shadeLane(index, ids.walk, ids.northCrew, slots, nowMs)]).toEqual([
      shades.stop,
      shades.caution,
    ]);
    expect([...shadeLane(index, ids.patio, ids.northCrew, [at('2026-06-12', 7)], nowMs)]).toEqual([
      shades.fits,
    ]);
  });

  test('of no slots is empty; an unknown crew or visit is refused by name', () => {
    expect(shadeLane(index, ids.walk, ids.northCrew, [], nowMs)).toHaveLength(0);
    expect(() => shadeLane(index, ids.walk, 'x', [at(day, 6)], nowMs)).toThrow(InputProblem);
    expect(() => shadeLane(index, 'x', ids.northCrew, [at(day, 6)], nowMs)).toThrow(/visitId/);
  });
});
