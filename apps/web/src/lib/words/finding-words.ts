/** What the catalogues of findings share: facts read by key and kind, and how figures are printed. */

import type { Clearing, Finding, FindingCode } from '@strikeboard/domain/finding';
import type { Language } from '@strikeboard/domain/vocabulary';
import { formatClock, siteDayOf } from '@strikeboard/domain/zone';
import { dayText } from './day-text.ts';

/** Name of a row that a finding speaks of. */
export type NameOf = (kind: Finding['against'][number]['kind'], id: string) => string;

/** A finding in words. */
export interface FindingWords {
  /** What does not fit, in a few words. */
  what: string;
  /** Why, with the numbers. */
  why: string;
  /** What would make it go away. */
  clears: string[];
}

/** A finding's parts ready to print. */
export interface Facts {
  finding: Finding;
  zone: string;
  /** The number of a fact, rounded to so many digits at most; "?" where there is none. */
  number(key: string, digits?: number): string;
  /** The fact itself, for a choice between sentences. */
  value(key: string): Finding['facts'][string] | undefined;
  /** An instant as day and clock of the site, or as the clock alone. */
  moment(key: string): string;
  clock(key: string): string;
  /** Name of the first row of a kind that it collides with; null: none. */
  first(kind: Finding['against'][number]['kind']): string | null;
  /** Names of all rows of a kind, three at most. */
  all(kind: Finding['against'][number]['kind']): string;
  day(): string | null;
}

/** One sentence maker per code and per way of clearing. */
export interface FindingCatalogue {
  codes: Readonly<Record<FindingCode, (facts: Facts) => { what: string; why: string }>>;
  clears: {
    readonly [K in Clearing['kind']]: (clearing: Extract<Clearing, { kind: K }>, print: Printer) => string;
  };
  and: string;
}

export interface Printer {
  moment(ms: number): string;
  number(value: number, digits?: number): string;
}

export function printerOf(zone: string, language: Language): Printer {
  return {
    moment: (ms) => `${dayText(siteDayOf(ms, zone), language)}, ${formatClock(ms, zone, language)}`,
    number: (value, digits = 1) =>
      value.toLocaleString(language === 'es' ? 'es-US' : 'en-US', { maximumFractionDigits: digits }),
  };
}

/** A finding in the words of a catalogue. `zone` is the site's. */
export function wordFinding(
  catalogue: FindingCatalogue,
  language: Language,
  of: { finding: Finding; names: NameOf; zone: string },
): FindingWords {
  const { finding, names, zone } = of;
  const print = printerOf(zone, language);
  const value = (key: string) => finding.facts[key];
  const moment = (key: string) => {
    const ms = value(key);
    return typeof ms === 'number' ? print.moment(ms) : '?';
  };
  const named = (kind: Finding['against'][number]['kind']) =>
    finding.against.filter((subject) => subject.kind === kind).map(({ id }) => names(kind, id));
  const facts: Facts = {
    finding,
    zone,
    value,
    number: (key, digits = 1) => {
      const given = value(key);
      return typeof given === 'number' ? print.number(given, digits) : '?';
    },
    moment,
    clock: (key) => {
      const ms = value(key);
      return typeof ms === 'number' ? formatClock(ms, zone, language) : '?';
    },
    first: (kind) => named(kind)[0] ?? null,
    all: (kind) => listOf(named(kind), catalogue.and),
    day: () => (finding.during ? dayText(siteDayOf(finding.during.startMs, zone), language) : null),
  };
  return {
    ...catalogue.codes[finding.code](facts),
    clears: finding.clears.map((clearing) => wordClearing(catalogue, clearing, print)),
  };
}

function wordClearing<K extends Clearing['kind']>(
  catalogue: FindingCatalogue,
  clearing: Extract<Clearing, { kind: K }> & { kind: K },
  print: Printer,
): string {
  return catalogue.clears[clearing.kind](clearing, print);
}

/** "Ana, Beto and 3 more" would count; three names are enough to know who is meant. */
function listOf(names: readonly string[], and: string): string {
  if (names.length <= 1) return names[0] ?? '';
  if (names.length > 3) return `${names.slice(0, 3).join(', ')} +${names.length - 3}`;
  return `${names.slice(0, -1).join(', ')} ${and} ${names.at(-1)}`;
}
