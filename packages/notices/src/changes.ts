import type { ToldFacts } from '@strikeboard/domain/told';
import { minuteOfDay } from '@strikeboard/domain/zone';
import { type FactsText, factsText, type Style, timeText } from './facts-text.ts';
import { wordsOf } from './words/words.ts';

/** What of the facts has changed; each stands for one sentence of the message. */
export type ChangedFact = 'day' | 'start' | 'first-truck' | 'place' | 'amount' | 'finish' | 'work';

/**
 * What a person has to be told anew, in the order of the message. By the clock on the site's wall: a visit moved by a
 * day keeps its start. A renamed company or site, or a pour's new title, is not worth a message.
 */
export function changedFacts(told: ToldFacts, now: ToldFacts): ChangedFact[] {
  const changed: ChangedFact[] = [];
  const sameDay = told.day === now.day;
  if (!sameDay) changed.push('day');
  const startMoved = wallMinute(told, told.crewStartMs) !== wallMinute(now, now.crewStartMs);
  // Between equal days and clocks there is still the hour that comes twice in autumn, and a corrected zone.
  if (startMoved || (sameDay && told.crewStartMs !== now.crewStartMs)) changed.push('start');
  if (truckMoved(told, now, sameDay)) changed.push('first-truck');
  if (tidy(told.address) !== tidy(now.address)) changed.push('place');
  if (told.partYd3 !== now.partYd3 && told.partYd3 !== null && now.partYd3 !== null) changed.push('amount');
  if (told.finish !== now.finish && told.finish !== null && now.finish !== null) changed.push('finish');
  if (now.partYd3 === null && tidy(told.title) !== tidy(now.title)) changed.push('work');
  return changed;
}

/** One sentence for each changed fact, without a full stop. */
export function changeSentences(
  changed: readonly ChangedFact[],
  told: ToldFacts,
  now: ToldFacts,
  style: Style,
): string[] {
  const before = factsText(told, style);
  const after = factsText(now, style);
  return changed.map((fact) => sentence(fact, { told, now, before, after, style }));
}

function sentence(
  fact: ChangedFact,
  {
    told,
    now,
    before,
    after,
    style,
  }: { told: ToldFacts; now: ToldFacts; before: FactsText; after: FactsText; style: Style },
): string {
  const words = wordsOf(style.language);
  switch (fact) {
    case 'day':
      return words.dayMoved({ from: before.day, to: after.day });
    case 'start':
      return words.startMoved(distinct(told.crewStartMs, now.crewStartMs, told, now, style));
    case 'first-truck':
      if (now.firstLoadMs === null) return words.firstTruckGone();
      if (told.firstLoadMs === null) return words.firstTruckNow(timeText(now.firstLoadMs, now, style));
      return words.firstTruckMoved(distinct(told.firstLoadMs, now.firstLoadMs, told, now, style));
    case 'place':
      return words.placeChanged({ from: before.address, to: after.address });
    case 'amount':
      return words.amountChanged({ from: before.amount ?? '', to: after.amount ?? '' });
    case 'finish':
      return words.finishChanged({ from: before.finish ?? '', to: after.finish ?? '' });
    case 'work':
      return words.workChanged({ from: before.work, to: after.work });
  }
}

function truckMoved(told: ToldFacts, now: ToldFacts, sameDay: boolean): boolean {
  if (told.firstLoadMs === null || now.firstLoadMs === null) return told.firstLoadMs !== now.firstLoadMs;
  if (sameDay) return told.firstLoadMs !== now.firstLoadMs;
  return wallMinute(told, told.firstLoadMs) !== wallMinute(now, now.firstLoadMs);
}

/** Both times; where they read alike (the hour that comes twice), with the names of their zones. */
function distinct(fromMs: number, toMs: number, told: ToldFacts, now: ToldFacts, style: Style) {
  const from = timeText(fromMs, told, style);
  const to = timeText(toMs, now, style);
  if (from !== to) return { from, to };
  return { from: timeText(fromMs, told, style, 'with-zone'), to: timeText(toMs, now, style, 'with-zone') };
}

function wallMinute({ zone }: ToldFacts, ms: number): number {
  return Math.floor(minuteOfDay(ms, zone));
}

function tidy(text: string): string {
  return text.trim().replace(/\s+/g, ' ');
}
