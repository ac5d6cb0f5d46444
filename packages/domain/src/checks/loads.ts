import { coldJointLimitMin } from '../loads.ts';
import { type Check, sources, subject } from './report.ts';

/** Trucks so far apart that a placed edge is too stiff to knit with the next load. */
export const coldJoint: Check = (plan, report) => {
  const chain = plan.pour?.chain;
  if (!chain || chain.loads.length < 2) return;
  const { coldJointMin } = plan.index.rules;
  const spacingMin = plan.order?.spacingMin ?? chain.spacingMin;
  const limitMin = coldJointLimitMin({ limitAt70FMin: coldJointMin, concreteTempF: chain.concreteTempF });
  if (spacingMin <= limitMin) return;
  report('spacing-cold-joint', 'caution', () => ({
    during: chain.placing,
    facts: {
      spacingMin,
      limitMin: Math.round(limitMin * 10) / 10,
      coldJointMin,
      concreteTempF: chain.concreteTempF,
      loadYd3: chain.loadYd3,
      placingRateYd3PerHour: chain.placingRateYd3PerHour,
    },
    formula: 'spacing <= limit at 70 F x 2^((70 - T) / 20)',
    source: sources.coldJoint,
    clears: [{ kind: 'spacing-under', minutes: Math.floor(limitMin) }],
  }));
};

/** Concrete too old by the end of its discharge: batching, haul, the longest wait on site and unloading. */
export const dischargeLate: Check = (plan, report) => {
  if (!plan.pour) return;
  const { chain, mix } = plan.pour;
  const { rules } = plan.index;
  const limitMin = mix?.dischargeLimitMin ?? rules.dischargeLimitMin;
  if (chain.oldestMin <= limitMin) return;
  report('discharge-late', 'caution', () => ({
    against: mix ? [subject('plant', mix.plantId)] : [],
    facts: {
      ageMin: chain.oldestMin,
      limitMin,
      batchAndCheckMin: rules.batchAndCheckMin,
      haulMin: chain.haulMin,
      waitMin: chain.waitMin,
      unloadMin: rules.unloadMin,
    },
    formula: 'batch and check + haul + wait + unload <= limit',
    source: mix?.dischargeLimitMin == null ? sources.dischargeRule : sources.dischargeOrder,
    clears: [
      ...(chain.waitMin > 0 ? [{ kind: 'spacing-over', minutes: rules.unloadMin } as const] : []),
      { kind: 'other-plant' },
    ],
  }));
};

/** The last load is under what the plant brings without a charge. */
export const shortLoad: Check = (plan, report) => {
  const { pour, order } = plan;
  const plant = order && plan.index.plants.get(order.plantId);
  const least = plant?.shortLoadYd3 ?? null;
  const last = pour?.chain.loads.at(-1)?.yd3;
  if (!pour || !plant || least === null || last === undefined || last >= least) return;
  report('short-load', 'note', () => ({
    against: [subject('plant', plant.id)],
    facts: {
      lastLoadYd3: last,
      shortLoadYd3: least,
      orderedYd3: pour.chain.orderedYd3,
      loads: pour.chain.loads.length,
    },
    source: sources.shortLoad,
    clears: [
      { kind: 'order-at-least', yd3: Math.round((pour.chain.orderedYd3 - last + least) * 1000) / 1000 },
      { kind: 'other-plant' },
    ],
  }));
};
