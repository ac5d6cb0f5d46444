import { InputProblem, requireInRange, requirePositive } from './problem.ts';

/** Concrete placed evenly between two times; a slab placed at a changing rate is several patches. Hours from any one zero. */
export interface Patch {
  readonly placedFromH: number;
  readonly placedUntilH: number;
  readonly areaFt2: number;
  readonly personHoursPerFt2: number;
  /** From placing to the opening of the window (initial set). */
  readonly opensAfterH: number;
  readonly windowH: number;
}

/** People at the finishing during a stretch; outside every stretch there are none. Overlapping stretches add up. */
export interface Hands {
  readonly fromH: number;
  readonly untilH: number;
  readonly people: number;
}

export interface FinishingRun {
  /** Every part was finished before its window closed. */
  readonly inTime: boolean;
  /** When the last part is finished; null when the people leave before. */
  readonly finishedH: number | null;
  /** Close of the window of the first part that was missed; null when none was. */
  readonly firstMissedH: number | null;
  readonly missedFt2: number;
  /** The longest that a part was finished after its window had closed; endless when the people leave before. */
  readonly worstLateH: number;
}

interface Strip {
  readonly opensH: number;
  readonly closesH: number;
  readonly areaFt2: number;
  readonly workH: number;
}

const MAX_STRIPS = 50_000;

/**
 * Finishing in strips of `stepMin` minutes of placing, worked in the order they open. Takes changing rates,
 * breaks, people who join later and slabs one after another, where the closed form of an even placing ends.
 * A strip counts as open once all of it is placed, and as closed when its first concrete is, so the answer errs to
 * the safe side by at most one step. Throws InputProblem for empty or endless input.
 */
export function simulateFinishing(input: {
  patches: readonly Patch[];
  hands: readonly Hands[];
  stepMin?: number;
}): FinishingRun {
  const stepH = requireInRange('stepMin', input.stepMin ?? 1, 0.01, 60) / 60;
  const strips = input.patches.flatMap((patch) => stripsOf(patch, stepH));
  if (strips.length === 0) throw new InputProblem('patches', input.patches, 'at least one patch');
  if (strips.length > MAX_STRIPS)
    throw new InputProblem('stepMin', input.stepMin, 'a longer step for so long a pour');
  strips.sort((a, b) => a.opensH - b.opensH || a.closesH - b.closesH);
  const stretches = stretchesOf(input.hands);

  let nowH = Number.NEGATIVE_INFINITY;
  let stretch = 0;
  let firstMissedH: number | null = null;
  let missedFt2 = 0;
  let worstLateH = 0;
  for (const strip of strips) {
    nowH = Math.max(nowH, strip.opensH);
    let leftH = strip.workH;
    for (; leftH > 0 && stretch < stretches.length; ) {
      const hands = stretches[stretch];
      if (!hands || hands.untilH <= nowH || hands.people === 0) {
        stretch++;
        continue;
      }
      nowH = Math.max(nowH, hands.fromH);
      const canDoH = (hands.untilH - nowH) * hands.people;
      const doneH = Math.min(canDoH, leftH);
      leftH -= doneH;
      if (leftH > 0) nowH = hands.untilH;
      else nowH += doneH / hands.people;
    }
    if (leftH > 0) nowH = Number.POSITIVE_INFINITY;
    if (nowH > strip.closesH + 1e-9) {
      firstMissedH = Math.min(firstMissedH ?? Number.POSITIVE_INFINITY, strip.closesH);
      missedFt2 += strip.areaFt2;
      worstLateH = Math.max(worstLateH, nowH - strip.closesH);
    }
  }
  const finishedH = Number.isFinite(nowH) ? nowH : null;
  return { inTime: firstMissedH === null, finishedH, firstMissedH, missedFt2, worstLateH };
}

function stripsOf(patch: Patch, stepH: number): Strip[] {
  const fromH = requireInRange('placedFromH', patch.placedFromH, -1e5, 1e5);
  const untilH = requireInRange('placedUntilH', patch.placedUntilH, -1e5, 1e5);
  if (untilH <= fromH) throw new InputProblem('placedUntilH', untilH, 'later than placedFromH');
  requirePositive('areaFt2', patch.areaFt2);
  requirePositive('personHoursPerFt2', patch.personHoursPerFt2);
  requireInRange('opensAfterH', patch.opensAfterH, 0, 1000);
  requireInRange('windowH', patch.windowH, 0, 1000);
  const count = Math.min(Math.ceil((untilH - fromH) / stepH - 1e-9), MAX_STRIPS + 1);
  const lengthH = (untilH - fromH) / count;
  const areaFt2 = patch.areaFt2 / count;
  return Array.from({ length: count }, (_, index) => ({
    opensH: fromH + (index + 1) * lengthH + patch.opensAfterH,
    closesH: fromH + index * lengthH + patch.opensAfterH + patch.windowH,
    areaFt2,
    workH: areaFt2 * patch.personHoursPerFt2,
  }));
}

/** Stretches in order, without overlap: the sum of all hands between each two changes. */
function stretchesOf(hands: readonly Hands[]): Hands[] {
  for (const one of hands) {
    requireInRange('fromH', one.fromH, -1e6, 1e6);
    requireInRange('untilH', one.untilH, -1e6, 1e6);
    if (one.untilH <= one.fromH) throw new InputProblem('untilH', one.untilH, 'later than fromH');
    requireInRange('people', one.people, 0, 10_000);
  }
  const times = [...new Set(hands.flatMap((one) => [one.fromH, one.untilH]))].sort((a, b) => a - b);
  return times.slice(0, -1).map((fromH, index) => ({
    fromH,
    untilH: times[index + 1] ?? fromH,
    people: hands.reduce((sum, one) => sum + (one.fromH <= fromH && fromH < one.untilH ? one.people : 0), 0),
  }));
}
