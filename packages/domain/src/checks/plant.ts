import type { Clearing } from '../finding.ts';
import { MS_PER_HOUR, MS_PER_MIN, overlaps } from '../interval.ts';
import { batchAtMs } from '../loads.ts';
import type { Plan } from '../plan.ts';
import { drawsOfOrder, drawsOfRow, type PlantDraw, peakHour } from '../plant-use.ts';
import type { Plant } from '../snapshot.ts';
import { addDays, instantAt, minuteOfDay, type SiteDay, siteDayOf, weekdayOf } from '../zone.ts';
import { type Check, sources, subject, tenthBelow, visitSubject } from './report.ts';

/** Orders whose trucks arrive further away than this are batched in other hours. */
const LOOK_MS = 24 * MS_PER_HOUR;
/** Days ahead in which the next opening is looked for. */
const LOOK_DAYS = 14;

/** No mix chosen, or one that its plant does not carry. */
export const mixCarried: Check = (plan, report) => {
  const { pour, order, index } = plan;
  if (!pour) return;
  if (pour.pour.mixId === null) {
    report('mix-not-carried', 'caution', () => ({
      facts: { mix: null },
      source: sources.mixes,
      clears: [{ kind: 'choose-mix' }],
    }));
    return;
  }
  const mix = order && index.mixes.get(order.mixId);
  if (mix && mix.plantId === order.plantId && index.plants.has(mix.plantId)) return;
  report('mix-not-carried', 'stop', () => ({
    against: order ? [subject('plant', order.plantId)] : [],
    facts: { mix: mix?.code ?? null },
    source: sources.mixes,
    clears: [{ kind: 'choose-mix' }, { kind: 'other-plant' }],
  }));
};

/** Every load is batched in the plant's hours, on a day on which it is open. */
export const plantClosed: Check = (plan, report) => {
  const { pour, order } = plan;
  const plant = order && plan.index.plants.get(order.plantId);
  if (!pour || !plant) return;
  const { loads, haulMin } = pour.chain;
  const haul = { batchAndCheckMin: plan.index.rules.batchAndCheckMin, travelMin: haulMin };
  const closed = loads.filter((load) => !plantLoadsAt(plant, batchAtMs(load.arriveMs, haul)));
  const firstClosed = closed[0];
  if (!firstClosed) return;
  report('plant-closed', 'stop', () => {
    const firstMs = batchAtMs(loads[0]?.arriveMs ?? firstClosed.arriveMs, haul);
    const lastMs = batchAtMs(loads.at(-1)?.arriveMs ?? firstClosed.arriveMs, haul);
    const fromMs = batchAtMs(firstClosed.arriveMs, haul);
    return {
      against: [subject('plant', plant.id)],
      during: { startMs: fromMs, endMs: Math.max(lastMs, fromMs + MS_PER_MIN) },
      facts: {
        plantZone: plant.zone,
        firstBatchMs: firstMs,
        lastBatchMs: lastMs,
        loads: loads.length,
        loadsOutside: closed.length,
        closedThatDay: hoursOn(plant, siteDayOf(fromMs, plant.zone)) === null,
        haulMin,
      },
      formula: 'batch = arrival - haul - batch and check',
      source: sources.plantHours,
      clears: [...withinHours(plan, plant, firstMs, lastMs), { kind: 'other-plant' }],
    };
  });
};

/** The plant's yards in any hour, over all its orders, against what it can make. */
export const plantCapacity: Check = (plan, report) => {
  const { order, index } = plan;
  const plant = order && index.plants.get(order.plantId);
  const max = plant?.maxYd3PerHour ?? null;
  if (!order || !plant || max === null) return;
  const visitId = plan.visit.id;
  const draws = drawsOfOrder(index, plant, { ...order, visitId });
  const fromMs = (draws[0]?.startMs ?? 0) - MS_PER_HOUR;
  const reach = { startMs: fromMs, endMs: (draws.at(-1)?.endMs ?? fromMs) + MS_PER_HOUR };
  const look = { startMs: reach.startMs - LOOK_MS, endMs: reach.endMs + LOOK_MS };
  const mine = (60 * order.loadYd3) / order.spacingMin;
  let most = mine;
  for (const other of index.ordersByPlant.get(plant.id) ?? []) {
    if (other.during.startMs >= look.endMs) break;
    if (other.visitId === visitId || !overlaps(other.during, look)) continue;
    for (const draw of drawsOfRow(index, plant, other)) {
      if (!overlaps(draw, reach)) continue;
      draws.push(draw);
      most += draw.yd3PerHour;
    }
  }
  if (most <= max) return;
  const peak = peakHour(draws, visitId);
  if (!peak || peak.yd3 <= max + 1e-6) return;
  report('plant-over-capacity', 'caution', () => {
    const others = othersIn(draws, visitId, peak.hour);
    const left = tenthBelow(max - (peak.yd3 - peak.ownYd3));
    return {
      against: [subject('plant', plant.id), ...others.map(visitSubject)],
      during: peak.hour,
      facts: {
        peakYd3PerHour: Math.round(peak.yd3 * 100) / 100,
        maxYd3PerHour: max,
        ownYd3PerHour: Math.round(mine * 100) / 100,
        otherOrders: others.length,
      },
      formula: 'most yards in any hour, over all orders <= limit',
      source: sources.plantRate,
      clears: [
        ...(left > 0 && left < mine ? [{ kind: 'placing-rate-under', yd3PerHour: left } as const] : []),
        { kind: 'other-plant' },
      ],
    };
  });
};

/** Whether the plant loads trucks at that instant, the last load's minute included; true where its hours are unknown. */
export function plantLoadsAt(plant: Plant, ms: number): boolean {
  const day = siteDayOf(ms, plant.zone);
  const minute = minuteOfDay(ms, plant.zone);
  const today = hoursOn(plant, day);
  if (today === undefined || (today && within(today, minute))) return true;
  const yesterday = hoursOn(plant, addDays(day, -1));
  return yesterday ? within(yesterday, minute + 1440) : false;
}

type Hours = Plant['hours'][number];

/** The plant's hours on a day: null when closed, undefined when unknown. */
function hoursOn(plant: Plant, day: SiteDay): Hours | undefined {
  if (plant.closedDays.includes(day)) return null;
  return plant.hours[weekdayOf(day) - 1];
}

/** Hours that end before they begin run into the next day. */
const untilOf = (hours: NonNullable<Hours>): number =>
  hours.untilMin < hours.fromMin ? hours.untilMin + 1440 : hours.untilMin;

function within(hours: NonNullable<Hours>, minute: number): boolean {
  return hours.fromMin <= minute && minute <= untilOf(hours);
}

/** How far the crew's start would have to move for all loads to fall within the hours of one day. */
function withinHours(plan: Plan, plant: Plant, firstMs: number, lastMs: number): Clearing[] {
  const clears: Clearing[] = [];
  const startMs = plan.during.startMs;
  const day = siteDayOf(firstMs, plant.zone);
  for (let i = 0; i < LOOK_DAYS; i++) {
    const on = addDays(day, i);
    const hours = hoursOn(plant, on);
    if (!hours) continue;
    const opensMs = instantAt(on, hours.fromMin, plant.zone);
    const closesMs = instantAt(on, untilOf(hours), plant.zone);
    if (lastMs - firstMs > closesMs - opensMs) continue;
    if (i === 0 && lastMs > closesMs) clears.push({ kind: 'start-by', atMs: startMs - (lastMs - closesMs) });
    if (firstMs < opensMs) {
      clears.push({ kind: 'start-after', atMs: startMs + (opensMs - firstMs) });
      break;
    }
  }
  return clears;
}

function othersIn(draws: readonly PlantDraw[], visitId: string, hour: { startMs: number; endMs: number }) {
  const ids = new Set<string>();
  for (const draw of draws) if (draw.visitId !== visitId && overlaps(draw, hour)) ids.add(draw.visitId);
  return [...ids];
}
