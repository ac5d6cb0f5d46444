/** What a plant is asked to make, over time. Shared by the check of its limit and by the board's rail. */

import type { BoardIndex } from './board-index.ts';
import type { CompanyRules } from './company-rules.ts';
import { type Interval, MS_PER_HOUR, MS_PER_MIN } from './interval.ts';
import { batchAtMs, loadsForOrder } from './loads.ts';
import type { MixOrder, Plant, Site } from './snapshot.ts';
import { travelMin } from './travel.ts';

/** Yards that one order takes evenly from a plant during an interval, at batching time. */
export interface PlantDraw extends Interval {
  readonly visitId: string;
  readonly yd3PerHour: number;
}

/** The hour in which most is asked of a plant. */
export interface PeakHour {
  readonly hour: Interval;
  readonly yd3: number;
  /** The part of it that one visit's order takes. */
  readonly ownYd3: number;
}

type OrderTimes = Pick<MixOrder, 'visitId' | 'orderedYd3' | 'loadYd3' | 'spacingMin' | 'during'>;

interface KnownDraws {
  readonly plant: Plant;
  readonly site: Site | null;
  readonly rules: CompanyRules;
  readonly draws: readonly PlantDraw[];
}
const known = new WeakMap<OrderTimes, KnownDraws>();

/** The draws of an order that stands, kept with its row: a plant has hundreds, and every check asks for those near. */
export function drawsOfRow(index: BoardIndex, plant: Plant, order: MixOrder): readonly PlantDraw[] {
  const site = siteOfOrder(index, order);
  const kept = known.get(order);
  if (kept && kept.plant === plant && kept.site === site && kept.rules === index.rules) return kept.draws;
  const draws = drawsOfOrder(index, plant, order);
  known.set(order, { plant, site, rules: index.rules, draws });
  return draws;
}

/**
 * An order as the plant sees it: each load is spread over the spacing that follows it, from the instant it is
 * batched. 9 yd3 every 18 min are 30 yd3/h, although four loads begin in some hours. Arithmetic.
 */
export function drawsOfOrder(index: BoardIndex, plant: Plant, order: OrderTimes): PlantDraw[] {
  const site = siteOfOrder(index, order);
  const startMs = batchAtMs(order.during.startMs, {
    batchAndCheckMin: index.rules.batchAndCheckMin,
    travelMin: travelMin(plant, site, index.rules),
  });
  const loads = loadsForOrder(order.orderedYd3, order.loadYd3);
  const spacingMs = order.spacingMin * MS_PER_MIN;
  const full = loads.filter((yd3) => yd3 === order.loadYd3).length;
  const rest = loads.at(-1) ?? 0;
  const fullEndMs = startMs + full * spacingMs;
  const rate = (yd3: number): number => (yd3 * MS_PER_HOUR) / spacingMs;
  const draws: PlantDraw[] = [];
  const { visitId } = order;
  if (full > 0) draws.push({ visitId, startMs, endMs: fullEndMs, yd3PerHour: rate(order.loadYd3) });
  if (full < loads.length)
    draws.push({ visitId, startMs: fullEndMs, endMs: fullEndMs + spacingMs, yd3PerHour: rate(rest) });
  return draws;
}

/** Everything that placed visits take from a plant, by start; what is drawn on the plant's rail. */
export function drawsOnPlant(index: BoardIndex, plantId: string): PlantDraw[] {
  const plant = index.plants.get(plantId);
  if (!plant) return [];
  return (index.ordersByPlant.get(plantId) ?? [])
    .flatMap((order) => drawsOfRow(index, plant, order))
    .sort((a, b) => a.startMs - b.startMs);
}

/** The hour with most yards among those in which `visitId` takes any; null when it takes none. */
export function peakHour(draws: readonly PlantDraw[], visitId: string): PeakHour | null {
  let peak: PeakHour | null = null;
  // Yards in a sliding hour grow and shrink evenly between edges, so the most is where an end meets an edge.
  for (const { startMs, endMs } of draws) {
    for (const fromMs of [startMs, endMs, startMs - MS_PER_HOUR, endMs - MS_PER_HOUR]) {
      let yd3 = 0;
      let ownYd3 = 0;
      for (const draw of draws) {
        const sharedMs = Math.min(draw.endMs, fromMs + MS_PER_HOUR) - Math.max(draw.startMs, fromMs);
        if (sharedMs <= 0) continue;
        const part = (draw.yd3PerHour * sharedMs) / MS_PER_HOUR;
        yd3 += part;
        if (draw.visitId === visitId) ownYd3 += part;
      }
      const earlier = peak !== null && fromMs < peak.hour.startMs;
      if (ownYd3 > 0 && (!peak || yd3 > peak.yd3 + 1e-9 || (earlier && yd3 > peak.yd3 - 1e-9)))
        peak = { hour: { startMs: fromMs, endMs: fromMs + MS_PER_HOUR }, yd3, ownYd3 };
    }
  }
  return peak;
}

function siteOfOrder(index: BoardIndex, order: OrderTimes): Site | null {
  const visit = index.visits.get(order.visitId);
  return visit ? (index.sites.get(visit.siteId) ?? null) : null;
}
