import {
  EVAPORATION_ACTION_LB_PER_FT2_H,
  EVAPORATION_CAUTION_LB_PER_FT2_H,
  evaporationLbPerFt2H,
  windAtSlabMph,
} from '../evaporation.ts';
import { type Interval, MS_PER_HOUR } from '../interval.ts';
import type { Plan } from '../plan.ts';
import type { WeatherHour } from '../snapshot.ts';
import { type Check, sources, subject } from './report.ts';

/** Air below this is cold weather (ACI 306R-16). */
const COLD_AIR_F = 40;
/** Protection of a slab that is neither loaded nor exposed, days (ACI 306R, Type I and II; published). */
const PROTECTION_HOURS = 48;
/** Rain this likely before the surface has set is a caution. Common practice, no source. */
const RAIN_PERCENT = 50;
/** Wind at which booms are folded, mph, by the forecast's 10 m wind. Common practice, no source. */
const BOOM_WIND_MPH = 30;

/** The hour of an interval's forecast in which a value is highest; null where no hour has it. */
function highest(
  plan: Plan,
  during: Interval,
  measure: (hour: WeatherHour) => number | null,
): { hour: WeatherHour; value: number } | null {
  const hours = plan.index.weatherBySite.get(plan.site.id);
  if (!hours) return null;
  let worst: { hour: WeatherHour; value: number } | null = null;
  for (let i = firstAfter(hours, during.startMs - MS_PER_HOUR); i < hours.length; i++) {
    const hour = hours[i];
    if (!hour || hour.startMs >= during.endMs) break;
    const value = measure(hour);
    if (value !== null && (!worst || value > worst.value)) worst = { hour, value };
  }
  return worst;
}

/** First hour that starts after an instant. */
function firstAfter(hours: readonly WeatherHour[], ms: number): number {
  let low = 0;
  let high = hours.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((hours[middle]?.startMs ?? 0) > ms) high = middle;
    else low = middle + 1;
  }
  return low;
}

const hourOf = (hour: WeatherHour): Interval => ({
  startMs: hour.startMs,
  endMs: hour.startMs + MS_PER_HOUR,
});

/** Air under 40 F from the first load to the end of the protection, as far as the forecast goes. */
export const freezing: Check = (plan, report) => {
  const chain = plan.pour?.chain;
  if (!chain) return;
  const period = { startMs: chain.firstLoadMs, endMs: chain.lastLoadMs + PROTECTION_HOURS * MS_PER_HOUR };
  const coldest = highest(plan, period, (hour) => -hour.airTempF);
  if (!coldest || coldest.hour.airTempF >= COLD_AIR_F) return;
  report('freezing', 'caution', () => ({
    against: [subject('site', plan.site.id)],
    during: hourOf(coldest.hour),
    facts: {
      airTempF: coldest.hour.airTempF,
      limitF: COLD_AIR_F,
      atMs: coldest.hour.startMs,
      protectionHours: PROTECTION_HOURS,
    },
    formula: 'lowest air >= 40 F',
    source: sources.cold,
  }));
};

/** Bleed water evaporates fast while the surface is open: from the first load until the last patch has set. */
export const evaporationHigh: Check = (plan, report) => {
  const chain = plan.pour?.chain;
  if (!chain) return;
  const { concreteTempF } = chain;
  const open = { startMs: chain.firstLoadMs, endMs: chain.window.closesMs };
  const rateOf = ({ airTempF, humidityPercent, windMph }: WeatherHour): number =>
    evaporationLbPerFt2H({ concreteTempF, airTempF, humidityPercent, windMph: windAtSlabMph(windMph) });
  const worst = highest(plan, open, rateOf);
  if (!worst || worst.value < EVAPORATION_CAUTION_LB_PER_FT2_H) return;
  const severity = worst.value >= EVAPORATION_ACTION_LB_PER_FT2_H ? 'caution' : 'note';
  report('evaporation-high', severity, () => ({
    against: [subject('site', plan.site.id)],
    during: hourOf(worst.hour),
    facts: {
      evaporationLbPerFt2H: Math.round(worst.value * 1000) / 1000,
      actionLbPerFt2H: EVAPORATION_ACTION_LB_PER_FT2_H,
      concreteTempF,
      airTempF: worst.hour.airTempF,
      humidityPercent: worst.hour.humidityPercent,
      windMph: worst.hour.windMph,
      windAtSlabMph: Math.round(windAtSlabMph(worst.hour.windMph) * 10) / 10,
      atMs: worst.hour.startMs,
    },
    formula: 'E = (Tc^2.5 - r Ta^2.5) (1 + 0.4 V) 1e-6',
    source: sources.evaporation,
  }));
};

/** Rain likely before the last patch has set. An hour whose chance is unknown says nothing. */
export const rainLikely: Check = (plan, report) => {
  const chain = plan.pour?.chain;
  if (!chain) return;
  const open = { startMs: chain.firstLoadMs, endMs: chain.window.closesMs };
  const worst = highest(plan, open, (hour) => hour.rainChancePercent);
  if (!worst || worst.value < RAIN_PERCENT) return;
  report('rain-likely', 'caution', () => ({
    against: [subject('site', plan.site.id)],
    during: hourOf(worst.hour),
    facts: {
      rainChancePercent: worst.value,
      limitPercent: RAIN_PERCENT,
      atMs: worst.hour.startMs,
      finalSetMs: open.endMs,
    },
    source: sources.practice,
  }));
};

/** Wind at which a boom is folded, while it places. */
export const windBoom: Check = (plan, report) => {
  const { pour } = plan;
  if (pour?.pour.placingMethod !== 'boom-pump') return;
  const worst = highest(plan, pour.chain.placing, (hour) => hour.windMph);
  if (!worst || worst.value < BOOM_WIND_MPH) return;
  report('wind-boom', 'caution', () => ({
    against: [subject('site', plan.site.id)],
    during: hourOf(worst.hour),
    facts: { windMph: worst.value, limitMph: BOOM_WIND_MPH, atMs: worst.hour.startMs },
    source: sources.practice,
  }));
};
