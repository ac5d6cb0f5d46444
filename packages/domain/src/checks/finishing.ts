import type { Chain } from '../chain.ts';
import type { Clearing } from '../finding.ts';
import { peopleToFinish } from '../finishing.ts';
import { coldJointLimitMin, spacingMinForRate } from '../loads.ts';
import type { Plan } from '../plan.ts';
import { type Check, sources, subject, tenthBelow } from './report.ts';

/**
 * The concrete sets before the people present can finish it. Not judged where the pour states its own number (then
 * the head count decides), where the area is unknown, or where nobody is there at all.
 */
export const setOutrunsCrew: Check = (plan, report) => {
  const { pour, present } = plan;
  if (!pour || pour.pour.peopleToFinish !== null || present === 0) return;
  const { chain } = pour;
  const needed = chain.finishersNeeded;
  if (needed === null || present >= needed) return;
  report('set-outruns-crew', 'caution', () => ({
    against: [subject('crew', plan.crewId)],
    during: { startMs: chain.window.opensMs, endMs: chain.window.closesMs },
    facts: {
      peopleNeeded: needed,
      peoplePresent: present,
      areaFt2: chain.areaFt2,
      finish: pour.pour.finish,
      personHoursPerFt2: chain.personHoursPerFt2,
      placingHours: chain.placingHours,
      windowHours: chain.windowHours,
      concreteTempF: chain.concreteTempF,
      placingRateYd3PerHour: chain.placingRateYd3PerHour,
      windowOpensMs: chain.window.opensMs,
      windowClosesMs: chain.window.closesMs,
    },
    formula: 'N >= w A / (D + W)',
    source: sources.finishing,
    clears: [
      { kind: 'more-people', people: needed - present },
      ...slowEnough(plan, chain, present),
      { kind: 'other-crew' },
    ],
  }));
};

/** Rates are searched from here up, yd3/h. */
const SLOWEST_YD3_PER_HOUR = 1;

/**
 * The fastest placing at which the people present can keep up, by bisection: slower placing spreads the same work
 * over a longer time. Left out where that would space the trucks so far apart that the edges no longer knit.
 */
function slowEnough(plan: Plan, chain: Chain, present: number): Clearing[] {
  const keepsUp = (yd3PerHour: number): boolean => {
    const spacingMin = spacingMinForRate(chain.loadYd3, yd3PerHour);
    const unloadMin = Math.max(1, plan.index.rules.unloadMin);
    const placingHours = ((chain.loads.length - 1) * Math.max(spacingMin, unloadMin) + unloadMin) / 60;
    const { areaFt2, personHoursPerFt2, windowHours } = chain;
    return (
      peopleToFinish({ areaFt2, personHoursPerFt2, placingHours, windowH: windowHours }).people <= present
    );
  };
  let slow = SLOWEST_YD3_PER_HOUR;
  let fast = chain.placingRateYd3PerHour;
  if (fast <= slow || !keepsUp(slow)) return [];
  while (fast - slow > 0.01) {
    const middle = (slow + fast) / 2;
    if (keepsUp(middle)) slow = middle;
    else fast = middle;
  }
  const limitMin = coldJointLimitMin({
    limitAt70FMin: plan.index.rules.coldJointMin,
    concreteTempF: chain.concreteTempF,
  });
  const yd3PerHour = tenthBelow(slow);
  if (yd3PerHour <= 0 || spacingMinForRate(chain.loadYd3, yd3PerHour) > limitMin) return [];
  return [{ kind: 'placing-rate-under', yd3PerHour }];
}
