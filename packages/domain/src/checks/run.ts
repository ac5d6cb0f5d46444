/** All checks of one plan, in one place. */

import { compareFindings, type Finding } from '../finding.ts';
import type { Plan } from '../plan.ts';
import { crewOverlap, personOverlap, shortHanded, skillMissing } from './crew.ts';
import { cureBlackout } from './cure.ts';
import { setOutrunsCrew } from './finishing.ts';
import { followUpUnmanned, sawOutsideWindow } from './follow-up.ts';
import { longShift, shortRest, weeklyHours } from './hours.ts';
import { coldJoint, dischargeLate, shortLoad } from './loads.ts';
import { mixCarried, plantCapacity, plantClosed } from './plant.ts';
import { pumpOutput, pumpOverlap } from './pump.ts';
import type { Check, Report } from './report.ts';
import { afterDark, notReady, siteHours } from './site.ts';
import { travelGap } from './travel.ts';
import { evaporationHigh, freezing, rainLikely, windBoom } from './weather.ts';

/** Checks that can stop; they may report cautions too. */
const stopping: readonly Check[] = [
  crewOverlap,
  travelGap,
  personOverlap,
  shortHanded,
  siteHours,
  plantClosed,
  pumpOverlap,
  mixCarried,
  cureBlackout,
];
/** Checks that caution at worst. */
const cautioning: readonly Check[] = [
  setOutrunsCrew,
  skillMissing,
  coldJoint,
  dischargeLate,
  pumpOutput,
  notReady,
  followUpUnmanned,
  sawOutsideWindow,
  afterDark,
  longShift,
  shortRest,
  plantCapacity,
  rainLikely,
  windBoom,
  freezing,
  evaporationHigh,
];
/** Checks that note at worst. */
const noting: readonly Check[] = [shortLoad, weeklyHours];

/** Everything that does not fit, worst first. */
export function findingsOf(plan: Plan): Finding[] {
  const findings: Finding[] = [];
  const report: Report = (code, severity, details) => {
    const { against, during, facts, formula, source, clears } = details();
    findings.push({
      code,
      severity,
      visitId: plan.visit.id,
      against: against ?? [],
      during: during ?? null,
      facts,
      formula: formula ?? null,
      source,
      clears: clears ?? [],
    });
  };
  for (const checks of [stopping, cautioning, noting]) for (const check of checks) check(plan, report);
  return findings.sort(compareFindings);
}

/** 0: nothing worse than a note. 1: a caution. 2: a stop. Looks no further than the answer needs. */
export function worstOf(plan: Plan): 0 | 1 | 2 {
  let worst: 0 | 1 | 2 = 0;
  const report: Report = (_code, severity) => {
    if (severity === 'stop') worst = 2;
    else if (severity === 'caution' && worst === 0) worst = 1;
  };
  const soFar = (): 0 | 1 | 2 => worst;
  for (const check of stopping) {
    check(plan, report);
    if (soFar() === 2) return 2;
  }
  for (const check of cautioning) {
    if (soFar() === 1) return 1;
    check(plan, report);
  }
  return soFar();
}
