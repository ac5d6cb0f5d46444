/** The shape of one check's result. It is final: the board, the endpoints and the stored reasons rely on it. */

import type { Interval } from './interval.ts';

export const findingCodes = [
  'crew-overlap',
  'person-overlap',
  'short-handed',
  'skill-missing',
  'set-outruns-crew',
  'travel-gap',
  'overtime',
  'rest-short',
  'plant-closed',
  'plant-over-capacity',
  'mix-not-carried',
  'spacing-cold-joint',
  'discharge-late',
  'short-load',
  'pump-overlap',
  'pump-reach',
  'pump-slower-than-trucks',
  'cure-blackout',
  'adjacent-green',
  'site-hours',
  'not-ready',
  'after-dark',
  'freezing',
  'hot-mix',
  'evaporation-high',
  'rain-likely',
  'wind-boom',
  'lightning',
  'heat-stress',
  'follow-up-unmanned',
] as const;
/** Stable kebab-case name of a check's result; never renamed once landed. */
export type FindingCode = (typeof findingCodes)[number];

export const severities = ['stop', 'caution', 'note'] as const;
/** `stop`: cannot be. `caution`: can be, with a reason that is kept. `note`: worth knowing. */
export type Severity = (typeof severities)[number];

/** A row that a finding speaks of. */
export interface FindingSubject {
  kind: 'visit' | 'person' | 'crew' | 'equipment' | 'plant' | 'site';
  id: string;
}

/**
 * What would make the finding go away. Each is a fact the board can word and, where it carries a time or a
 * number, act upon.
 */
export type Clearing =
  | { kind: 'more-people'; people: number }
  | { kind: 'placing-rate-under'; yd3PerHour: number }
  | { kind: 'start-by'; atMs: number }
  | { kind: 'start-after'; atMs: number }
  | { kind: 'other-crew' }
  | { kind: 'other-pump' }
  | { kind: 'other-plant' }
  | { kind: 'choose-mix' }
  | { kind: 'spacing-under'; minutes: number }
  | { kind: 'spacing-over'; minutes: number }
  | { kind: 'order-at-least'; yd3: number }
  | { kind: 'man-follow-up'; window: Interval }
  | { kind: 'make-ready'; items: string[] };

/** Where a rule or a figure comes from; `status` says how firmly. */
export interface FindingSource {
  /** Document, edition, table or equation, or the name of the company's own setting. */
  title: string;
  status: 'published' | 'from memory' | 'common practice, no source' | 'arithmetic' | 'company setting';
}

/** Value of one input or result that a finding shows. Keys carry the unit (`areaFt2`, `placingHours`). */
export type FactValue = number | string | boolean | null;

/** One result of a check. Everything needed to word it and to show how it was reckoned is in it. */
export interface Finding {
  code: FindingCode;
  severity: Severity;
  /** The visit that carries the finding. */
  visitId: string;
  /** The rows it collides with, most important first; empty where there are none. */
  against: FindingSubject[];
  /** When it applies, or null where it applies to the whole visit. */
  during: Interval | null;
  /** Inputs and results, units in the keys, instants as `…Ms`. */
  facts: Record<string, FactValue>;
  /** The formula in mathematical notation, or null where none is behind it. */
  formula: string | null;
  source: FindingSource;
  clears: Clearing[];
}

const rank: Record<Severity, number> = { stop: 0, caution: 1, note: 2 };

/** Orders findings: stops first, then cautions, then notes; by code within the same severity. */
export function compareFindings(a: Finding, b: Finding): number {
  return rank[a.severity] - rank[b.severity] || a.code.localeCompare(b.code);
}

/** The worst severity among findings, or null when there are none. */
export function worstSeverity(findings: readonly Finding[]): Severity | null {
  let worst: Severity | null = null;
  for (const f of findings) if (worst === null || rank[f.severity] < rank[worst]) worst = f.severity;
  return worst;
}
