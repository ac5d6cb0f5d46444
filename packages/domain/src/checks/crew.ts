import type { Clearing } from '../finding.ts';
import { peopleToPlace, placersPer10Yd3PerHour } from '../finishing.ts';
import type { Plan } from '../plan.ts';
import { type Check, sources, subject, tenthBelow, visitSubject } from './report.ts';

/** The crew's own other visits at that time: a stop where the same people are meant, else a split crew. */
export const crewOverlap: Check = (plan, report) => {
  if (plan.overlapping.length === 0) return;
  const shared = plan.people.filter((one) => one.conflict?.kind === 'same-crew');
  report('crew-overlap', shared.length > 0 ? 'stop' : 'caution', () => {
    const untilMs = Math.max(...plan.overlapping.map((other) => other.during.endMs));
    return {
      against: [...plan.overlapping.map((other) => visitSubject(other.id)), subject('crew', plan.crewId)],
      during: { startMs: Math.min(...plan.overlapping.map((other) => other.during.startMs)), endMs: untilMs },
      facts: { visits: plan.overlapping.length, samePeople: shared.length },
      source: sources.arithmetic,
      clears: [{ kind: 'start-after', atMs: untilMs }, { kind: 'other-crew' }],
    };
  });
};

/** Each person whose time is taken: a stop by the same crew, a caution where they are left off. */
export const personOverlap: Check = (plan, report) => {
  for (const { personId, conflict } of plan.people) {
    if (!conflict) continue;
    report('person-overlap', conflict.kind === 'same-crew' ? 'stop' : 'caution', () => ({
      against: [
        subject('person', personId),
        ...(conflict.visitId === null ? [] : [visitSubject(conflict.visitId)]),
      ],
      during: conflict.during,
      facts: {
        takenBy: conflict.kind,
        fromMs: conflict.during.startMs,
        untilMs: conflict.during.endMs,
        travelOnly: conflict.travelOnly,
        leftOff: conflict.kind !== 'same-crew',
      },
      source: conflict.travelOnly ? sources.travel : sources.arithmetic,
      clears: [{ kind: 'other-crew' }],
    }));
  }
};

/** Fewer people than a head count asks for. A stop only where there is nobody, asked subs included. */
export const shortHanded: Check = (plan, report) => {
  const { present, offered, pour } = plan;
  const toPlace = pour
    ? (pour.pour.peopleToPlace ??
      peopleToPlace(
        pour.chain.placingRateYd3PerHour,
        pour.pour.placingMethod,
        plan.index.rules.placersPer10Yd3PerHour,
      ))
    : 1;
  const toFinish = pour?.pour.peopleToFinish ?? 0;
  const needed = Math.max(1, toPlace, toFinish);
  if (present >= needed) return;
  report('short-handed', present + offered === 0 ? 'stop' : 'caution', () => ({
    against: [subject('crew', plan.crewId)],
    facts: {
      peopleNeeded: needed,
      peoplePresent: present,
      peopleOffered: offered,
      peopleToPlace: pour ? toPlace : null,
      peopleToFinish: pour?.pour.peopleToFinish ?? null,
      placingRateYd3PerHour: pour?.chain.placingRateYd3PerHour ?? null,
    },
    ...(pour ? { formula: 'people = max(placing, finishing)' } : {}),
    source:
      toFinish > toPlace || pour?.pour.peopleToPlace != null
        ? sources.stated
        : pour
          ? sources.placing
          : sources.practice,
    clears: [
      { kind: 'more-people', people: needed - present },
      ...slowerPlacing(plan, needed, toFinish),
      { kind: 'other-crew' },
    ],
  }));
};

/** The rate that the people present can place, where placing alone asks for more of them. */
function slowerPlacing(plan: Plan, needed: number, toFinish: number): Clearing[] {
  const { pour, present } = plan;
  if (!pour || pour.pour.peopleToPlace !== null || present < 2 || toFinish > present || needed <= present)
    return [];
  const yd3PerHour = tenthBelow((present * 10) / placersPer10Yd3PerHour[pour.pour.placingMethod]);
  return [{ kind: 'placing-rate-under', yd3PerHour }];
}

/** Nobody present has the finish among their skills; who names none can do any. */
export const skillMissing: Check = (plan, report) => {
  const finish = plan.pour?.pour.finish;
  if (finish === undefined || plan.present === 0) return;
  for (const { standing, person } of plan.people) {
    if (standing !== 'present') continue;
    if (!person || person.skills.length === 0 || person.skills.includes(finish)) return;
  }
  report('skill-missing', 'caution', () => ({
    against: [subject('crew', plan.crewId)],
    facts: { finish, peoplePresent: plan.present },
    source: sources.practice,
    clears: [{ kind: 'more-people', people: 1 }, { kind: 'other-crew' }],
  }));
};
