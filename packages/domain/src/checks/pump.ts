import type { Clearing } from '../finding.ts';
import { MS_PER_MIN } from '../interval.ts';
import type { Plan } from '../plan.ts';
import { pumpClash, pumpHeld } from '../plan-pump.ts';
import { type Check, sources, subject, visitSubject } from './report.ts';

/** The pump is held by another visit, or the method needs one and none that suits is free. */
export const pumpOverlap: Check = (plan, report) => {
  const { pour, pump } = plan;
  if (!pour || !pump) return;
  const { booking, clash, suitable } = pump;
  if (!booking) {
    report('pump-overlap', 'stop', () => ({
      against: suitable.map((one) => subject('equipment', one.id)),
      during: pour.chain.placing,
      facts: { method: pour.pour.placingMethod, pumpsThatSuit: suitable.length, pumpsFree: 0 },
      source: sources.pump,
      clears: earliestFree(plan),
    }));
    return;
  }
  if (!clash) return;
  report('pump-overlap', 'stop', () => {
    const { travelMin, setUpMin, washOutMin } = booking.pump;
    return {
      against: [subject('equipment', booking.pump.id), visitSubject(clash.visitId)],
      during: clash.held,
      facts: {
        pumpName: booking.pump.name,
        heldFromMs: booking.held.startMs,
        heldUntilMs: booking.held.endMs,
        takenFromMs: clash.held.startMs,
        takenUntilMs: clash.held.endMs,
        travelMin,
        setUpMin,
        washOutMin,
      },
      formula: 'held = placing + travel and set-up before + wash-out after',
      source: sources.pump,
      clears: [
        ...otherPump(plan),
        { kind: 'start-after', atMs: plan.during.startMs + clash.held.endMs - booking.held.startMs },
      ],
    };
  });
};

/** The pump delivers less than the trucks bring, so they queue. */
export const pumpOutput: Check = (plan, report) => {
  const booking = plan.pump?.booking;
  const output = booking?.pump.outputYd3PerHour ?? null;
  const chain = plan.pour?.chain;
  if (!booking || !chain || output === null || chain.placingRateYd3PerHour <= output) return;
  report('pump-slower-than-trucks', 'caution', () => ({
    against: [subject('equipment', booking.pump.id)],
    during: chain.placing,
    facts: {
      pumpName: booking.pump.name,
      outputYd3PerHour: output,
      placingRateYd3PerHour: chain.placingRateYd3PerHour,
      spacingMin: chain.spacingMin,
      loadYd3: chain.loadYd3,
    },
    formula: 'load / spacing <= output',
    source: sources.pumpOutput,
    clears: [
      { kind: 'placing-rate-under', yd3PerHour: output },
      { kind: 'spacing-over', minutes: Math.ceil((60 * chain.loadYd3) / output) },
      { kind: 'other-pump' },
    ],
  }));
};

function otherPump(plan: Plan): Clearing[] {
  const { pump, pour, index, visit } = plan;
  if (!pump || !pour) return [];
  const free = pump.suitable.some(
    (one) =>
      one.id !== pump.booking?.pump.id && !pumpClash(index, one.id, visit.id, pumpHeld(one, pour.chain)),
  );
  return free ? [{ kind: 'other-pump' }] : [];
}

/** When the first of the pumps that suit comes free of what holds it now. */
function earliestFree(plan: Plan): Clearing[] {
  const { pump, pour, index, visit } = plan;
  if (!pump || !pour) return [];
  let atMs: number | null = null;
  for (const one of pump.suitable) {
    const held = pumpHeld(one, pour.chain);
    const clash = pumpClash(index, one.id, visit.id, held);
    if (!clash) continue;
    const freeMs = plan.during.startMs + clash.held.endMs - held.startMs;
    if (atMs === null || freeMs < atMs) atMs = freeMs;
  }
  return atMs === null ? [] : [{ kind: 'start-after', atMs: Math.ceil(atMs / MS_PER_MIN) * MS_PER_MIN }];
}
