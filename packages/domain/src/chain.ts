/** The computed times of a pour: from the crew's start over trucks, bleeding and finishing to wash-up and cure. */

import type { CompanyRules } from './company-rules.ts';
import { blackouts } from './cure.ts';
import { finishingHours, peopleToFinish, workRateFor } from './finishing.ts';
import { type Interval, MS_PER_HOUR, MS_PER_MIN } from './interval.ts';
import {
  ageAtDischargeMin,
  loadSchedule,
  loadsForOrder,
  roundTripMin,
  type ScheduledLoad,
  spacingMinForRate,
  trucksInRotation,
} from './loads.ts';
import { requireFinite, requireInRange } from './problem.ts';
import { setTimesH } from './setting.ts';
import type { Mix, Plant, Pour, Site, Visit } from './snapshot.ts';
import { travelMin } from './travel.ts';
import type { CureUse, Jointing } from './vocabulary.ts';

/** When the surface can be worked: no patch before its initial set, none after its final set (ACI 302.1R). */
export interface FinishingWindow {
  /** Initial set of the first patch. */
  readonly opensMs: number;
  /** Final set of the first patch. */
  readonly firstClosesMs: number;
  /** Initial set of the last patch. */
  readonly lastOpensMs: number;
  /** Final set of the last patch. */
  readonly closesMs: number;
}

/** A pour's times, epoch milliseconds, and the figures that they come from. */
export interface Chain {
  readonly crewStartMs: number;
  readonly setUpMin: number;
  readonly firstLoadMs: number;
  readonly loads: readonly ScheduledLoad[];
  /** The last load is discharged. */
  readonly lastLoadMs: number;
  readonly placing: Interval;
  /** Bleed water of the last patch is gone. */
  readonly bleedUntilMs: number;
  readonly window: FinishingWindow;
  /** From the first patch's opening until the work is done, at the latest until the last patch closes. */
  readonly finishing: Interval;
  /** When contraction joints are to be sawn; null where none are. */
  readonly sawWindow: Interval | null;
  /** Empty where the company allows no time for it. */
  readonly washUp: Interval;
  readonly endMs: number;
  readonly blackouts: readonly { readonly use: CureUse; readonly interval: Interval }[];
  /** Minutes between trucks, to a thousandth. */
  readonly spacingMin: number;
  readonly loadYd3: number;
  readonly orderedYd3: number;
  readonly trucksInRotation: number;
  readonly placingRateYd3PerHour: number;
  readonly placingHours: number;
  readonly windowHours: number;
  readonly concreteTempF: number;
  /** This visit's share of the pour's area, by yards; 0 where the pour has no slab yet. */
  readonly areaFt2: number;
  readonly personHoursPerFt2: number;
  /** Finishers that N >= w A / (D + W) asks for; null where the area is unknown. */
  readonly finishersNeeded: number | null;
  /** Minutes by road from the plant to the site. */
  readonly haulMin: number;
  /** Longest that a truck waits for the one before it, minutes. */
  readonly waitMin: number;
  /** Age of the oldest concrete at the end of its discharge, minutes from batching. */
  readonly oldestMin: number;
}

export interface ChainInput {
  readonly pour: Pour;
  readonly visit: Pick<Visit, 'partYd3'>;
  readonly site: Site;
  /** null: none chosen, so Type I cement at the company's limits. */
  readonly mix: Mix | null;
  /** null: unknown, so the company's travel minutes stand for the haul. */
  readonly plant?: Plant | null;
  readonly rules: CompanyRules;
  readonly crewStartMs: number;
  /** People who finish; left out: the pour's own figure, else as many as are needed. */
  readonly finishingPeople?: number;
}

/** Hours after the finishing in which joints are sawn (published: PCA / ACI 302.1R). */
export const SAW_HOURS: Partial<Record<Jointing, { readonly fromH: number; readonly untilH: number }>> = {
  'saw-conventional': { fromH: 4, untilH: 12 },
  'saw-early-entry': { fromH: 1, untilH: 4 },
};
/** Minutes to rinse a truck's chute before it drives back. Published planning example: 5. */
const TRUCK_WASH_MIN = 5;

/**
 * The chain of one visit of a pour. It does not depend on who is there: finishing is planned with the people that
 * are needed, and ends at the latest when the last patch has set, since after that it cannot be worked.
 * Throws InputProblem for yards, rates, minutes or temperatures outside what the formulas take.
 */
export function chainOf(input: ChainInput): Chain {
  const { pour, rules, site } = input;
  const crewStartMs = Math.round(requireFinite('crewStartMs', input.crewStartMs));
  const setUpMin = requireInRange('setUpMin', pour.setUpMin ?? rules.setUpMin, 0, 1440);
  const loadYd3 = pour.loadYd3 ?? rules.loadYd3;
  const orderedYd3 = requireInRange('partYd3', input.visit.partYd3 ?? pour.orderedYd3, 0.001, 1e6);
  const placingRateYd3PerHour = pour.placingRateYd3PerHour ?? rules.placingRateYd3PerHour;
  const concreteTempF = pour.concreteTempF ?? rules.concreteTempF;
  const cement = input.mix?.cement ?? 'type-i';

  const unloadMin = Math.max(1, rules.unloadMin);
  const spacingMin = Math.round(spacingMinForRate(loadYd3, placingRateYd3PerHour) * 1000) / 1000;
  const firstLoadMs = crewStartMs + Math.round(setUpMin * MS_PER_MIN);
  const loads = loadSchedule({
    firstLoadMs,
    loadsYd3: loadsForOrder(orderedYd3, loadYd3),
    spacingMin,
    unloadMin,
  });
  const lastLoadMs = loads.at(-1)?.dischargedMs ?? firstLoadMs;
  const placingHours = (lastLoadMs - firstLoadMs) / MS_PER_HOUR;

  const set = setTimesH({ concreteTempF, cement, vapourRetarder: pour.vapourRetarder });
  const after = (ms: number, hours: number): number => ms + Math.round(hours * MS_PER_HOUR);
  const window = {
    opensMs: after(firstLoadMs, set.initialSetH),
    firstClosesMs: after(firstLoadMs, set.finalSetH),
    lastOpensMs: after(lastLoadMs, set.initialSetH),
    closesMs: after(lastLoadMs, set.finalSetH),
  };
  const windowHours = set.finalSetH - set.initialSetH;

  const areaFt2 = pour.orderedYd3 > 0 ? (pour.areaFt2 * orderedYd3) / pour.orderedYd3 : pour.areaFt2;
  const personHoursPerFt2 = workRateFor(pour.finish, rules.workRatesPersonHoursPerFt2);
  const even = { areaFt2, placingHours, personHoursPerFt2 };
  const finishersNeeded = areaFt2 > 0 ? peopleToFinish({ ...even, windowH: windowHours }).people : null;
  const finishers = input.finishingPeople ?? pour.peopleToFinish ?? finishersNeeded;
  const finishingH =
    areaFt2 > 0 && finishers !== null
      ? finishingHours({ ...even, people: Math.max(1, finishers) })
      : placingHours;
  const finishing = {
    startMs: window.opensMs,
    endMs: Math.min(window.closesMs, after(window.opensMs, finishingH)),
  };
  // The crew's time is kept in whole minutes.
  const crewMin = Math.ceil((finishing.endMs - crewStartMs) / MS_PER_MIN + rules.washUpMin);
  const endMs = crewStartMs + crewMin * MS_PER_MIN;

  const haulMin = travelMin(input.plant ?? null, site, rules);
  const round = {
    batchAndCheckMin: rules.batchAndCheckMin,
    travelMin: haulMin,
    unloadMin,
    washMin: TRUCK_WASH_MIN,
    returnMin: haulMin,
  };
  const waitMin =
    loads.reduce((most, load) => Math.max(most, load.dischargeStartMs - load.arriveMs), 0) / MS_PER_MIN;

  return {
    crewStartMs,
    setUpMin,
    firstLoadMs,
    loads,
    lastLoadMs,
    placing: { startMs: firstLoadMs, endMs: lastLoadMs },
    bleedUntilMs: after(lastLoadMs, set.bleedEndH),
    window,
    finishing,
    sawWindow: sawWindowAfter(finishing.endMs, pour.jointing),
    washUp: { startMs: finishing.endMs, endMs },
    endMs,
    blackouts: blackouts({
      concreteTempF,
      cement,
      companyOverrides: rules.cureHours,
      placedEndMs: lastLoadMs,
    }),
    spacingMin,
    loadYd3,
    orderedYd3,
    trucksInRotation: trucksInRotation({
      roundTripMin: roundTripMin(round),
      unloadIntervalMin: spacingMin,
      loads: loads.length,
    }),
    placingRateYd3PerHour,
    placingHours,
    windowHours,
    concreteTempF,
    areaFt2,
    personHoursPerFt2,
    finishersNeeded,
    haulMin,
    waitMin,
    oldestMin: ageAtDischargeMin({ ...round, waitMin }),
  };
}

/** The same chain with the crew there at another instant. Everything in it is elapsed time, so nothing else changes. */
export function chainStartingAt(chain: Chain, crewStartMs: number): Chain {
  const byMs = crewStartMs - chain.crewStartMs;
  if (byMs === 0) return chain;
  const moved = (interval: Interval): Interval => ({
    startMs: interval.startMs + byMs,
    endMs: interval.endMs + byMs,
  });
  const { window } = chain;
  return {
    ...chain,
    crewStartMs,
    firstLoadMs: chain.firstLoadMs + byMs,
    loads: chain.loads.map((load) => ({
      arriveMs: load.arriveMs + byMs,
      dischargeStartMs: load.dischargeStartMs + byMs,
      dischargedMs: load.dischargedMs + byMs,
      yd3: load.yd3,
    })),
    lastLoadMs: chain.lastLoadMs + byMs,
    placing: moved(chain.placing),
    bleedUntilMs: chain.bleedUntilMs + byMs,
    window: {
      opensMs: window.opensMs + byMs,
      firstClosesMs: window.firstClosesMs + byMs,
      lastOpensMs: window.lastOpensMs + byMs,
      closesMs: window.closesMs + byMs,
    },
    finishing: moved(chain.finishing),
    sawWindow: chain.sawWindow && moved(chain.sawWindow),
    washUp: moved(chain.washUp),
    endMs: chain.endMs + byMs,
    blackouts: chain.blackouts.map(({ use, interval }) => ({ use, interval: moved(interval) })),
  };
}

function sawWindowAfter(finishedMs: number, jointing: Jointing): Interval | null {
  const hours = SAW_HOURS[jointing];
  if (!hours) return null;
  return { startMs: finishedMs + hours.fromH * MS_PER_HOUR, endMs: finishedMs + hours.untilH * MS_PER_HOUR };
}
