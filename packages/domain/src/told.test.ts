import { describe, expect, test } from 'vitest';
import { InputProblem } from './problem.ts';
import { at, day, ids, placed, sampleIndex, sampleSnapshot, sampleVisit } from './testing/sample-board.ts';
import { calledOffFacts, changedFields, factsOf, sameFacts, type ToldFacts } from './told.ts';

function factsAt(startMs: number, crewId: string = ids.northCrew): ToldFacts {
  const facts = factsOf(
    placed(sampleIndex(), ids.driveway, crewId, startMs),
    ids.driveway,
    'Gray & Daughters',
  );
  if (!facts) throw new Error('The driveway stands');
  return facts;
}

describe('what there is to tell', () => {
  test('of a pour', () => {
    expect(factsAt(at(day, 6))).toEqual({
      visitId: ids.driveway,
      companyName: 'Gray & Daughters',
      day: '2026-06-09',
      crewStartMs: at(day, 6),
      firstLoadMs: at(day, 6, 45),
      zone: 'America/Chicago',
      siteName: 'Orchard house',
      address: 'Orchard house, 410 Gravel Lane',
      title: 'Driveway',
      partYd3: 12,
      finish: 'broom',
      calledOff: false,
    });
  });

  test('of another kind has no truck, yards or finish', () => {
    const visits = [
      ...sampleSnapshot().visits,
      sampleVisit('strip', { kind: 'strip', title: 'Strip forms' }),
    ];
    const facts = factsOf(placed(sampleIndex({ visits }), 'strip', ids.northCrew, at(day, 6)), 'strip', 'G');
    expect(facts).toMatchObject({ firstLoadMs: null, partYd3: null, finish: null, title: 'Strip forms' });
  });

  test('is nothing while a visit waits; an unknown one is refused by name', () => {
    expect(factsOf(sampleIndex(), ids.driveway, 'G')).toBeNull();
    expect(() => factsOf(sampleIndex(), 'x', 'G')).toThrow(InputProblem);
  });

  test.each([
    // The day of the site's clock: 23:30 in Chicago is already the 10th at the office in New York.
    ['late in the evening', at(day, 23, 30), '2026-06-09'],
    ['after midnight', at('2026-06-10', 0, 30), '2026-06-10'],
    ['in the hour that comes twice', Date.parse('2026-11-01T07:30:00Z'), '2026-11-01'],
  ])('names the day at the site, %s', (_name, startMs, siteDay) => {
    expect(factsAt(startMs).day).toBe(siteDay);
  });
});

describe('what has changed', () => {
  const told = factsAt(at(day, 6));

  test.each([
    ['nothing', factsAt(at(day, 6)), []],
    ['another crew at the same time', factsAt(at(day, 6), ids.southCrew), []],
    ['the time', factsAt(at(day, 7)), ['crewStartMs', 'firstLoadMs']],
    ['the day', factsAt(at('2026-06-10', 6)), ['day', 'crewStartMs', 'firstLoadMs']],
    ['the yards', { ...told, partYd3: 14 }, ['partYd3']],
    ['the address', { ...told, address: 'Elsewhere' }, ['address']],
    ['called off', calledOffFacts(told), ['calledOff']],
  ] as const)('%s', (_name, now, fields) => {
    expect(changedFields(told, now)).toEqual(fields);
    expect(sameFacts(told, now)).toBe(fields.length === 0);
  });

  test('of what is called off already, nothing more', () => {
    const off = calledOffFacts(told);
    expect(changedFields(off, calledOffFacts(factsAt(at(day, 9))))).toEqual([]);
    expect(changedFields(off, told)).toEqual(['calledOff']);
  });

  test('another visit is never the same', () => {
    expect(sameFacts(told, { ...told, visitId: ids.patio })).toBe(false);
  });

  test('facts survive being kept as JSON', () => {
    expect(sameFacts(told, JSON.parse(JSON.stringify(told)))).toBe(true);
  });
});
