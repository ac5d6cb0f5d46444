/** Findings as the board's panel says them: the sentence from the catalogue, and every number with its unit. */

import type { Finding } from '@strikeboard/domain/finding';
import type { Snapshot } from '@strikeboard/domain/snapshot';
import { formatClock, formatDay, siteDayOf } from '@strikeboard/domain/zone';
import { wordsOfFinding } from '../../lib/words/findings.en.ts';
import { office } from '../../lib/words/office.en.ts';

const words = office.finding;

/** Names of the rows that a finding may speak of. */
export type FindingNames = (kind: Finding['against'][number]['kind'], id: string) => string;

/** Looks names up in a snapshot; an id that is not in it is worded without a name. */
export function namesOf(snapshot: Snapshot | undefined): FindingNames {
  const names = new Map<string, string>();
  if (snapshot) {
    const lists = [snapshot.crews, snapshot.people, snapshot.sites, snapshot.plants, snapshot.equipment];
    for (const list of lists) for (const { id, name } of list) names.set(id, name);
    const pours = new Map(snapshot.pours.map((pour) => [pour.id, pour.name]));
    for (const visit of snapshot.visits) names.set(visit.id, pours.get(visit.pourId ?? '') ?? visit.title);
  }
  return (kind, id) => names.get(id) ?? words.unnamed[kind];
}

const units: readonly [suffix: string, unit: string][] = [
  ['PersonHoursPerFt2', 'person-hours/ft²'],
  ['LbPerFt2H', 'lb/ft²/h'],
  ['Ft2PerHour', 'ft²/h'],
  ['Yd3PerHour', 'yd³/h'],
  ['Ft2', 'ft²'],
  ['Yd3', 'yd³'],
  ['Percent', '%'],
  ['TempF', '°F'],
  ['Mph', 'mph'],
  ['Hours', 'h'],
  ['Minutes', 'min'],
  ['Min', 'min'],
  ['Ft', 'ft'],
  ['In', 'in'],
  ['H', 'h'],
];

/** A fact's key as words and its unit: `placingRateYd3PerHour` is "placing rate" in yd³/h. */
export function labelOf(key: string): { label: string; unit: string } {
  const found = units.find(([suffix]) => key.endsWith(suffix) && key.length > suffix.length);
  const bare = found ? key.slice(0, -found[0].length) + (found[0] === 'TempF' ? 'Temp' : '') : key;
  return { label: bare.replace(/([A-Z])/g, ' $1').toLowerCase(), unit: found?.[1] ?? '' };
}

function valueText(key: string, value: Finding['facts'][string], zone: string): string {
  if (value === null) return words.unknown;
  if (typeof value === 'boolean') return value ? words.yes : words.no;
  if (typeof value === 'string') return value;
  if (key.endsWith('Ms'))
    return `${formatDay(siteDayOf(value, zone), 'en')}, ${formatClock(value, zone, 'en')}`;
  const digits = Math.abs(value) >= 100 ? 0 : Math.abs(value) >= 1 ? 2 : 5;
  return `${Number(value.toFixed(digits)).toLocaleString('en-US', { maximumFractionDigits: 5 })} ${labelOf(key).unit}`.trim();
}

/** What a finding says, with every input and result. */
export function findingWords(finding: Finding, names: FindingNames, zone: string) {
  return {
    ...wordsOfFinding(finding, names, zone),
    numbers: Object.entries(finding.facts).map(([key, value]) => ({
      label: key.endsWith('Ms') ? labelOf(key.slice(0, -2)).label : labelOf(key).label,
      value: valueText(key, value, zone),
    })),
  };
}
