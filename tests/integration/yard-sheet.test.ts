import { inCompany } from '@strikeboard/db/client';
import { createCrew, endCrew } from '@strikeboard/db/queries/set-up-crews';
import { readYardSheet, type YardSheet } from '@strikeboard/db/queries/yard-sheet';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  makeCompany,
  openTestDatabases,
  placePour,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

// The office is in Chicago, where clocks went forward at 2:00 on 2026-03-08 (IANA time zone database, 2026 rules);
// sites are in Denver, the machine's zone is Tokyo.
const NOW_MS = Date.parse('2026-03-11T15:00:00Z');
const HOUR_MS = 3_600_000;

let db: TestDatabases;
let company: TestCompany;
let secondCrew: string;
let endedCrew: string;

const from = (iso: string) => ({ startMs: Date.parse(iso), endMs: Date.parse(iso) + 5 * HOUR_MS });
const read = (nowMs = NOW_MS): Promise<YardSheet> =>
  inCompany(db.web, { companyId: company.companyId, personId: null }, (tx) => readYardSheet(tx, { nowMs }));

beforeAll(async () => {
  db = await openTestDatabases();
  company = await makeCompany(db, { slug: 'yard-test', name: 'Yard Test' });
  const of = { companyId: company.companyId, personId: company.ownerId };
  secondCrew = await inCompany(db.web, of, (tx) => createCrew(tx, { name: 'Crew 2', foremanId: null }));
  endedCrew = await inCompany(db.web, of, (tx) => createCrew(tx, { name: 'Old crew', foremanId: null }));
  await inCompany(db.web, of, (tx) => endCrew(tx, { crewId: endedCrew, nowMs: NOW_MS }));
  const pour = (during: string | null, rest: Omit<Parameters<typeof placePour>[2], 'during'>) =>
    placePour(db.web, company, { during: during === null ? null : from(during), ...rest });
  // The last minute of Sunday 2026-03-08 in Chicago (UTC-5 by then) and the first of Monday.
  await pour('2026-03-09T04:59:00Z', { yd3: '10.25', state: 'done' });
  await pour('2026-03-09T05:00:00Z', { yd3: '20.125', state: 'firm' });
  // The last minute of Sunday 2026-03-01 in Chicago (UTC-6 then) and the first of Monday 2026-03-02.
  await pour('2026-03-02T05:59:00Z', { yd3: '3', state: 'done' });
  await pour('2026-03-02T06:00:00Z', { yd3: '4.5', state: 'done' });
  await pour('2026-03-12T13:00:00Z', { yd3: '30.1', state: 'pencilled', crewId: secondCrew });
  await pour('2026-03-12T19:00:00Z', { yd3: '0.2', state: 'firm', crewId: secondCrew });
  await pour('2026-03-13T13:00:00Z', { yd3: '99', state: 'called-off' });
  await pour(null, { yd3: '7.75', wantedOn: '2026-03-15' });
  await pour(null, { yd3: '1.5', wantedOn: '2026-03-16' });
  await pour(null, { yd3: '60' });
  // Eight weeks before this Monday, a week more, the fourth week ahead and the one after it.
  await pour('2026-01-12T06:00:00Z', { yd3: '5', state: 'done' });
  await pour('2026-01-12T05:59:00Z', { yd3: '500', state: 'done' });
  await pour('2026-04-13T04:59:00Z', { yd3: '6', state: 'pencilled' });
  await pour('2026-04-13T05:00:00Z', { yd3: '600', state: 'pencilled' });
});
afterAll(() => db.close());

describe('the yard sheet', () => {
  // All sums by hand (arithmetic).
  it('sums yards exactly by the weeks of the office, across the change of clocks', async () => {
    const { weeks, zone } = await read();
    expect(zone).toBe('America/Chicago');
    expect(weeks.map((week) => week.startsOn)).toEqual([
      '2026-01-12',
      '2026-01-19',
      '2026-01-26',
      '2026-02-02',
      '2026-02-09',
      '2026-02-16',
      '2026-02-23',
      '2026-03-02',
      '2026-03-09',
      '2026-03-16',
      '2026-03-23',
      '2026-03-30',
      '2026-04-06',
    ]);
    expect(weeks.filter((week) => week.when === 'current').map((week) => week.startsOn)).toEqual([
      '2026-03-09',
    ]);
    const ordered = Object.fromEntries(weeks.map((week) => [week.startsOn, week.placed.orderedYd3]));
    expect(ordered).toMatchObject({
      '2026-01-12': '5',
      '2026-02-16': '0',
      '2026-02-23': '3',
      '2026-03-02': '14.75',
      '2026-03-09': '50.425',
      '2026-04-06': '6',
    });
  });

  it('keeps pencilled, firm and done apart, leaves out what is called off, and shows waiting by its day', async () => {
    const { weeks, total } = await read();
    const thisWeek = weeks.find((week) => week.startsOn === '2026-03-09');
    expect(thisWeek).toMatchObject({
      placed: { pencilledYd3: '30.1', firmYd3: '20.325', doneYd3: '0', visitCount: 3 },
      waitingYd3: '7.75',
      waitingCount: 1,
    });
    expect(weeks.find((week) => week.startsOn === '2026-03-16')?.waitingYd3).toBe('1.5');
    expect(total).toMatchObject({ orderedYd3: '79.175', visitCount: 8 });
  });

  it('shows each crew that works, and one that has ended only when it has yards', async () => {
    const { byCrew, weeks } = await read();
    expect(byCrew.map((crew) => [crew.crewName, crew.total.orderedYd3])).toEqual([
      ['Crew 1', '48.875'],
      ['Crew 2', '30.3'],
    ]);
    const column = weeks.findIndex((week) => week.startsOn === '2026-03-09');
    expect(byCrew.map((crew) => crew.weeks[column]?.orderedYd3)).toEqual(['20.125', '30.3']);
    await placePour(db.web, company, {
      during: from('2026-03-12T13:00:00Z'),
      yd3: '1',
      state: 'done',
      crewId: endedCrew,
    });
    expect((await read()).byCrew.find((crew) => crew.ended)?.total.orderedYd3).toBe('1');
  });

  it('has no yards of another company', async () => {
    const other = await makeCompany(db, { slug: 'other-yards', name: 'Other' });
    const sheet = await inCompany(db.web, { companyId: other.companyId, personId: null }, (tx) =>
      readYardSheet(tx, { nowMs: NOW_MS }),
    );
    expect(sheet.total.orderedYd3).toBe('0');
    expect(sheet.byCrew.map((crew) => crew.crewName)).toEqual(['Crew 1']);
  });
});
