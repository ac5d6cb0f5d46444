/** A pour's form as it is typed, and what of it goes to the server. */

import type { Pour, Visit } from '@strikeboard/domain/snapshot';
import { finishes, jointings, placingMethods } from '@strikeboard/domain/vocabulary';
import { office } from '../../lib/words/office.en.ts';

const words = office.pourForm;

/** Every field as text, so that what was typed stays as it was typed. */
export type PourDraft = Record<
  | 'name'
  | 'orderedYd3'
  | 'mixId'
  | 'finish'
  | 'placingMethod'
  | 'jointing'
  | 'placingRateYd3PerHour'
  | 'concreteTempF'
  | 'peopleToPlace'
  | 'peopleToFinish'
  | 'pumpId'
  | 'wantedOn'
  | 'notes',
  string
> & { willCall: boolean; readiness: { item: string; done: boolean }[] };

const textOf = (value: number | string | null): string => (value === null ? '' : String(value));

export function draftOf(pour: Pour, visit: Visit): PourDraft {
  return {
    name: pour.name,
    orderedYd3: textOf(pour.orderedYd3),
    mixId: textOf(pour.mixId),
    finish: pour.finish,
    placingMethod: pour.placingMethod,
    jointing: pour.jointing,
    placingRateYd3PerHour: textOf(pour.placingRateYd3PerHour),
    concreteTempF: textOf(pour.concreteTempF),
    peopleToPlace: textOf(pour.peopleToPlace),
    peopleToFinish: textOf(pour.peopleToFinish),
    pumpId: textOf(pour.pumpId),
    wantedOn: textOf(visit.wantedOn),
    notes: textOf(pour.notes),
    willCall: pour.willCall,
    readiness: pour.readiness,
  };
}

/** A typed number; NaN for what is none, which the server refuses with the field's name. Null when left blank. */
export function numberIn(typed: string): number | null {
  const bare = typed.trim().replaceAll(',', '');
  return bare === '' ? null : Number(bare);
}

const oneOf = <T extends string>(list: readonly T[], value: string): T | undefined =>
  list.find((known) => known === value);

/** The fields that differ from what was read, in the server's types. */
export function changesIn(draft: PourDraft, before: PourDraft) {
  const changed = (key: keyof PourDraft) => JSON.stringify(draft[key]) !== JSON.stringify(before[key]);
  return {
    ...(changed('name') && { name: draft.name }),
    ...(changed('orderedYd3') && { orderedYd3: numberIn(draft.orderedYd3) ?? Number.NaN }),
    ...(changed('mixId') && { mixId: draft.mixId || null }),
    ...(changed('finish') && { finish: oneOf(finishes, draft.finish) }),
    ...(changed('placingMethod') && { placingMethod: oneOf(placingMethods, draft.placingMethod) }),
    ...(changed('jointing') && { jointing: oneOf(jointings, draft.jointing) }),
    ...(changed('placingRateYd3PerHour') && { placingRateYd3PerHour: numberIn(draft.placingRateYd3PerHour) }),
    ...(changed('concreteTempF') && { concreteTempF: numberIn(draft.concreteTempF) }),
    ...(changed('peopleToPlace') && { peopleToPlace: numberIn(draft.peopleToPlace) }),
    ...(changed('peopleToFinish') && { peopleToFinish: numberIn(draft.peopleToFinish) }),
    ...(changed('pumpId') && { pumpId: draft.pumpId || null }),
    ...(changed('wantedOn') && { wantedOn: draft.wantedOn || null }),
    ...(changed('notes') && { notes: draft.notes || null }),
    ...(changed('willCall') && { willCall: draft.willCall }),
    ...(changed('readiness') && { readiness: draft.readiness }),
  };
}

/** Fields in which something was typed that is no number, with what is wrong; the server never sees those. */
export function notNumbers(draft: PourDraft): Partial<Record<string, string>> {
  const wrong: Partial<Record<string, string>> = {};
  for (const key of [
    'orderedYd3',
    'placingRateYd3PerHour',
    'concreteTempF',
    'peopleToPlace',
    'peopleToFinish',
  ] as const)
    if (Number.isNaN(numberIn(draft[key]) ?? 0)) wrong[key] = words.notANumber(draft[key].trim());
  if (draft.orderedYd3.trim() === '') wrong.orderedYd3 = words.yardsMissing;
  return wrong;
}
