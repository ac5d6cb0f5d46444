import type { PlacedVisit } from '../board-index.ts';
import { MS_PER_HOUR, MS_PER_MIN } from '../interval.ts';
import type { Plan } from '../plan.ts';
import { travelMin } from '../travel.ts';
import { type Check, sources, visitSubject } from './report.ts';

/** Neighbours further away than this leave time for any travel. */
const LOOK_MS = 24 * MS_PER_HOUR;

/**
 * No time for the same people to get here from the crew's visit before, or from here to the one after. Arriving on
 * the minute is in time.
 */
export const travelGap: Check = (plan, report) => {
  const { previous, next, during } = plan;
  for (const [neighbour, gapMs] of [
    [previous, previous ? during.startMs - previous.during.endMs : 0],
    [next, next ? next.during.startMs - during.endMs : 0],
  ] as const) {
    if (!neighbour || gapMs >= LOOK_MS || neighbour.siteId === plan.site.id) continue;
    const needed = travelBetween(plan, neighbour);
    const gapMin = gapMs / MS_PER_MIN;
    if (gapMin >= needed || !sharesPeople(plan, neighbour.id)) continue;
    const before = neighbour === previous;
    const shortByMin = needed - gapMin;
    report('travel-gap', 'stop', () => ({
      against: [visitSubject(neighbour.id)],
      during: before
        ? { startMs: neighbour.during.endMs, endMs: during.startMs + shortByMin * MS_PER_MIN }
        : { startMs: during.endMs, endMs: neighbour.during.startMs + shortByMin * MS_PER_MIN },
      facts: { gapMin, travelMin: needed, shortByMin, neighbour: before ? 'before' : 'after' },
      formula: 'gap >= travel',
      source: sources.travel,
      clears: [
        before
          ? { kind: 'start-after', atMs: neighbour.during.endMs + needed * MS_PER_MIN }
          : { kind: 'start-by', atMs: during.startMs - shortByMin * MS_PER_MIN },
        { kind: 'other-crew' },
      ],
    }));
  }
};

function travelBetween(plan: Plan, neighbour: PlacedVisit): number {
  return travelMin(plan.index.sites.get(neighbour.siteId) ?? null, plan.site, plan.index.rules);
}

/** Whether anyone planned here also holds a shift there. */
function sharesPeople(plan: Plan, visitId: string): boolean {
  const there = plan.index.shiftsByVisit.get(visitId) ?? [];
  return plan.people.some(
    (one) =>
      one.standing !== 'left-off' &&
      there.some((shift) => shift.state === 'held' && shift.personId === one.personId),
  );
}
