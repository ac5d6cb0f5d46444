import type { Finish } from '@strikeboard/domain/vocabulary';

/** The facts of a visit that a person is told. */
export interface ToldFacts {
  visitId: string;
  companyName: string;
  /** Day of the crew's start, 'YYYY-MM-DD' in the site's zone. */
  day: string;
  /** When the crew is to be there, epoch ms. */
  crewStartMs: number;
  /** When the first truck is due, epoch ms; null: no truck, or no time yet. */
  firstLoadMs: number | null;
  /** IANA zone of the site. */
  zone: string;
  address: string;
  siteName: string;
  /** Yards of this visit; null for other kinds than a pour. */
  partYd3: number | null;
  finish: Finish | null;
  title: string;
  calledOff: boolean;
}
