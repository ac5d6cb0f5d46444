import { inCompany } from '@strikeboard/db/client';
import { Conflict, NotFound } from '@strikeboard/db/errors';
import { newId } from '@strikeboard/db/ids';
import { type AnswerResult, answerVisit } from '@strikeboard/db/queries/answers';
import { audit, boardChanges, companies, offers, shifts } from '@strikeboard/db/tables';
import type { Interval } from '@strikeboard/domain/interval';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addPerson,
  holdShift,
  makeCompany,
  makeOffer,
  openTestDatabases,
  placePour,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

const HOUR_MS = 3_600_000;
const NOW_MS = Date.parse('2026-03-06T15:00:00Z');
/** 6:30 to 14:30 on a Tuesday in Denver (UTC-6 by then; IANA time zone database). */
const TUESDAY: Interval = {
  startMs: Date.parse('2026-03-10T12:30:00Z'),
  endMs: Date.parse('2026-03-10T20:30:00Z'),
};

let db: TestDatabases;
let cedar: TestCompany;
let prairie: TestCompany;
let count = 0;

beforeAll(async () => {
  db = await openTestDatabases();
  cedar = await makeCompany(db, { slug: 'cedar-test', name: 'Cedar Test' });
  prairie = await makeCompany(db, { slug: 'prairie-test', name: 'Prairie Test' });
});
afterAll(() => db.close());

const say = (
  company: TestCompany,
  given: { visitId: string; personId: string; answer: 'yes' | 'no'; seenStartMs?: number | null },
): Promise<AnswerResult> =>
  inCompany(db.web, { companyId: company.companyId, personId: given.personId }, (tx) =>
    answerVisit(tx, { nowMs: NOW_MS, seenStartMs: null, ...given }),
  );

async function rowsOf(company: TestCompany, of: { visitId: string; personId: string }) {
  return inCompany(db.web, { companyId: company.companyId, personId: null }, async (tx) => {
    const isTheirs = (row: { visitId: string; personId: string; companyId: string }) =>
      row.companyId === company.companyId && row.visitId === of.visitId && row.personId === of.personId;
    return {
      shifts: (await tx.select().from(shifts)).filter(isTheirs),
      offers: (await tx.select().from(offers)).filter(isTheirs),
      revision:
        (await tx.select().from(companies)).find((row) => row.id === company.companyId)?.revision ?? -1,
      changes: (await tx.select().from(boardChanges)).filter((row) => row.visitIds.includes(of.visitId)),
      audit: (await tx.select().from(audit)).filter((row) => row.subjectId === of.visitId),
    };
  });
}

/** A finisher with a shift, at a time when nobody else of this file is busy. */
async function finisherWithShift(during = TUESDAY) {
  const personId = await addPerson(db.web, cedar, { name: `Finisher ${++count}` });
  const { visitId } = await placePour(db.web, cedar, { during });
  await holdShift(db.web, cedar, { visitId, personId, during });
  return { personId, visitId };
}

/** A sub whom both companies know. */
async function sharedSub() {
  const sub = { name: `Sub ${++count}`, role: 'sub', email: `sub${count}@example.com` } as const;
  const personId = await addPerson(db.web, cedar, sub);
  expect(await addPerson(db.web, prairie, sub)).toBe(personId);
  return personId;
}

describe('a member', () => {
  it('says yes: it stands on the shift and on the board, once however often it is said', async () => {
    const of = await finisherWithShift();
    const before = await rowsOf(cedar, of);
    expect(await say(cedar, { ...of, answer: 'yes' })).toEqual({
      outcome: 'recorded',
      repeated: false,
      during: TUESDAY,
    });
    expect(await say(cedar, { ...of, answer: 'yes' })).toMatchObject({ outcome: 'recorded', repeated: true });
    const after = await rowsOf(cedar, of);
    expect(after.shifts).toMatchObject([{ state: 'held', answer: 'yes', answeredAt: new Date(NOW_MS) }]);
    expect(after.revision).toBe(before.revision + 1);
    expect(after.changes).toMatchObject([
      { kind: 'answer', revision: after.revision, actorPersonId: of.personId },
    ]);
    expect(after.audit).toMatchObject([{ action: 'answer', after: { answer: 'yes' } }]);
  });

  it('says no: the time is free at once, and may say yes again while it is', async () => {
    const of = await finisherWithShift();
    expect(await say(cedar, { ...of, answer: 'no' })).toMatchObject({ outcome: 'recorded', repeated: false });
    expect((await rowsOf(cedar, of)).shifts).toMatchObject([{ state: 'released', answer: 'no' }]);
    expect(await say(cedar, { ...of, answer: 'no' })).toMatchObject({ outcome: 'recorded', repeated: true });
    const other = await placePour(db.web, cedar, { during: TUESDAY });
    const shiftId = await holdShift(db.web, cedar, { ...of, visitId: other.visitId, during: TUESDAY });
    expect(await say(cedar, { ...of, answer: 'yes' })).toMatchObject({ outcome: 'not-free' });
    expect((await rowsOf(cedar, of)).shifts).toMatchObject([{ state: 'released', answer: 'no' }]);
    expect(shiftId).not.toBe('');
    expect(await say(cedar, { ...of, visitId: other.visitId, answer: 'no' })).toMatchObject({
      outcome: 'recorded',
    });
    expect(await say(cedar, { ...of, answer: 'yes' })).toMatchObject({
      outcome: 'recorded',
      repeated: false,
    });
    expect((await rowsOf(cedar, of)).shifts).toMatchObject([{ state: 'held', answer: 'yes' }]);
  });

  it('is told what changed when they saw another start', async () => {
    const of = await finisherWithShift();
    const stale = say(cedar, { ...of, answer: 'yes', seenStartMs: TUESDAY.startMs - HOUR_MS });
    await expect(stale).rejects.toMatchObject({
      code: 'changed-since',
      facts: { startMs: TUESDAY.startMs, endMs: TUESDAY.endMs },
    });
    await expect(stale).rejects.toThrow(Conflict);
    expect((await rowsOf(cedar, of)).shifts).toMatchObject([{ answer: 'none' }]);
    expect(await say(cedar, { ...of, answer: 'yes', seenStartMs: TUESDAY.startMs })).toMatchObject({
      outcome: 'recorded',
    });
  });

  it('answers nothing that is not theirs, not there or not on', async () => {
    const { visitId } = await finisherWithShift();
    const stranger = await addPerson(db.web, cedar, { name: 'Stranger' });
    expect(await say(cedar, { visitId, personId: stranger, answer: 'yes' })).toEqual({
      outcome: 'not-asked',
    });
    await expect(say(cedar, { visitId: newId(), personId: stranger, answer: 'yes' })).rejects.toThrow(
      NotFound,
    );
    await expect(say(prairie, { visitId, personId: stranger, answer: 'yes' })).rejects.toThrow(NotFound);
    const off = await placePour(db.web, cedar, { during: TUESDAY, state: 'called-off' });
    expect(await say(cedar, { visitId: off.visitId, personId: stranger, answer: 'no' })).toEqual({
      outcome: 'not-asked',
    });
  });
});

describe('a sub', () => {
  it('takes an offer: a shift is held; declines one: none is, until they change their mind', async () => {
    const personId = await sharedSub();
    const { visitId } = await placePour(db.web, cedar, { during: TUESDAY });
    await makeOffer(db.web, cedar, { visitId, personId, during: TUESDAY });
    const of = { visitId, personId };
    expect(await say(cedar, { ...of, answer: 'no' })).toMatchObject({ outcome: 'recorded', repeated: false });
    expect(await say(cedar, { ...of, answer: 'no' })).toMatchObject({ outcome: 'recorded', repeated: true });
    expect(await rowsOf(cedar, of)).toMatchObject({ shifts: [], offers: [{ state: 'declined' }] });
    expect(await say(cedar, { ...of, answer: 'yes' })).toMatchObject({
      outcome: 'recorded',
      repeated: false,
    });
    expect(await say(cedar, { ...of, answer: 'yes' })).toMatchObject({ outcome: 'recorded', repeated: true });
    const after = await rowsOf(cedar, of);
    expect(after.offers).toMatchObject([{ state: 'accepted' }]);
    expect(after.shifts).toMatchObject([{ state: 'held', answer: 'yes', during: TUESDAY, held: TUESDAY }]);
  });

  it('cannot take an offer that was withdrawn, or that is for another time than the visit has now', async () => {
    const personId = await sharedSub();
    const { visitId } = await placePour(db.web, cedar, { during: TUESDAY });
    const later = { startMs: TUESDAY.startMs + HOUR_MS, endMs: TUESDAY.endMs + HOUR_MS };
    await makeOffer(db.web, cedar, { visitId, personId, during: later });
    expect(await say(cedar, { visitId, personId, answer: 'yes' })).toEqual({ outcome: 'not-asked' });
    expect((await rowsOf(cedar, { visitId, personId })).shifts).toEqual([]);
  });

  it('asked by two companies for the same hours, with 20 answers to each at once, has one shift', async () => {
    const personId = await sharedSub();
    const asked = await Promise.all(
      [cedar, prairie].map(async (company) => {
        const { visitId } = await placePour(db.web, company, { during: TUESDAY });
        await makeOffer(db.web, company, { visitId, personId, during: TUESDAY });
        return { company, visitId };
      }),
    );
    const answers = await Promise.all(
      asked.flatMap(({ company, visitId }) =>
        Array.from({ length: 20 }, async () => ({
          company,
          result: await say(company, { visitId, personId, answer: 'yes' }),
        })),
      ),
    );
    const [winner, ...others] = [
      ...new Set(answers.filter(({ result }) => result.outcome === 'recorded').map(({ company }) => company)),
    ];
    expect(others).toEqual([]);
    const recorded = answers.filter(({ result }) => result.outcome === 'recorded');
    expect(recorded).toHaveLength(20);
    expect(recorded.filter(({ result }) => result.outcome === 'recorded' && !result.repeated)).toHaveLength(
      1,
    );
    for (const { company, result } of answers) {
      if (company === winner) continue;
      expect(result).toMatchObject({
        outcome: 'not-free',
        finding: { code: 'person-overlap', severity: 'stop', facts: { takenBy: 'busy' } },
      });
    }
    const states: string[] = [];
    for (const { company, visitId } of asked) {
      const rows = await rowsOf(company, { visitId, personId });
      expect(rows.shifts.map((row) => row.state)).toEqual(company === winner ? ['held'] : []);
      states.push(...rows.offers.map((row) => row.state));
    }
    expect(states.toSorted()).toEqual(['accepted', 'lapsed']);
  });

  it('is not free where they are on another visit, and the other company learns nothing of it', async () => {
    const personId = await sharedSub();
    const mine = await placePour(db.web, cedar, { during: TUESDAY });
    await holdShift(db.web, cedar, { visitId: mine.visitId, personId, during: TUESDAY });
    const { visitId } = await placePour(db.web, prairie, { during: TUESDAY });
    await makeOffer(db.web, prairie, { visitId, personId, during: TUESDAY });
    const result = await say(prairie, { visitId, personId, answer: 'yes' });
    expect(result.outcome).toBe('not-free');
    expect(JSON.stringify(result)).not.toContain(cedar.companyId);
    expect(JSON.stringify(result)).not.toContain(mine.visitId);
    expect(await say(prairie, { visitId, personId, answer: 'yes' })).toEqual(result);
    expect((await rowsOf(prairie, { visitId, personId })).offers).toMatchObject([{ state: 'lapsed' }]);
  });
});
