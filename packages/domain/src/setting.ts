import { InputProblem, requireInRange } from './problem.ts';
import type { Cement } from './vocabulary.ts';

/** Hours after placing at which the concrete of a patch reaches each state. */
export interface SetTimes {
  /** Bleed water is gone; working it in before delaminates the top (ACI 302.1R). */
  readonly bleedEndH: number;
  /** 500 psi penetration resistance (ASTM C403): the window of finishability opens (ACI 302.1R). */
  readonly initialSetH: number;
  /** 4,000 psi penetration resistance (ASTM C403): the window closes. */
  readonly finalSetH: number;
}

export interface SettingInput {
  /** Temperature of the concrete, F; above 20 (at 20 F it does not set) and at most 120. */
  readonly concreteTempF: number;
  readonly cement?: Cement;
  /** Delay of a retarder as its maker states it at about 70 F, hours, 0 to 24. */
  readonly retarderH?: number;
  /** Gain of an accelerator as its maker states it at about 70 F, hours, 0 to 3.5 (ASTM C494 type C, from memory). */
  readonly acceleratorH?: number;
  /** A sheet under the slab sends all bleed water up, so bleeding lasts longer. */
  readonly vapourRetarder?: boolean;
}

/** Final set at 70 F, hours: the 6 h of the widely reprinted set-time table (ACI/PCA lineage, from memory). */
export const FINAL_SET_AT_70F_H = 6;
/** Window of finishability at 70 F, hours; common practice, no source. */
export const WINDOW_AT_70F_H = 2;

// Common practice, no source: Type III stiffens in about three quarters of the time; Type II is taken as Type I.
const CEMENT_FACTOR: Record<Cement, number> = { 'type-i': 1, 'type-ii': 1, 'type-iii': 0.75 };
// Common practice, no source: bleeding runs to near the initial set, and up to it over a sheet.
const BLEED_SHARE = 0.75;
const BLEED_SHARE_OVER_SHEET = 1;
// An accelerator cannot take away more than half the time to initial set. Common practice, no source.
const LEAST_ACCELERATED_SHARE = 0.5;

const SET_TABLE_H: readonly (readonly [concreteTempF: number, hours: number])[] = [
  [30, 19],
  [40, 14],
  [50, 11],
  [60, 8],
  [70, 6],
  [80, 4],
  [90, 8 / 3],
  [100, 5 / 3],
];

/**
 * How much longer than at 70 F setting takes: 20 F more halves it, 20 F less doubles it
 * (published: trade article citing ACI 305R-10 and ACI 306R-16). Always above 0, falling with temperature.
 */
export function temperatureFactor(concreteTempF: number): number {
  if (concreteTempF <= 20) {
    throw new InputProblem('concreteTempF', concreteTempF, 'above 20 F, below which concrete does not set');
  }
  requireInRange('concreteTempF', concreteTempF, 20, 120);
  return 2 ** ((70 - concreteTempF) / 20);
}

/**
 * Width of the window between initial and final set (ACI 302.1R), hours: 2.0 at 70 F, scaled as setting
 * is, so that hotter is never longer. Own combination of the two; arithmetic.
 */
export function windowOfFinishabilityH(concreteTempF: number): number {
  return WINDOW_AT_70F_H * temperatureFactor(concreteTempF);
}

/**
 * Bleed end, initial and final set of concrete held at one temperature. A retarder moves both sets by the
 * same time; an accelerator and Type III cement also narrow the window. Estimates for planning: the
 * foot test decides on the slab (a print about 1/4 in deep at initial set, hardly a scuff at final set).
 */
export function setTimesH(input: SettingInput): SetTimes {
  const factor = temperatureFactor(input.concreteTempF);
  const retarderH = requireInRange('retarderH', input.retarderH ?? 0, 0, 24);
  const acceleratorH = requireInRange('acceleratorH', input.acceleratorH ?? 0, 0, 3.5);
  const plainInitialH = (FINAL_SET_AT_70F_H - WINDOW_AT_70F_H) * CEMENT_FACTOR[input.cement ?? 'type-i'];
  const quickInitialH = Math.max(plainInitialH - acceleratorH, plainInitialH * LEAST_ACCELERATED_SHARE);
  const windowShare = quickInitialH / (FINAL_SET_AT_70F_H - WINDOW_AT_70F_H);

  const initialSetH = (quickInitialH + retarderH) * factor;
  const finalSetH = initialSetH + windowOfFinishabilityH(input.concreteTempF) * windowShare;
  const bleedEndH = initialSetH * (input.vapourRetarder ? BLEED_SHARE_OVER_SHEET : BLEED_SHARE);
  return { bleedEndH, initialSetH, finalSetH };
}

/**
 * The reprinted set-time table, read between its rows, hours (30 to 100 F; ACI/PCA lineage, from memory).
 * Kept to hold the formula above against: it runs up to a fifth shorter at 90 F and beyond, and shorter in the cold.
 */
export function tabulatedSetH(concreteTempF: number): number {
  requireInRange('concreteTempF', concreteTempF, 30, 100);
  let below = SET_TABLE_H[0] ?? [30, 19];
  for (const row of SET_TABLE_H) {
    if (row[0] >= concreteTempF) {
      const span = row[0] - below[0];
      return span === 0 ? row[1] : below[1] + ((row[1] - below[1]) * (concreteTempF - below[0])) / span;
    }
    below = row;
  }
  return below[1];
}
