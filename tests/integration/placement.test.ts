/** A drop from its checks to its rows, against a database. Offices, sites and machine are in three zones. */

import { Conflict, DatabaseFailure, NotFound, Refused, StaleVersion } from '@strikeboard/db/errors';
import { newId } from '@strikeboard/db/ids';
import { listen } from '@strikeboard/db/listen';
import { answerVisit } from '@strikeboard/db/queries/answers';
import { changesSince } from '@strikeboard/db/queries/board-change';
import { callOff, makeFirm, returnToWaiting } from '@strikeboard/db/queries/placement';
import { createVisit } from '@strikeboard/db/queries/pours';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import {
  act,
  acting,
  anyReason,
  at,
  type Board,
  type BoardDatabases,
  bookingsOf,
  DAY,
  drop,
  look,
  makeBoard,
  NOW_MS,
  offersOf,
  openBoardDatabases,
  SETTLE_SECONDS,
  shiftsOf,
  traces,
  visitRow,
  visitRows,
  waitingPour,
} from './board-fixture.ts';

const MIN_MS = 60_000;
/** Set-up 45 min and wash-up 30 min by the company's rules; the rest is the chain of the default pour. */
const LENGTH_MS = (8 * 60 + 5) * MIN_MS;
const NEXT_DAY = '2026-06-10';

let db: BoardDatabases;
let count = 0;
const board = () => makeBoard(db, { slug: `placing-${++count}` });

beforeAll(async () => {
  db = await openBoardDatabases();
});
afterAll(() => db.close());

async function waitingWork(b: Board, of: { siteId: string; minutes: number }): Promise<string> {
  const { siteId, minutes } = of;
  const { patch } = await act(b, (tx) =>
    createVisit(tx, {
      ...acting(b),
      visit: { kind: 'prep', siteId, title: 'Form and grade', plannedMin: minutes, wantedOn: null },
    }),
  );
  return patch.visitIds[0] ?? '';
}

const answer = (b: Board, visitId: string, personId: string, said: 'yes' | 'no') =>
  act(b, (tx) => answerVisit(tx, { visitId, personId, answer: said, nowMs: NOW_MS, seenStartMs: null }));

describe('a drop within the telling horizon', () => {
  it('writes the visit, who is on it, who is asked, what is ordered and what follows', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { jointing: 'saw-conventional', placingMethod: 'boom-pump' });
    const startMs = at(DAY, 7);
    const { patch } = await drop(b, { visitId, crewId: b.north, startMs });
    const endMs = startMs + LENGTH_MS;
    expect(await visitRow(b, visitId)).toMatchObject({
      ...{ state: 'firm', crewId: b.north, startMs, endMs, version: 2, acceptedCodes: [] },
    });
    const { ada, ben, cal, sol } = b.people;
    const shifts = await shiftsOf(b, visitId);
    expect(shifts.map(({ who }) => who)).toEqual([ada, ben, cal].toSorted());
    for (const shift of shifts)
      expect(shift).toMatchObject({ startMs, endMs, heldStartMs: startMs, state: 'held', answer: 'none' });
    expect(await offersOf(b, visitId)).toMatchObject([{ who: sol, startMs, endMs, state: 'open' }]);
    // First truck after 45 min of set-up, two loads 40 min apart (10 yd³ at 15 yd³/h), 10 min to unload: arithmetic.
    const placing = { startMs: startMs + 45 * MIN_MS, endMs: startMs + 95 * MIN_MS };
    expect(await bookingsOf(b, visitId)).toMatchObject([
      {
        ...{ who: b.pumpId, state: 'drafted', ...placing },
        heldStartMs: placing.startMs - 60 * MIN_MS,
        heldEndMs: placing.endMs + 45 * MIN_MS,
      },
    ]);
    expect(patch.mixOrders).toMatchObject([
      { plantId: b.plantId, mixId: b.mixId, orderedYd3: 12, loadYd3: 10, spacingMin: 40, during: placing },
    ]);
    const followUps = await visitRows(b, 'caused_by_visit_id = $2', [visitId]);
    expect(followUps.map(({ kind, state }) => [kind, state])).toEqual([
      ['saw', 'waiting'],
      ['strip', 'waiting'],
    ]);
    // 4 to 12 h after the finishing, which ends 30 min of wash-up before the crew goes (published: PCA, ACI 302.1R).
    const finishedMs = endMs - 30 * MIN_MS;
    expect(followUps[0]?.window).toEqual({
      startMs: finishedMs + 4 * 60 * MIN_MS,
      endMs: finishedMs + 12 * 60 * MIN_MS,
    });
  });

  it('leaves word when it has settled, history, and the change for other readers, who are notified', async () => {
    const b = await board();
    const heard: string[] = [];
    let connected = false;
    const stop = listen(db.urls.web, 'board', {
      payload: (payload) => heard.push(payload),
      connect: () => {
        connected = true;
      },
    });
    await vi.waitFor(() => expect(connected).toBe(true));
    const { visitId } = await waitingPour(b);
    const { revision, patch } = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await vi.waitFor(() => expect(heard).toContain(`${b.companyId}:${revision}`));
    await stop();
    const dueAt = new Date(NOW_MS + SETTLE_SECONDS * 1000);
    expect(
      await look(b, 'select due_at, created_by, done_at from outbox where visit_id = $1', [visitId]),
    ).toEqual([{ due_at: dueAt, created_by: b.ownerId, done_at: null }]);
    expect(
      await look(
        b,
        `select j.key, t.identifier, j.run_at, j.payload from graphile_worker._private_jobs j
         join graphile_worker._private_tasks t on t.id = j.task_id where j.payload ->> 'companyId' = $1`,
        [b.companyId],
      ),
    ).toEqual([
      {
        ...{ key: `${b.companyId}:tell:${visitId}`, identifier: 'tell-visit', run_at: dueAt },
        payload: { companyId: b.companyId, visitId },
      },
    ]);
    expect(
      await look(
        b,
        `select action, actor_person_id, at, before ->> 'state' as was, after ->> 'state' as is
         from audit where subject_id = $1 order by id`,
        [visitId],
      ),
    ).toMatchObject([
      { action: 'create-pour' },
      { action: 'place', actor_person_id: b.ownerId, at: new Date(NOW_MS), was: 'waiting', is: 'firm' },
    ]);
    expect(patch).toMatchObject({ revision, kind: 'place', actorPersonId: b.ownerId });
    expect(patch.visits.find(({ id }) => id === visitId)).toMatchObject({ state: 'firm', untold: true });
    expect(await act(b, (tx) => changesSince(tx, revision - 1))).toEqual([patch]);
  });

  it('asks again only those whose times have changed, and keeps their rows', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    const { ada, ben, cal, sol } = b.people;
    const startMs = at(DAY, 7);
    await drop(b, { visitId, crewId: b.north, startMs });
    await answer(b, visitId, ada, 'yes');
    await answer(b, visitId, ben, 'no');
    await answer(b, visitId, sol, 'yes');
    const before = await shiftsOf(b, visitId);
    await drop(b, { visitId, crewId: b.north, startMs, reasons: anyReason });
    expect(await shiftsOf(b, visitId)).toEqual(before);
    await drop(b, { visitId, crewId: b.north, startMs: startMs + 60 * MIN_MS, reasons: anyReason });
    const shifts = new Map((await shiftsOf(b, visitId)).map((row) => [row.who, row]));
    const was = new Map(before.map((row) => [row.who, row]));
    const moved = { state: 'held', answer: 'none', startMs: startMs + 60 * MIN_MS };
    expect(shifts.get(ada)).toMatchObject({ ...moved, id: was.get(ada)?.id });
    expect(shifts.get(cal)).toMatchObject({ ...moved, id: was.get(cal)?.id });
    // Who has said no is not put back, and a sub is asked anew before their time is taken.
    expect(shifts.get(ben)).toMatchObject({ state: 'released', answer: 'no', startMs });
    expect(shifts.get(sol)).toMatchObject({ state: 'released', answer: 'yes', startMs });
    expect((await offersOf(b, visitId)).map(({ state, startMs: from }) => [state, from])).toEqual([
      ['accepted', startMs],
      ['open', startMs + 60 * MIN_MS],
    ]);
  });

  it('to another crew releases the people of the first', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { placingMethod: 'boom-pump' });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const [booking] = await bookingsOf(b, visitId);
    await drop(b, { visitId, crewId: b.south, startMs: at(DAY, 9) });
    const held = (await shiftsOf(b, visitId)).filter(({ state }) => state === 'held');
    const { dee, eli, fay } = b.people;
    expect(held.map(({ who }) => who)).toEqual([dee, eli, fay].toSorted());
    expect(await shiftsOf(b, visitId)).toHaveLength(6);
    expect((await offersOf(b, visitId)).map(({ state }) => state)).toEqual(['withdrawn']);
    expect(await bookingsOf(b, visitId)).toMatchObject([
      { id: booking?.id, state: 'drafted', startMs: at(DAY, 9, 45) },
    ]);
  });
});

describe('a drop beyond the telling horizon', () => {
  it('is pencilled and tells nobody, until it is made firm', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    // 8 days ahead of the 7 of the default rule.
    await drop(b, { visitId, crewId: b.north, startMs: at('2026-06-16', 7) });
    expect(await visitRow(b, visitId)).toMatchObject({ state: 'pencilled' });
    expect(await traces(b)).toMatchObject({ outbox: 0, jobs: 0, shifts: 3 });
    const firm = (baseVersion: number) =>
      act(b, (tx) => makeFirm(tx, { ...acting(b), visitId, baseVersion }));
    await expect(firm(1)).rejects.toThrow(StaleVersion);
    const { patch } = await firm(2);
    expect(patch.visits).toMatchObject([{ id: visitId, state: 'firm', version: 3, untold: true }]);
    expect(await traces(b)).toMatchObject({ outbox: 1, jobs: 1 });
    await expect(firm(3)).rejects.toMatchObject({ code: 'not-pencilled' });
    await drop(b, { visitId, crewId: b.north, startMs: at('2026-06-20', 7) });
    expect(await visitRow(b, visitId)).toMatchObject({ state: 'firm' });
  });

  it('is firm on the last day of it, by the clock of the site', async () => {
    const b = await board();
    const [last, beyond] = [await waitingPour(b), await waitingPour(b)];
    // 23:30 at the sites is half past midnight, and so a day later, at the office.
    await drop(b, { ...last, crewId: b.north, startMs: at('2026-06-15', 23, 30), reasons: anyReason });
    await drop(b, { ...beyond, crewId: b.south, startMs: at('2026-06-16', 0, 30), reasons: anyReason });
    expect((await visitRow(b, last.visitId)).state).toBe('firm');
    expect((await visitRow(b, beyond.visitId)).state).toBe('pencilled');
  });
});

describe('a drop that the checks mind', () => {
  it('needs a reason for a caution, which is kept with the code', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { peopleToFinish: 4 });
    const before = await traces(b);
    const startMs = at(DAY, 7);
    const asked = drop(b, { visitId, crewId: b.north, startMs, reasons: { 'short-handed': '   ' } });
    await expect(asked).rejects.toMatchObject({
      ...{
        code: 'reason-needed',
        findings: [expect.objectContaining({ code: 'short-handed', severity: 'caution' })],
      },
    });
    await expect(asked).rejects.toThrow(Refused);
    expect(await traces(b)).toEqual(before);
    await drop(b, {
      visitId,
      crewId: b.north,
      startMs,
      reasons: { 'short-handed': ' Cal brings his brother ' },
    });
    expect(await visitRow(b, visitId)).toMatchObject({ acceptedCodes: ['short-handed'] });
    expect(
      await look(
        b,
        "select reason, after ->> 'code' as code from audit where action = 'accept-caution' and company_id = $1",
        [b.companyId],
      ),
    ).toEqual([{ reason: 'Cal brings his brother', code: 'short-handed' }]);
    // The reason holds for where it stands, and for no other place.
    await drop(b, { visitId, crewId: b.north, startMs });
    await expect(drop(b, { visitId, crewId: b.north, startMs: at(DAY, 8) })).rejects.toMatchObject({
      code: 'reason-needed',
    });
  });

  it('is refused on a stop, whatever the reasons, with slots that fit', async () => {
    const b = await board();
    const [standing, other] = [await waitingPour(b), await waitingPour(b)];
    await drop(b, { ...standing, crewId: b.north, startMs: at(DAY, 7) });
    const before = await traces(b);
    const refused = await drop(b, {
      ...{ ...other, crewId: b.north, startMs: at(DAY, 9), reasons: anyReason },
    }).catch((error: unknown) => error);
    expect(refused).toMatchObject({ code: 'stops' });
    if (!(refused instanceof Refused)) throw refused;
    expect(refused.findings.map(({ code }) => code)).toEqual(expect.arrayContaining(['crew-overlap']));
    expect(await traces(b)).toEqual(before);
    const [nearest] = refused.nearest;
    if (!nearest) throw new Error('There is a slot that fits.');
    await drop(b, { ...other, crewId: nearest.crewId, startMs: nearest.crewStartMs, reasons: anyReason });
  });

  it('names what has changed since the version that it was based on', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const stale = drop(b, { visitId, crewId: b.south, startMs: at(DAY, 8), baseVersion: 1 });
    await expect(stale).rejects.toThrow(StaleVersion);
    await expect(stale).rejects.toMatchObject({
      subject: { kind: 'visit', id: visitId },
      current: { version: 2, crewId: b.north, state: 'firm', during: { startMs: at(DAY, 7) } },
      changedFields: ['crewId', 'during', 'state'],
    });
    await drop(b, { visitId, crewId: b.south, startMs: at(DAY, 7) });
    await expect(
      drop(b, { visitId, crewId: b.north, startMs: at(DAY, 8), baseVersion: 2 }),
    ).rejects.toMatchObject({ changedFields: ['crewId'] });
    expect((await visitRow(b, visitId)).version).toBe(3);
  });

  it("knows no other company's visit or crew", async () => {
    const [b, other] = [await board(), await board()];
    const mine = await waitingPour(b);
    const theirs = await waitingPour(other);
    const startMs = at(DAY, 7);
    await expect(drop(b, { ...theirs, crewId: b.north, startMs, baseVersion: 1 })).rejects.toThrow(NotFound);
    await expect(drop(b, { ...mine, crewId: other.north, startMs })).rejects.toMatchObject({ what: 'crew' });
    await expect(
      drop(b, { visitId: newId(), crewId: b.north, startMs, baseVersion: 1 }),
    ).rejects.toMatchObject({ what: 'visit' });
  });
});

describe('time', () => {
  it('runs over midnight', async () => {
    const b = await board();
    const [night, morning] = [await waitingPour(b), await waitingPour(b)];
    const startMs = at(DAY, 20);
    await drop(b, { ...night, crewId: b.north, startMs, reasons: anyReason });
    const endMs = at(NEXT_DAY, 4, 5);
    expect(await visitRow(b, night.visitId)).toMatchObject({ startMs, endMs });
    for (const shift of await shiftsOf(b, night.visitId)) expect(shift).toMatchObject({ startMs, endMs });
    // Half-open: the next visit at the same site may begin in the minute in which this one ends.
    await expect(
      drop(b, { ...morning, crewId: b.north, startMs: endMs - MIN_MS, reasons: anyReason }),
    ).rejects.toMatchObject({ code: 'stops' });
    await drop(b, { ...morning, crewId: b.north, startMs: endMs, reasons: anyReason });
  });

  it("gives a follow-up the day of the site's clock, not of the office's or of the machine's", async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { jointing: 'saw-conventional' });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 12), reasons: anyReason });
    const [saw] = await visitRows(b, "kind = 'saw'");
    expect(saw?.window?.startMs).toBe(at(DAY, 23, 35));
    expect(saw?.wantedOn).toBe(DAY);
    // A saw that still waits hangs under the day to which its pour was moved.
    await drop(b, { visitId, crewId: b.north, startMs: at('2026-06-11', 12), reasons: anyReason });
    const [moved] = await visitRows(b, "kind = 'saw'");
    expect(moved).toMatchObject({ id: saw?.id, wantedOn: '2026-06-11' });
    expect(moved?.window?.startMs).toBe(at('2026-06-11', 23, 35));
    // Nothing of it has changed, so neither has its version.
    await drop(b, { visitId, crewId: b.north, startMs: at('2026-06-11', 12), reasons: anyReason });
    expect(await visitRows(b, "kind = 'saw'")).toEqual([moved]);
  });

  // United States, 2 a.m. on the second Sunday of March and the first of November (15 U.S.C. 260a).
  it.each([
    {
      day: '2026-03-08',
      startsAt: '2026-03-08T06:30:00Z',
      endsAt: '2026-03-08T14:35:00Z',
      endClock: [9, 35],
    },
    {
      day: '2026-11-01',
      startsAt: '2026-11-01T05:30:00Z',
      endsAt: '2026-11-01T13:35:00Z',
      endClock: [7, 35],
    },
  ] as const)(
    'is elapsed time on $day, when the clocks change',
    async ({ day, startsAt, endsAt, endClock }) => {
      const b = await board();
      const { visitId } = await waitingPour(b);
      const startMs = at(day, 0, 30);
      expect(startMs).toBe(Date.parse(startsAt));
      const nowMs = startMs - 2 * 24 * 60 * MIN_MS;
      await drop(b, { visitId, crewId: b.north, startMs, nowMs, reasons: anyReason });
      expect(await visitRow(b, visitId)).toMatchObject({ state: 'firm', startMs, endMs: Date.parse(endsAt) });
      expect(Date.parse(endsAt)).toBe(at(day, endClock[0], endClock[1]));
    },
  );
});

describe('the way between sites', () => {
  /** Work far off from 6:00 to 8:00, then at the near site from 8:30 to 10:30 and on from 10:30. Travel: 30 min. */
  async function threeInARow() {
    const b = await board();
    const far = await waitingWork(b, { siteId: b.farSiteId, minutes: 120 });
    const between = await waitingWork(b, { siteId: b.siteId, minutes: 120 });
    const last = await waitingWork(b, { siteId: b.siteId, minutes: 120 });
    await drop(b, { visitId: far, crewId: b.north, startMs: at(DAY, 6) });
    await drop(b, { visitId: between, crewId: b.north, startMs: at(DAY, 8, 30) });
    await drop(b, { visitId: last, crewId: b.north, startMs: at(DAY, 10, 30) });
    const heldOf = async (visitId: string) => {
      const held = (await shiftsOf(b, visitId)).filter(({ state }) => state === 'held');
      return [...new Set(held.map(({ heldStartMs }) => heldStartMs))];
    };
    return { b, between, last, heldOf };
  }

  it('is held by what follows, and given to the next when a visit between goes and comes back', async () => {
    const { b, between, last, heldOf } = await threeInARow();
    expect(await heldOf(between)).toEqual([at(DAY, 8)]);
    expect(await heldOf(last)).toEqual([at(DAY, 10, 30)]);
    const { patch } = await drop(b, { visitId: between, crewId: b.north, startMs: at(NEXT_DAY, 7) });
    expect(await heldOf(last)).toEqual([at(DAY, 10)]);
    expect(patch.visitIds.toSorted()).toEqual([between, last].toSorted());
    await drop(b, { visitId: between, crewId: b.north, startMs: at(DAY, 8, 30) });
    expect(await heldOf(between)).toEqual([at(DAY, 8)]);
    expect(await heldOf(last)).toEqual([at(DAY, 10, 30)]);
  });

  it('is given to the next when a visit between is taken off', async () => {
    const { b, between, last, heldOf } = await threeInARow();
    await act(b, (tx) => returnToWaiting(tx, { ...acting(b), visitId: between, baseVersion: 2 }));
    expect(await heldOf(between)).toEqual([]);
    expect(await heldOf(last)).toEqual([at(DAY, 10)]);
  });
});

describe('a pour that is pushed by weeks', () => {
  it('keeps the follow-ups that stand on the board, and makes no others', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { jointing: 'saw-conventional' });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const [saw] = await visitRows(b, "kind = 'saw'");
    if (!saw?.window) throw new Error('A sawn pour has a saw visit with a window.');
    await drop(b, { visitId: saw.id, crewId: b.south, startMs: saw.window.startMs, reasons: anyReason });
    const { patch } = await drop(b, {
      visitId,
      crewId: b.north,
      startMs: at('2026-07-14', 7),
      reasons: anyReason,
    });
    const saws = await visitRows(b, "kind = 'saw'");
    expect(saws).toMatchObject([{ id: saw.id, state: 'firm', startMs: saw.window.startMs }]);
    expect(saws[0]?.window?.startMs).toBe(saw.window.startMs + 35 * 24 * 60 * MIN_MS);
    expect(patch.visitIds).toContain(saw.id);
  });
});

describe('a visit that is taken off', () => {
  it('waits again: nothing is held, and its people are to be told if they were', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { placingMethod: 'boom-pump' });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const { patch } = await act(b, (tx) => returnToWaiting(tx, { ...acting(b), visitId, baseVersion: 2 }));
    expect(await visitRow(b, visitId)).toMatchObject({
      state: 'waiting',
      crewId: null,
      startMs: null,
      version: 3,
    });
    expect(new Set((await shiftsOf(b, visitId)).map(({ state }) => state))).toEqual(new Set(['released']));
    expect((await offersOf(b, visitId)).map(({ state }) => state)).toEqual(['withdrawn']);
    expect((await bookingsOf(b, visitId)).map(({ state }) => state)).toEqual(['called-off']);
    expect(patch.mixOrders.map(({ state }) => state)).toEqual(['called-off']);
    expect(await visitRows(b, 'caused_by_visit_id = $2', [visitId])).toMatchObject([{ state: 'called-off' }]);
    expect(await traces(b)).toMatchObject({ outbox: 2, jobs: 1 });
    await expect(
      act(b, (tx) => returnToWaiting(tx, { ...acting(b), visitId, baseVersion: 3 })),
    ).rejects.toMatchObject({ code: 'visit-closed' });
    // It can be placed anew, with follow-ups anew.
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    expect((await visitRows(b, 'caused_by_visit_id = $2', [visitId])).map(({ state }) => state)).toEqual([
      'called-off',
      'waiting',
    ]);
  });

  it('owes nobody word when nobody knows of it', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    await drop(b, { visitId, crewId: b.north, startMs: at('2026-06-18', 7) });
    await act(b, (tx) => returnToWaiting(tx, { ...acting(b), visitId, baseVersion: 2 }));
    expect(await traces(b)).toMatchObject({ outbox: 0, jobs: 0 });
  });

  it('is called off with the reason, and is closed then', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const off = (baseVersion: number) =>
      act(b, (tx) => callOff(tx, { ...acting(b), visitId, baseVersion, reason: 'Owner sold the house' }));
    await expect(off(1)).rejects.toThrow(StaleVersion);
    const { patch } = await off(2);
    expect(patch.visits.find(({ id }) => id === visitId)).toMatchObject({
      state: 'called-off',
      untold: true,
    });
    expect(
      await look(b, "select reason from audit where action = 'call-off' and subject_id = $1", [visitId]),
    ).toEqual([{ reason: 'Owner sold the house' }]);
    await expect(off(3)).rejects.toThrow(Conflict);
    await expect(drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) })).rejects.toMatchObject({
      code: 'visit-closed',
    });
    // Its hours are free.
    const other = await waitingPour(b);
    await drop(b, { ...other, crewId: b.north, startMs: at(DAY, 7) });
  });
});

describe('a failure in the middle', () => {
  it.each(['shifts', 'mix_orders', 'audit', 'outbox', 'board_changes'])(
    'of writing %s leaves nothing behind',
    async (table) => {
      const b = await board();
      const { visitId } = await waitingPour(b);
      await look(
        b,
        `create or replace function fail_for_test() returns trigger language plpgsql as $$
           begin raise exception 'broken' using errcode = 'XX000'; end $$`,
      );
      await look(
        b,
        `create trigger fail_for_test before insert on ${table} for each row
         when (new.company_id = '${b.companyId}') execute function fail_for_test()`,
      );
      const before = await traces(b);
      const failed = drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
      await expect(failed).rejects.toThrow(DatabaseFailure);
      await expect(failed).rejects.toMatchObject({ sqlState: 'XX000' });
      expect(await traces(b)).toEqual(before);
      await look(b, `drop trigger fail_for_test on ${table}`);
      await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    },
  );
});

describe('a person whom two companies know', () => {
  it('is left off where the other company has them, which is said without saying where', async () => {
    const email = 'shared@two.example.com';
    const [b, other] = [
      await makeBoard(db, { slug: `two-a-${++count}`, subEmail: email }),
      await makeBoard(db, { slug: `two-b-${++count}`, subEmail: email }),
    ];
    expect(b.people.sol).toBe(other.people.sol);
    const theirs = await waitingPour(other);
    await drop(other, { ...theirs, crewId: other.north, startMs: at(DAY, 7) });
    await answer(other, theirs.visitId, other.people.sol, 'yes');
    const mine = await waitingPour(b);
    const asked = await drop(b, { ...mine, crewId: b.north, startMs: at(DAY, 9) }).catch(
      (error: unknown) => error,
    );
    if (!(asked instanceof Refused)) throw asked;
    expect(asked.findings).toMatchObject([
      { code: 'person-overlap', severity: 'caution', facts: { takenBy: 'busy', leftOff: true } },
    ]);
    expect(JSON.stringify(asked.findings)).not.toContain(theirs.visitId);
    expect(JSON.stringify(asked.findings)).not.toContain(other.companyId);
    await drop(b, { ...mine, crewId: b.north, startMs: at(DAY, 9), reasons: anyReason });
    expect(await offersOf(b, mine.visitId)).toEqual([]);
  });

  it('is refused by the database when their time is taken while the drop is being checked', async () => {
    const b = await board();
    const [standing, mine] = [await waitingPour(b), await waitingPour(b)];
    const { ada } = b.people;
    const client = await db.admin.connect();
    try {
      // Another transaction that no check can see yet.
      await client.query('begin');
      await client.query(
        `insert into shifts (company_id, id, visit_id, person_id, during, held)
         select $1, $2, $3, $4, r, r from tstzrange($5, $6) r`,
        [b.companyId, newId(), standing.visitId, ada, new Date(at(DAY, 12)), new Date(at(DAY, 13))],
      );
      const refused = drop(b, { ...mine, crewId: b.north, startMs: at(DAY, 7) }).catch(
        (error: unknown) => error,
      );
      await vi.waitFor(async () => {
        const { rows } = await db.admin.query(
          "select 1 from pg_stat_activity where wait_event_type = 'Lock' and query ilike 'insert into \"shifts\"%'",
        );
        expect(rows).toHaveLength(1);
      });
      await client.query('commit');
      expect(await refused).toMatchObject({
        code: 'stops',
        findings: [{ code: 'person-overlap', severity: 'stop', against: [{ kind: 'person', id: ada }] }],
      });
    } finally {
      client.release();
    }
    expect(await shiftsOf(b, mine.visitId)).toEqual([]);
  });
});
