import type { Clearing } from '../finding.ts';
import { type Interval, MS_PER_HOUR, MS_PER_MIN } from '../interval.ts';
import type { Plan } from '../plan.ts';
import type { Site } from '../snapshot.ts';
import { type SunTimes, sunTimes } from '../sun.ts';
import { addDays, instantAt, type SiteDay, siteDayOf } from '../zone.ts';
import { type Check, sources, subject } from './report.ts';

/** Undone readiness this close to the start is a caution. */
const READY_BEFORE_MS = 48 * MS_PER_HOUR;

/** Placing outside the site's hours is a stop; the crew there before or after them is a caution. */
export const siteHours: Check = (plan, report) => {
  const { site, pour, during } = plan;
  if (site.permittedFromMin === null && site.permittedUntilMin === null) return;
  const placing = pour?.chain.placing;
  const outside = placing && !isPermitted(site, placing) ? placing : null;
  const crew = { startMs: during.startMs, endMs: pour?.chain.finishing.endMs ?? during.endMs };
  if (!outside && isPermitted(site, crew)) return;
  report('site-hours', outside ? 'stop' : 'caution', () => ({
    against: [subject('site', site.id)],
    during: outside ?? crew,
    facts: {
      permittedFromMin: site.permittedFromMin,
      permittedUntilMin: site.permittedUntilMin,
      siteZone: site.zone,
      what: outside ? 'placing' : 'crew',
      fromMs: (outside ?? crew).startMs,
      untilMs: (outside ?? crew).endMs,
    },
    source: sources.siteHours,
    clears: intoHours(plan, outside ?? crew),
  }));
};

/** Whether the whole interval lies in the site's permitted hours, over midnight where the hours join there. */
export function isPermitted(site: Site, interval: Interval): boolean {
  let atMs = interval.startMs;
  const day = siteDayOf(atMs, site.zone);
  for (let i = -1; i < 3 && atMs < interval.endMs; i++) {
    const hours = permittedOn(site, addDays(day, i));
    if (hours.startMs <= atMs && atMs < hours.endMs) atMs = hours.endMs;
  }
  return atMs >= interval.endMs;
}

/** The hours that begin on a day; hours that end before they begin run into the next one. */
function permittedOn(site: Site, day: SiteDay): Interval {
  const fromMin = site.permittedFromMin ?? 0;
  const until = site.permittedUntilMin ?? 1440;
  const untilMin = until <= fromMin ? until + 1440 : until;
  return {
    startMs: instantAt(day, fromMin, site.zone),
    endMs: instantAt(day, untilMin, site.zone),
  };
}

function intoHours(plan: Plan, what: Interval): Clearing[] {
  const hours = permittedOn(plan.site, siteDayOf(what.startMs, plan.site.zone));
  const startMs = plan.during.startMs;
  if (what.endMs - what.startMs > hours.endMs - hours.startMs) return [];
  if (what.startMs < hours.startMs)
    return [{ kind: 'start-after', atMs: startMs + hours.startMs - what.startMs }];
  return [{ kind: 'start-by', atMs: startMs - (what.endMs - hours.endMs) }];
}

const sunBySite = new WeakMap<Site, Map<SiteDay, SunTimes>>();

/** Finishing that does not lie between civil dawn and dusk of its day. Not judged without coordinates. */
export const afterDark: Check = (plan, report) => {
  const finishing = plan.pour?.chain.finishing;
  const { site } = plan;
  if (!finishing || site.latDeg === null || site.lonDeg === null) return;
  const sun = sunOf(site, site.latDeg, site.lonDeg, siteDayOf(finishing.startMs, site.zone));
  // Without dusk the sky stays light all night, unless the sun never comes up.
  const dawnMs = sun.civilDawnMs ?? (sun.polar === 'night' ? Number.POSITIVE_INFINITY : -Infinity);
  const duskMs = sun.civilDuskMs ?? (sun.polar === 'night' ? -Infinity : Number.POSITIVE_INFINITY);
  if (dawnMs <= finishing.startMs && finishing.endMs <= duskMs) return;
  report('after-dark', 'caution', () => ({
    against: [subject('site', site.id)],
    during: finishing,
    facts: {
      finishingFromMs: finishing.startMs,
      finishingUntilMs: finishing.endMs,
      civilDawnMs: sun.civilDawnMs,
      civilDuskMs: sun.civilDuskMs,
      darkMin:
        sun.civilDuskMs === null
          ? null
          : Math.max(0, Math.round((finishing.endMs - sun.civilDuskMs) / MS_PER_MIN)),
    },
    source: sources.daylight,
    clears:
      sun.civilDuskMs !== null && finishing.startMs < sun.civilDuskMs && finishing.endMs > sun.civilDuskMs
        ? [{ kind: 'start-by', atMs: plan.during.startMs - (finishing.endMs - sun.civilDuskMs) }]
        : [],
  }));
};

/** Items of the readiness list that are not done. */
export const notReady: Check = (plan, report) => {
  const { pour } = plan;
  if (!pour || pour.pour.readiness.every((one) => one.done)) return;
  report('not-ready', plan.during.startMs - plan.nowMs < READY_BEFORE_MS ? 'caution' : 'note', () => {
    const items = pour.pour.readiness.filter((one) => !one.done).map((one) => one.item);
    return {
      against: [subject('site', plan.site.id)],
      facts: {
        itemsUndone: items.length,
        items: pour.pour.readiness.length,
        hoursToStart: (plan.during.startMs - plan.nowMs) / MS_PER_HOUR,
      },
      source: sources.readiness,
      clears: [{ kind: 'make-ready', items }],
    };
  });
};

function sunOf(site: Site, latDeg: number, lonDeg: number, day: SiteDay): SunTimes {
  let days = sunBySite.get(site);
  if (!days) {
    days = new Map();
    sunBySite.set(site, days);
  }
  let times = days.get(day);
  if (!times) {
    times = sunTimes(day, latDeg, lonDeg, site.zone);
    days.set(day, times);
  }
  return times;
}
