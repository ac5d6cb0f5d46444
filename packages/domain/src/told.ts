/** What a person is told of a visit, as facts: the words are made from them, and a change is a difference of them. */

import { type BoardIndex, isPlaced } from './board-index.ts';
import { basisOf } from './plan.ts';
import type { Finish } from './vocabulary.ts';
import { type SiteDay, siteDayOf } from './zone.ts';

/** JSON, kept with each person as what they were last told. Instants are epoch milliseconds. */
export interface ToldFacts {
  readonly visitId: string;
  readonly companyName: string;
  /** Day of the crew's start, in the site's zone. */
  readonly day: SiteDay;
  readonly crewStartMs: number;
  /** First truck; null for kinds without one. */
  readonly firstLoadMs: number | null;
  /** IANA zone of the site, in which the times are worded. */
  readonly zone: string;
  readonly siteName: string;
  readonly address: string;
  readonly title: string;
  /** Yards of this visit; null for kinds without. */
  readonly partYd3: number | null;
  readonly finish: Finish | null;
  readonly calledOff: boolean;
}

/** A fact that can change under a visit that stays the same. */
export type ToldField = Exclude<keyof ToldFacts, 'visitId'>;

const fields: readonly ToldField[] = [
  'calledOff',
  'day',
  'crewStartMs',
  'firstLoadMs',
  'zone',
  'siteName',
  'address',
  'title',
  'partYd3',
  'finish',
  'companyName',
];

/**
 * What there is to tell of a visit now; null for one that is off the board, since it has no time (who was told of it
 * gets {@link calledOffFacts}). Throws InputProblem for an unknown visit.
 */
export function factsOf(index: BoardIndex, visitId: string, companyName: string): ToldFacts | null {
  const { visit, site, pour } = basisOf(index, visitId);
  if (!isPlaced(visit)) return null;
  const crewStartMs = visit.during.startMs;
  return {
    visitId,
    companyName,
    day: siteDayOf(crewStartMs, site.zone),
    crewStartMs,
    firstLoadMs: pour ? crewStartMs + pour.shape.firstLoadMs : null,
    zone: site.zone,
    siteName: site.name,
    address: site.address,
    title: visit.title,
    partYd3: pour ? pour.shape.orderedYd3 : null,
    finish: pour?.pour.finish ?? null,
    calledOff: false,
  };
}

/** What a person is told when they are no longer wanted for what they were told of. */
export function calledOffFacts(told: ToldFacts): ToldFacts {
  return { ...told, calledOff: true };
}

/** Names of the facts that differ, most important first. Of two called-off visits nothing differs. */
export function changedFields(told: ToldFacts, now: ToldFacts): ToldField[] {
  if (told.calledOff && now.calledOff) return [];
  return fields.filter((field) => told[field] !== now[field]);
}

/** Whether there is nothing new to tell. */
export function sameFacts(told: ToldFacts, now: ToldFacts): boolean {
  return told.visitId === now.visitId && changedFields(told, now).length === 0;
}
