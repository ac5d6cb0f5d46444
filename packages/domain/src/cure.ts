import { type Interval, MS_PER_HOUR } from './interval.ts';
import { requireFinite, requireInRange, requirePositive } from './problem.ts';
import { fToC } from './units.ts';
import { type Cement, type CureUse, cureUses } from './vocabulary.ts';

/** Concrete held at a temperature for a time. */
export interface TempStep {
  readonly tempC: number;
  readonly hours: number;
}

export type CureMethod = 'moist' | 'steam';

/** A stretch of elapsed time in which a slab must not carry a use. */
export interface Blackout {
  readonly use: CureUse;
  readonly interval: Interval;
}

export interface CureInput {
  /** Temperature at which the slab cures, F, 32 to 120. */
  readonly concreteTempF: number;
  readonly cement: Cement;
  /** The company's own hours by use at 68 F, in place of the published ones. */
  readonly companyOverrides?: Partial<Record<CureUse, number>>;
}

interface Release {
  readonly hours: number;
  readonly source: string;
}

/** Hours until release at 68 F and above, from published minimum times. */
export const publishedReleases: Readonly<Record<CureUse, Release>> = {
  foot: { hours: 24, source: 'published: Masonry and Concrete (2004) p. 76, foot traffic after day 1' },
  forms: { hours: 24, source: 'published: Masonry and Concrete (2004) p. 76, slab edge forms' },
  'light-vehicle': {
    hours: 7 * 24,
    source: 'published: Masonry and Concrete (2004) p. 76, light rubber-tyred vehicles after week 1',
  },
  'full-load': {
    hours: 28 * 24,
    source: 'published: cost guide and engineers, heavy vehicles at 28 to 30 days',
  },
  'adjacent-pour': { hours: 24, source: 'common practice, no source' },
};

/** Least days of moist curing: UFGS 03301 and ACI 308 for types I and II, ACI 318-19 26.5.3.2 (from memory) for III. */
export const moistCureDays: Readonly<Record<Cement, number>> = { 'type-i': 7, 'type-ii': 14, 'type-iii': 3 };

// ACI 209R-92 table 2.2.1. It has no Type II; that is read as Type I.
const STRENGTH_CONSTANTS: Record<CureMethod, Record<Cement, { a: number; b: number }>> = {
  moist: { 'type-i': { a: 4, b: 0.85 }, 'type-ii': { a: 4, b: 0.85 }, 'type-iii': { a: 2.3, b: 0.92 } },
  steam: { 'type-i': { a: 1, b: 0.95 }, 'type-ii': { a: 1, b: 0.95 }, 'type-iii': { a: 0.7, b: 0.98 } },
};

/** Activation energy over the gas constant, K; ASTM C1074's usual figure (from memory). */
export const Q_KELVIN = 5000;
const KELVIN = 273.15;
/** 68 F, at which the release hours hold. */
const REFERENCE_TEMP_C = 20;

/**
 * Strength as a share of the 28-day figure, ACI 209R-92 equation 2-1: t / (a + b t), t in days near 70 F.
 * At 28 days it is not exactly 1 (Type I moist 1.0072). Steam constants are from memory.
 */
export function strengthFraction(ageDays: number, cement: Cement, cure: CureMethod = 'moist'): number {
  requireInRange('ageDays', ageDays, 0, 1e5);
  const { a, b } = STRENGTH_CONSTANTS[cure][cement];
  return ageDays / (a + b * ageDays);
}

/** Days near 70 F until a share of the 28-day strength is there; the inverse of {@link strengthFraction}. */
export function daysToFraction(fraction: number, cement: Cement, cure: CureMethod = 'moist'): number {
  requireInRange('fraction', fraction, 0, 1);
  const { a, b } = STRENGTH_CONSTANTS[cure][cement];
  return (a * fraction) / (1 - b * fraction);
}

/** Temperature-time factor of Nurse and Saul, C-hours (ASTM C1074); time below the datum counts 0, never less. */
export function nurseSaulCh(steps: readonly TempStep[], datumC = 0): number {
  requireFinite('datumC', datumC);
  return steps.reduce((sum, step) => {
    requireStep(step);
    return sum + Math.max(0, step.tempC - datumC) * step.hours;
  }, 0);
}

/** Speed of hardening at a temperature against that at the reference (ASTM C1074, Arrhenius form). */
export function rateFactor(tempC: number, options: { qKelvin?: number; referenceC?: number } = {}): number {
  requireInRange('tempC', tempC, -40, 100);
  const qKelvin = requirePositive('qKelvin', options.qKelvin ?? Q_KELVIN);
  const referenceC = requireInRange('referenceC', options.referenceC ?? REFERENCE_TEMP_C, -40, 100);
  return Math.exp(-qKelvin * (1 / (tempC + KELVIN) - 1 / (referenceC + KELVIN)));
}

/** Hours at the reference temperature (20 C unless given) that harden the concrete as much (ASTM C1074). */
export function equivalentAgeH(
  steps: readonly TempStep[],
  options: { qKelvin?: number; referenceC?: number } = {},
): number {
  return steps.reduce((sum, step) => {
    requireStep(step);
    return sum + rateFactor(step.tempC, options) * step.hours;
  }, 0);
}

/**
 * Elapsed hours from the end of placing until a slab may carry a use: the published minimum (or the company's
 * own figure), lengthened by equivalent age where it cures colder than 68 F and never shortened where it is
 * hotter. A planning figure; test results and the specification decide.
 */
export function releaseAgeH(use: CureUse, input: CureInput): number {
  requireInRange('concreteTempF', input.concreteTempF, 32, 120);
  const hours = requireInRange(
    `cureHours.${use}`,
    input.companyOverrides?.[use] ?? publishedReleases[use].hours,
    0,
    1e5,
  );
  return hours / Math.min(1, rateFactor(fToC(input.concreteTempF)));
}

/**
 * The blackouts of a slab by use, from the end of placing. Elapsed time: 168 h from 15:00 before the spring
 * change of clocks end at 16:00. A use that the company releases at once has none.
 */
export function blackouts(input: CureInput & { placedEndMs: number }): Blackout[] {
  const startMs = requireFinite('placedEndMs', input.placedEndMs);
  return cureUses.flatMap((use) => {
    const endMs = startMs + Math.round(releaseAgeH(use, input) * MS_PER_HOUR);
    return endMs > startMs ? [{ use, interval: { startMs, endMs } }] : [];
  });
}

function requireStep(step: TempStep): void {
  requireInRange('tempC', step.tempC, -40, 100);
  requireInRange('hours', step.hours, 0, 1e6);
}
