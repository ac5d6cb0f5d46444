import type {
  Clearing,
  FactValue,
  FindingCode,
  FindingSource,
  FindingSubject,
  Severity,
} from '../finding.ts';
import type { Interval } from '../interval.ts';
import type { Plan } from '../plan.ts';

/** What a check says beyond its code and severity. */
export interface Details {
  readonly against?: FindingSubject[];
  readonly during?: Interval | null;
  readonly facts: Record<string, FactValue>;
  readonly formula?: string;
  readonly source: FindingSource;
  readonly clears?: Clearing[];
}

/** Takes a finding. The details are only asked for when someone will read them, so that shading a board is cheap. */
export type Report = (code: FindingCode, severity: Severity, details: () => Details) => void;

/** Examines a plan and reports what does not fit. Reads the plan, its index and nothing else. */
export type Check = (plan: Plan, report: Report) => void;

export const subject = (kind: FindingSubject['kind'], id: string): FindingSubject => ({ kind, id });
export const visitSubject = (id: string): FindingSubject => subject('visit', id);

/** Rounds a figure that is shown down to a tenth, so that what is promised holds. */
export const tenthBelow = (value: number): number => Math.floor(value * 10 + 1e-9) / 10;

export const sources = {
  arithmetic: { title: 'Arithmetic on the times of the board', status: 'arithmetic' },
  practice: { title: 'Common practice', status: 'common practice, no source' },
  finishing: {
    title: 'N >= w A / (D + W), on the window of finishability of ACI 302.1R',
    status: 'arithmetic',
  },
  placing: { title: 'Placing labour per 10 yd3/h by method', status: 'common practice, no source' },
  stated: { title: "The pour's own number of people", status: 'company setting' },
  travel: {
    title: 'Great circle x road factor / road speed (company rules travelMph, travelRoadFactor)',
    status: 'common practice, no source',
  },
  maxShift: { title: 'Company rule maxShiftHours', status: 'company setting' },
  rest: { title: 'Company rule restHours', status: 'company setting' },
  workweek: { title: 'FLSA section 7(a); 29 CFR 778.104 and 778.105', status: 'published' },
  plantHours: { title: "The plant's hours", status: 'company setting' },
  plantRate: { title: "The plant's yards per hour", status: 'company setting' },
  mixes: { title: "The plant's mixes", status: 'company setting' },
  coldJoint: {
    title:
      'Company rule coldJointMin, scaled by temperature (ACI 305R-10 and ACI 306R-16 as cited in trade press)',
    status: 'common practice, no source',
  },
  dischargeOrder: { title: "The order's limit, ASTM C94/C94M-21", status: 'published' },
  dischargeRule: {
    title: 'Company rule dischargeLimitMin; 90 min in ASTM C94/C94M before 2021',
    status: 'company setting',
  },
  shortLoad: { title: "The plant's smallest load", status: 'company setting' },
  pump: { title: "The pump's travel, set-up and wash-out", status: 'company setting' },
  pumpOutput: { title: "The pump's output", status: 'company setting' },
  siteHours: { title: "The site's permitted hours", status: 'company setting' },
  daylight: { title: 'Civil twilight, sun 6 degrees below the horizon (SunCalc)', status: 'published' },
  readiness: { title: "The pour's readiness list", status: 'company setting' },
  saw: {
    title: 'Saw 4 to 12 h after finishing, early entry 1 to 4 h (PCA, ACI 302.1R)',
    status: 'published',
  },
  cold: { title: 'ACI 306R-16: air below 40 F during the protection period', status: 'published' },
  evaporation: { title: 'Uno 1998, ACI 305R; action at 0.2, caution at 0.1 lb/ft2/h', status: 'published' },
} as const satisfies Record<string, FindingSource>;
