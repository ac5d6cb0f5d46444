import { inCompany } from '@strikeboard/db/client';
import { NotFound } from '@strikeboard/db/errors';
import { answerVisit } from '@strikeboard/db/queries/answers';
import { endBusy, markBusy, readMyCalendar } from '@strikeboard/db/queries/my-calendar';
import { personBusy } from '@strikeboard/db/tables';
import { InputProblem } from '@strikeboard/domain/problem';
import { instantAt } from '@strikeboard/domain/zone';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addPerson,
  holdShift,
  makeCompany,
  makeOffer,
  openTestDatabases,
  placePour,
  SITE_ZONE,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

// The sub lives in New York, the sites are in Denver, the offices in Chicago, the machine's zone is Tokyo.
const VIEWER_ZONE = 'America/New_York';
const NOW_MS = Date.parse('2026-10-29T15:00:00Z');
const HOUR_MS = 3_600_000;
const at = (day: string, hour: number, zone = SITE_ZONE) => instantAt(day, hour * 60, zone);
/** The week in which Denver's clocks go back, 2026-11-01 (IANA time zone database). */
const WEEK = { startMs: at('2026-10-26', 0, VIEWER_ZONE), endMs: at('2026-11-02', 0, VIEWER_ZONE) };

let db: TestDatabases;
let cedar: TestCompany;
let prairie: TestCompany;
let sub: string;
let other: string;
const visitIds: Record<string, string> = {};

beforeAll(async () => {
  db = await openTestDatabases();
  cedar = await makeCompany(db, { slug: 'cedar-test', name: 'Cedar Test' });
  prairie = await makeCompany(db, { slug: 'prairie-test', name: 'Prairie Test' });
  const person = { name: 'Sol Sub', role: 'sub', email: 'sol@example.com' } as const;
  sub = await addPerson(db.web, cedar, person);
  await addPerson(db.web, prairie, person);
  other = await addPerson(db.web, cedar, { name: 'Other Finisher', email: 'other@example.com' });
  const shift = async (company: TestCompany, name: string, during: { startMs: number; endMs: number }) => {
    const { visitId } = await placePour(db.web, company, { during });
    await holdShift(db.web, company, { visitId, personId: sub, during });
    visitIds[name] = visitId;
  };
  await shift(cedar, 'tuesday', { startMs: at('2026-10-27', 6), endMs: at('2026-10-27', 14) });
  await shift(prairie, 'night', { startMs: at('2026-10-31', 22), endMs: at('2026-11-01', 5) });
  await shift(cedar, 'next week', { startMs: at('2026-11-03', 6), endMs: at('2026-11-03', 14) });
  const during = { startMs: at('2026-10-28', 6), endMs: at('2026-10-28', 14) };
  const offered = await placePour(db.web, prairie, { during });
  await makeOffer(db.web, prairie, { visitId: offered.visitId, personId: sub, during });
  visitIds.offered = offered.visitId;
  const pencilled = await placePour(db.web, cedar, { during, state: 'pencilled' });
  await makeOffer(db.web, cedar, { visitId: pencilled.visitId, personId: sub, during });
  const theirs = await placePour(db.web, cedar, { during });
  await holdShift(db.web, cedar, { visitId: theirs.visitId, personId: other, during });
});
afterAll(() => db.close());

describe('my calendar', () => {
  it('shows shifts and offers of every company with the time zone of the site, and nobody else’s', async () => {
    const { entries, busy } = await readMyCalendar(db.web, { personId: sub, range: WEEK });
    expect(
      entries.map(({ companySlug, visitId, kind, state }) => [companySlug, visitId, kind, state]),
    ).toEqual([
      ['cedar-test', visitIds.tuesday, 'shift', 'held'],
      ['prairie-test', visitIds.offered, 'offer', 'open'],
      ['prairie-test', visitIds.night, 'shift', 'held'],
    ]);
    expect(entries[2]).toMatchObject({
      companyName: 'Prairie Test',
      crewName: 'Crew 1',
      siteName: 'Alder Court',
      zone: 'America/Denver',
      // Seven hours on the wall are eight across the change of clocks.
      during: { startMs: at('2026-10-31', 22), endMs: at('2026-10-31', 22) + 8 * HOUR_MS },
    });
    expect(busy).toEqual([]);
  });

  it('shows what touches the range only, and nothing of a company that the person has left', async () => {
    const day = { startMs: at('2026-11-01', 3), endMs: at('2026-11-01', 4) };
    const { entries } = await readMyCalendar(db.web, { personId: sub, range: day });
    expect(entries.map((entry) => entry.visitId)).toEqual([visitIds.night]);
    const stranger = await addPerson(db.web, prairie, { name: 'No Shifts' });
    expect((await readMyCalendar(db.web, { personId: stranger, range: WEEK })).entries).toEqual([]);
  });

  it('shows a shift that the person said no to as declined', async () => {
    const during = { startMs: at('2026-10-30', 6), endMs: at('2026-10-30', 14) };
    const { visitId } = await placePour(db.web, cedar, { during });
    await holdShift(db.web, cedar, { visitId, personId: sub, during });
    await inCompany(db.web, { companyId: cedar.companyId, personId: sub }, (tx) =>
      answerVisit(tx, { visitId, personId: sub, answer: 'no', nowMs: NOW_MS, seenStartMs: during.startMs }),
    );
    const { entries } = await readMyCalendar(db.web, { personId: sub, range: during });
    expect(entries).toMatchObject([{ visitId, state: 'declined', answer: 'no' }]);
  });
});

describe('marked time', () => {
  it('is kept over a held shift, which is named so that they can say no to it', async () => {
    const mark = { startMs: at('2026-10-27', 0, VIEWER_ZONE), endMs: at('2026-10-28', 0, VIEWER_ZONE) };
    const marked = await markBusy(db.web, { personId: sub, ...mark, wholeDays: true, note: 'Dentist' });
    expect(marked.heldShifts.map((entry) => entry.visitId)).toEqual([visitIds.tuesday]);
    const { busy } = await readMyCalendar(db.web, { personId: sub, range: WEEK });
    expect(busy).toEqual([{ id: marked.id, during: mark, wholeDays: true, note: 'Dentist' }]);
    await endBusy(db.web, { personId: sub, id: marked.id, nowMs: NOW_MS });
    await endBusy(db.web, { personId: sub, id: marked.id, nowMs: NOW_MS + 1 });
    expect((await readMyCalendar(db.web, { personId: sub, range: WEEK })).busy).toEqual([]);
  });

  it('touches nothing by its end, and cannot end before it starts', async () => {
    const ends = { startMs: at('2026-10-27', 4), endMs: at('2026-10-27', 6) };
    const marked = await markBusy(db.web, { personId: sub, ...ends, wholeDays: false, note: null });
    expect(marked.heldShifts).toEqual([]);
    const reversed = { startMs: ends.endMs, endMs: ends.startMs };
    await expect(
      markBusy(db.web, { personId: sub, ...reversed, wholeDays: false, note: null }),
    ).rejects.toThrow(InputProblem);
  });

  it('is nobody else’s to see or end; companies see through busy times that it is taken, and no more', async () => {
    const mark = { startMs: at('2026-10-29', 6), endMs: at('2026-10-29', 8) };
    const { id } = await markBusy(db.web, { personId: sub, ...mark, wholeDays: false, note: 'Private' });
    await expect(endBusy(db.web, { personId: other, id, nowMs: NOW_MS })).rejects.toThrow(NotFound);
    const of = { companyId: cedar.companyId, personId: other };
    expect(await inCompany(db.web, of, (tx) => tx.select().from(personBusy))).toEqual([]);
    const { rows } = await db.owner.pool.query(
      "select proargnames from pg_proc where oid = 'app.busy_times'::regproc",
    );
    expect(rows[0].proargnames).toEqual(['from_at', 'until_at', 'person_id', 'during']);
  });
});
