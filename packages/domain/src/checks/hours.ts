import { type Interval, intersection, MS_PER_HOUR } from '../interval.ts';
import type { Plan } from '../plan.ts';
import { addDays, instantAt, mondayOf, siteDayOf } from '../zone.ts';
import { type Check, sources, subject } from './report.ts';

/** A gap shorter than this is a break within one shift. Common practice, no source. */
const BREAK_MS = 2 * MS_PER_HOUR;
/** Straight time in a workweek, hours (FLSA section 7(a)). */
const STRAIGHT_HOURS = 40;
/** Shifts further away than this touch neither the same day's work nor the rest before it. */
const LOOK_MS = 48 * MS_PER_HOUR;

interface PersonHours {
  readonly personId: string;
  readonly hours: number;
}

/** A day's work longer than the company allows, from the first start to the last end. */
export const longShift: Check = (plan, report) => {
  const { maxShiftHours } = plan.index.rules;
  const over = eachPresent(plan, (personId) => {
    const hours = lengthHours(workedTogether(plan, personId));
    return hours > maxShiftHours ? hours : null;
  });
  if (over.length === 0) return;
  report('overtime', 'caution', () => ({
    against: over.map((one) => subject('person', one.personId)),
    facts: { rule: 'shift', people: over.length, shiftHours: largest(over), maxShiftHours },
    formula: 'last end - first start <= limit',
    source: sources.maxShift,
    clears: [{ kind: 'other-crew' }],
  }));
};

/** Less rest than the company asks for between one day's work and the next. */
export const shortRest: Check = (plan, report) => {
  const { restHours } = plan.index.rules;
  const short = eachPresent(plan, (personId) => {
    const work = workedTogether(plan, personId);
    let restMs = Number.POSITIVE_INFINITY;
    for (const other of otherShifts(plan, personId)) {
      const gapMs = Math.max(other.startMs - work.endMs, work.startMs - other.endMs);
      if (gapMs >= 0) restMs = Math.min(restMs, gapMs);
    }
    return restMs < restHours * MS_PER_HOUR ? restMs / MS_PER_HOUR : null;
  });
  if (short.length === 0) return;
  report('rest-short', 'caution', () => ({
    against: short.map((one) => subject('person', one.personId)),
    facts: {
      people: short.length,
      restHours: Math.min(...short.map((one) => one.hours)),
      leastRestHours: restHours,
    },
    formula: 'next start - last end >= rest',
    source: sources.rest,
    clears: [{ kind: 'other-crew' }],
  }));
};

/** More than 40 hours in the workweek, which begins on Monday in the company's zone; travel job to job counts. */
export const weeklyHours: Check = (plan, report) => {
  const { index } = plan;
  const monday = mondayOf(siteDayOf(plan.during.startMs, index.zone));
  const week = {
    startMs: instantAt(monday, 0, index.zone),
    endMs: instantAt(addDays(monday, 7), 0, index.zone),
  };
  const over = eachPresent(plan, (personId) => {
    let totalMs = sharedMs(week, plan.held);
    for (const shift of index.heldByPerson.get(personId) ?? [])
      if (shift.visitId !== plan.visit.id) totalMs += sharedMs(week, shift.held);
    const hours = totalMs / MS_PER_HOUR;
    return hours > STRAIGHT_HOURS ? hours : null;
  });
  if (over.length === 0) return;
  report('overtime', 'note', () => ({
    against: over.map((one) => subject('person', one.personId)),
    during: week,
    facts: { rule: 'week', people: over.length, weekHours: largest(over), straightHours: STRAIGHT_HOURS },
    formula: 'sum of held hours in the workweek <= 40',
    source: sources.workweek,
    clears: [{ kind: 'other-crew' }],
  }));
};

function eachPresent(plan: Plan, hoursOf: (personId: string) => number | null): PersonHours[] {
  const found: PersonHours[] = [];
  for (const { personId, standing, conflict } of plan.people) {
    if (standing !== 'present' || conflict) continue;
    const hours = hoursOf(personId);
    if (hours !== null) found.push({ personId, hours });
  }
  return found;
}

function otherShifts(plan: Plan, personId: string): Interval[] {
  const found: Interval[] = [];
  for (const shift of plan.index.heldByPerson.get(personId) ?? []) {
    if (shift.visitId === plan.visit.id || shift.during.endMs < plan.during.startMs - LOOK_MS) continue;
    if (shift.during.startMs > plan.during.endMs + LOOK_MS) break;
    found.push(shift.during);
  }
  return found;
}

/** This visit and the person's work that belongs to the same shift: after a short break, or begun on the same day. */
function workedTogether(plan: Plan, personId: string): Interval {
  const { zone } = plan.site;
  let { startMs, endMs } = plan.during;
  const left = otherShifts(plan, personId);
  for (let grown = true; grown; ) {
    grown = false;
    for (let i = 0; i < left.length; i++) {
      const other = left[i];
      if (!other) continue;
      const gapMs = Math.max(other.startMs - endMs, startMs - other.endMs);
      if (gapMs >= BREAK_MS && siteDayOf(other.startMs, zone) !== siteDayOf(startMs, zone)) continue;
      startMs = Math.min(startMs, other.startMs);
      endMs = Math.max(endMs, other.endMs);
      left.splice(i--, 1);
      grown = true;
    }
  }
  return { startMs, endMs };
}

const lengthHours = (interval: Interval): number => (interval.endMs - interval.startMs) / MS_PER_HOUR;
const largest = (list: readonly PersonHours[]): number => Math.max(...list.map((one) => one.hours));

function sharedMs(a: Interval, b: Interval): number {
  const shared = intersection(a, b);
  return shared ? shared.endMs - shared.startMs : 0;
}
