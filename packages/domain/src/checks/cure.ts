import type { PlacedVisit } from '../board-index.ts';
import { publishedReleases } from '../cure.ts';
import type { FindingCode, FindingSource, Severity } from '../finding.ts';
import { MS_PER_HOUR, MS_PER_MIN } from '../interval.ts';
import { coldJointLimitMin } from '../loads.ts';
import { basisOf, type Plan, type PourBasis } from '../plan.ts';
import type { Visit } from '../snapshot.ts';
import type { CureUse } from '../vocabulary.ts';
import { type Check, type Report, visitSubject } from './report.ts';

/** A visit's side of a conflict on a site. */
interface Side {
  readonly visit: Visit;
  readonly pour: PourBasis | null;
  /** The crew is there. */
  readonly startMs: number;
  /** The slab is used: the first truck of a pour, else the crew's start. */
  readonly useMs: number;
}

interface Green {
  readonly code: FindingCode;
  readonly severity: Severity;
  readonly use: CureUse;
  /** The earlier slab may carry the use from then on. */
  readonly untilMs: number;
  readonly placedMs: number;
}

/**
 * Work at a site on or beside concrete that is too green for it: the same slab placed upon (a stop), a slab beside it
 * (a caution), forms, feet and machines of other visits. Looks both ways, so a pour that is dropped before a visit
 * that stands says so too. Sawing and protecting are done on green concrete and are never held against it.
 */
export const cureBlackout: Check = (plan, report) => {
  const { index, site, visit } = plan;
  const own = sideOf(visit, plan.pour, plan.during.startMs);
  for (const other of index.visitsBySite.get(site.id) ?? []) {
    if (other.id === visit.id) continue;
    if (other.kind !== 'pour' && plan.pour === null) continue;
    const side = sideOf(other, basisOf(index, other.id).pour, other.during.startMs);
    const before = greenBetween(plan, side, own);
    if (before) tell(plan, report, before, other, own.useMs, 'later');
    const after = greenBetween(plan, own, side);
    if (after && after.severity !== 'note' && other.causedByVisitId !== visit.id && other.state !== 'done')
      tell(plan, report, after, other, side.useMs, 'earlier');
  }
};

function sideOf(visit: Visit, pour: PourBasis | null, startMs: number): Side {
  return { visit, pour, startMs, useMs: pour ? startMs + pour.shape.firstLoadMs : startMs };
}

/** What `later` does too early to the slab of `earlier`; null when nothing, or when it is not later. */
function greenBetween(plan: Plan, earlier: Side, later: Side): Green | null {
  if (!earlier.pour) return null;
  const { shape } = earlier.pour;
  const placedMs = earlier.startMs + shape.lastLoadMs;
  if (later.useMs < placedMs) return null;
  const within = (code: FindingCode, severity: Severity, use: CureUse): Green | null => {
    const blackout = shape.blackouts.find((one) => one.use === use);
    const untilMs = earlier.startMs + (blackout?.interval.endMs ?? shape.lastLoadMs);
    return later.useMs < untilMs ? { code, severity, use, untilMs, placedMs } : null;
  };
  switch (later.visit.kind) {
    case 'pour': {
      if (!later.pour) return null;
      if (later.pour.pour.id === earlier.pour.pour.id) {
        const limitMin = coldJointLimitMin({
          limitAt70FMin: plan.index.rules.coldJointMin,
          concreteTempF: shape.concreteTempF,
        });
        // The next part comes while the edge still knits: one placing by two crews.
        if (later.useMs - placedMs <= limitMin * MS_PER_MIN) return null;
        return within('adjacent-green', 'caution', 'adjacent-pour');
      }
      const same = later.pour.pour.slabIds.some((id) => earlier.pour?.pour.slabIds.includes(id));
      return same
        ? within('cure-blackout', 'stop', 'foot')
        : within('adjacent-green', 'caution', 'adjacent-pour');
    }
    case 'strip':
      return later.visit.causedByVisitId === earlier.visit.id
        ? within('cure-blackout', 'caution', 'forms')
        : null;
    case 'seal':
    case 'other':
      return within('cure-blackout', 'caution', 'foot');
    case 'prep':
      return within('cure-blackout', 'caution', 'foot') ?? within('cure-blackout', 'note', 'light-vehicle');
    default:
      return null;
  }
}

function tell(
  plan: Plan,
  report: Report,
  green: Green,
  other: PlacedVisit,
  useMs: number,
  role: 'earlier' | 'later',
): void {
  report(green.code, green.severity, () => {
    const missingMs = green.untilMs - useMs;
    return {
      against: [visitSubject(other.id)],
      during: { startMs: green.placedMs, endMs: green.untilMs },
      facts: {
        use: green.use,
        placedMs: green.placedMs,
        usedMs: useMs,
        releasedMs: green.untilMs,
        ageHours: (useMs - green.placedMs) / MS_PER_HOUR,
        releaseHours: (green.untilMs - green.placedMs) / MS_PER_HOUR,
        thisIs: role,
      },
      formula: 'age at use >= release age',
      source: releaseSource(plan, green.use),
      clears: [
        role === 'later'
          ? { kind: 'start-after', atMs: plan.during.startMs + missingMs }
          : { kind: 'start-by', atMs: plan.during.startMs - missingMs },
      ],
    };
  });
}

function releaseSource(plan: Plan, use: CureUse): FindingSource {
  if (plan.index.rules.cureHours[use] !== undefined)
    return { title: `Company rule cureHours.${use}`, status: 'company setting' };
  return use === 'adjacent-pour'
    ? { title: 'Adjacent pour', status: 'common practice, no source' }
    : { title: publishedReleases[use].source.replace(/^published: /, ''), status: 'published' };
}
