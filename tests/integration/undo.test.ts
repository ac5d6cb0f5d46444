/** Undo puts back what was, unless someone has changed it since. */

import { answerVisit, type GivenAnswer } from '@strikeboard/db/queries/answers';
import type { BoardPatch } from '@strikeboard/db/queries/board-change';
import { callOff, makeFirm, returnToWaiting, undoChange } from '@strikeboard/db/queries/placement';
import { createVisit, editPour } from '@strikeboard/db/queries/pours';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
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
  shiftsOf,
  visitRow,
  visitRows,
  waitingPour,
} from './board-fixture.ts';

let db: BoardDatabases;
let count = 0;
const board = () => makeBoard(db, { slug: `undoing-${++count}` });

beforeAll(async () => {
  db = await openBoardDatabases();
});
afterAll(() => db.close());

const undo = (b: Board, revision: number) => act(b, (tx) => undoChange(tx, { ...acting(b), revision }));
const answer = (b: Board, of: Pick<GivenAnswer, 'visitId' | 'personId' | 'answer'>) =>
  act(b, (tx) => answerVisit(tx, { ...of, nowMs: NOW_MS, seenStartMs: null }));

/** All rows of a visit and of what it caused, without what only ever grows. */
async function stateOf(b: Board, visitId: string) {
  const visits = await visitRows(b, '(id = $2 or caused_by_visit_id = $2)', [visitId]);
  const live = ({ state }: { state: string }) => !['released', 'withdrawn', 'called-off'].includes(state);
  const orders = await look<{ state: string }>(
    b,
    `select plant_id, mix_id, ordered_yd3, load_yd3, spacing_min, during::text, state from mix_orders
     where visit_id = $1 order by id`,
    [visitId],
  );
  return {
    visits: visits.filter(live).map(({ version: _, ...row }) => row),
    shifts: (await shiftsOf(b, visitId)).filter(live),
    offers: (await offersOf(b, visitId)).filter(live),
    bookings: (await bookingsOf(b, visitId)).filter(live),
    orders: orders.filter(live),
    pours: await look(
      b,
      `select p.name, p.ordered_yd3, p.finish, p.pump_id, p.jointing, p.people_to_finish from pours p
       join visits v on v.company_id = p.company_id and v.pour_id = p.id where v.id = $1`,
      [visitId],
    ),
  };
}

const rowIn = (patch: BoardPatch, visitId: string) => patch.visits.find(({ id }) => id === visitId);

describe('undo of a placement', () => {
  it('makes it wait again; undo of that puts it back; and so on', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { placingMethod: 'boom-pump', jointing: 'saw-conventional' });
    const waiting = await stateOf(b, visitId);
    const placed = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const standing = await stateOf(b, visitId);
    expect(standing).toMatchObject({ visits: { length: 3 }, shifts: { length: 3 }, bookings: { length: 1 } });

    const undone = await undo(b, placed.revision);
    expect(await stateOf(b, visitId)).toEqual(waiting);
    expect(undone.patch).toMatchObject({ kind: 'undo', actorPersonId: b.ownerId });
    expect(undone.patch.visitIds.toSorted()).toEqual(placed.patch.visitIds.toSorted());
    expect(rowIn(undone.patch, visitId)).toMatchObject({ state: 'waiting', crewId: null, version: 3 });

    const redone = await undo(b, undone.revision);
    expect(await stateOf(b, visitId)).toEqual(standing);
    expect(rowIn(redone.patch, visitId)).toMatchObject({ state: 'firm', crewId: b.north, version: 4 });

    await undo(b, redone.revision);
    expect(await stateOf(b, visitId)).toEqual(waiting);
  });

  it('happens once, and not for what is unknown', async () => {
    const b = await board();
    const placed = await drop(b, { ...(await waitingPour(b)), crewId: b.north, startMs: at(DAY, 7) });
    const undone = await undo(b, placed.revision);
    await expect(undo(b, placed.revision)).rejects.toMatchObject({
      ...{ code: 'undone-already', facts: { byRevision: undone.revision } },
    });
    await expect(undo(b, 9999)).rejects.toMatchObject({ what: 'change' });
    // Making a pour cannot be undone: it is called off instead.
    await expect(undo(b, 1)).rejects.toMatchObject({ code: 'not-undoable' });
    const other = await board();
    await expect(undo(other, placed.revision)).rejects.toMatchObject({ what: 'change' });
  });

  it('tells whom it concerns once it has settled, in one word with what it undoes', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    const placed = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await act(b, (tx) => undoChange(tx, { ...acting(b, NOW_MS + 60_000), revision: placed.revision }));
    const jobs = await look(
      b,
      "select run_at from graphile_worker._private_jobs where payload ->> 'companyId' = $1",
      [b.companyId],
    );
    expect(jobs).toEqual([{ run_at: new Date(NOW_MS + 180_000) }]);
  });
});

describe('undo of a move', () => {
  it('puts crew, time, people, pump and answers back', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { placingMethod: 'boom-pump' });
    const { ada, cal, sol } = b.people;
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await answer(b, { visitId, personId: ada, answer: 'yes' });
    await answer(b, { visitId, personId: cal, answer: 'no' });
    await answer(b, { visitId, personId: sol, answer: 'yes' });
    const before = await stateOf(b, visitId);
    const moved = await drop(b, { visitId, crewId: b.south, startMs: at(DAY, 9) });
    const away = await stateOf(b, visitId);
    expect(away).not.toEqual(before);
    const back = await undo(b, moved.revision);
    expect(await stateOf(b, visitId)).toEqual(before);
    await undo(b, back.revision);
    expect(await stateOf(b, visitId)).toEqual(away);
  });

  it('puts it back over the hours that it has half left', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const before = await stateOf(b, visitId);
    const moved = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 8), reasons: anyReason });
    await undo(b, moved.revision);
    expect(await stateOf(b, visitId)).toEqual(before);
  });

  it('gives the way back to the visit that followed', async () => {
    const b = await board();
    const work = async (siteId: string, hour: number, minute = 0) => {
      const { patch } = await act(b, (tx) =>
        createVisit(tx, {
          ...acting(b),
          visit: { kind: 'prep', siteId, title: 'Form and grade', plannedMin: 120, wantedOn: null },
        }),
      );
      const visitId = patch.visitIds[0] ?? '';
      await drop(b, { visitId, crewId: b.north, startMs: at(DAY, hour, minute) });
      return visitId;
    };
    await work(b.farSiteId, 6);
    const between = await work(b.siteId, 8, 30);
    const last = await work(b.siteId, 10, 30);
    const outbox = () => look(b, 'select id from outbox where visit_id = $1', [last]);
    const words = await outbox();
    const moved = await drop(b, { visitId: between, crewId: b.north, startMs: at('2026-06-10', 7) });
    expect((await shiftsOf(b, last))[0]?.heldStartMs).toBe(at(DAY, 10));
    await undo(b, moved.revision);
    expect((await shiftsOf(b, last))[0]?.heldStartMs).toBe(at(DAY, 10, 30));
    expect((await shiftsOf(b, between))[0]?.heldStartMs).toBe(at(DAY, 8));
    // Nothing that its people are told of has changed.
    expect(await outbox()).toEqual(words);
  });
});

describe('undo is refused', () => {
  it('when the visit has changed since', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    const first = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const second = await drop(b, { visitId, crewId: b.south, startMs: at(DAY, 7) });
    const now = await stateOf(b, visitId);
    await expect(undo(b, first.revision)).rejects.toMatchObject({
      code: 'changed-since',
      facts: { visitId },
    });
    expect(await stateOf(b, visitId)).toEqual(now);
    // The other way round both can be: what was changed and undone stands as it did.
    const undone = await undo(b, second.revision);
    const redone = await undo(b, undone.revision);
    await expect(undo(b, first.revision)).rejects.toMatchObject({ code: 'changed-since' });
    await undo(b, redone.revision);
    await undo(b, first.revision);
    expect(await visitRow(b, visitId)).toMatchObject({ state: 'waiting', crewId: null });
  });

  it('when a follow-up that it would call off has been placed since', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b, { jointing: 'saw-conventional' });
    const placed = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const [saw] = await visitRows(b, "kind = 'saw'");
    if (!saw?.window) throw new Error('A sawn pour has a saw visit with a window.');
    await drop(b, { visitId: saw.id, crewId: b.south, startMs: saw.window.startMs, reasons: anyReason });
    await expect(undo(b, placed.revision)).rejects.toMatchObject({
      ...{ code: 'changed-since', facts: { visitId: saw.id } },
    });
  });

  it('when the hours have been taken meanwhile, and leaves everything as it is', async () => {
    const b = await board();
    const [one, other] = [await waitingPour(b), await waitingPour(b)];
    await drop(b, { ...one, crewId: b.north, startMs: at(DAY, 7) });
    const moved = await drop(b, { ...one, crewId: b.north, startMs: at('2026-06-11', 7) });
    await drop(b, { ...other, crewId: b.north, startMs: at(DAY, 9) });
    const now = [await stateOf(b, one.visitId), await stateOf(b, other.visitId)];
    await expect(undo(b, moved.revision)).rejects.toMatchObject({ code: 'time-taken' });
    expect([await stateOf(b, one.visitId), await stateOf(b, other.visitId)]).toEqual(now);
    expect((await visitRow(b, one.visitId)).version).toBe(3);
  });

  it('when the pump has been taken meanwhile', async () => {
    const b = await board();
    const [one, other] = [
      await waitingPour(b, { placingMethod: 'boom-pump' }),
      await waitingPour(b, { placingMethod: 'boom-pump' }),
    ];
    await drop(b, { ...one, crewId: b.north, startMs: at(DAY, 7) });
    const moved = await drop(b, { ...one, crewId: b.north, startMs: at('2026-06-11', 7) });
    await drop(b, { ...other, crewId: b.south, startMs: at(DAY, 7) });
    await expect(undo(b, moved.revision)).rejects.toMatchObject({
      ...{ code: 'time-taken', facts: { constraint: 'equipment_bookings_one_place' } },
    });
  });
});

describe('what was answered since', () => {
  it('stays when the time stays', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    const startMs = at('2026-06-18', 7);
    await drop(b, { visitId, crewId: b.north, startMs });
    const firm = await act(b, (tx) => makeFirm(tx, { ...acting(b), visitId, baseVersion: 2 }));
    const { ada, ben, sol } = b.people;
    await answer(b, { visitId, personId: ada, answer: 'yes' });
    await answer(b, { visitId, personId: ben, answer: 'no' });
    await answer(b, { visitId, personId: sol, answer: 'yes' });
    const before = await shiftsOf(b, visitId);
    await undo(b, firm.revision);
    expect(await visitRow(b, visitId)).toMatchObject({ state: 'pencilled', startMs });
    expect(await shiftsOf(b, visitId)).toEqual(before);
    const said = new Map((await shiftsOf(b, visitId)).map((row) => [row.who, [row.state, row.answer]]));
    expect(said.get(ada)).toEqual(['held', 'yes']);
    expect(said.get(ben)).toEqual(['released', 'no']);
    expect(said.get(sol)).toEqual(['held', 'yes']);
    expect((await offersOf(b, visitId)).map(({ state }) => state)).toEqual(['accepted']);
  });

  it('to a time that goes away goes with it', async () => {
    const b = await board();
    const { visitId } = await waitingPour(b);
    const { ada, sol } = b.people;
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await answer(b, { visitId, personId: ada, answer: 'yes' });
    const before = await stateOf(b, visitId);
    const moved = await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 9), reasons: anyReason });
    await answer(b, { visitId, personId: ada, answer: 'no' });
    await answer(b, { visitId, personId: sol, answer: 'yes' });
    await undo(b, moved.revision);
    expect((await stateOf(b, visitId)).shifts).toEqual(before.shifts);
    expect((await offersOf(b, visitId)).filter(({ state }) => state === 'open')).toEqual(before.offers);
  });
});

describe('undo of taking off', () => {
  it.each(['wait', 'call-off'] as const)(
    '(%s) puts the visit back with its people and follow-ups',
    async (kind) => {
      const b = await board();
      const { visitId } = await waitingPour(b, { placingMethod: 'boom-pump', jointing: 'saw-conventional' });
      await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
      await answer(b, { visitId, personId: b.people.ada, answer: 'yes' });
      const before = await stateOf(b, visitId);
      const of = { ...acting(b), visitId, baseVersion: 2 };
      const off = await act(b, (tx) =>
        kind === 'wait' ? returnToWaiting(tx, of) : callOff(tx, { ...of, reason: 'Rain' }),
      );
      expect((await stateOf(b, visitId)).shifts).toEqual([]);
      const back = await undo(b, off.revision);
      expect(await stateOf(b, visitId)).toEqual(before);
      await undo(b, back.revision);
      expect((await stateOf(b, visitId)).shifts).toEqual([]);
      expect((await visitRow(b, visitId)).state).toBe(kind === 'wait' ? 'waiting' : 'called-off');
    },
  );
});

describe('undo of an edit', () => {
  const edit = async (b: Board, pourId: string, fields: Parameters<typeof editPour>[1]['fields']) => {
    const [pour] = await look<{ version: number }>(b, 'select version from pours where id = $1', [pourId]);
    return act(b, (tx) =>
      editPour(tx, { ...acting(b), pourId, baseVersion: pour?.version ?? 0, fields, reasons: anyReason }),
    );
  };

  it('of a pour that stands puts the pour, its time, its order and its pump back', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, {
      placingMethod: 'boom-pump',
      jointing: 'saw-conventional',
    });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const before = await stateOf(b, visitId);
    const edited = await edit(b, pourId, {
      ...{
        name: 'Drive and apron',
        orderedYd3: 40,
        finish: 'trowel',
        placingMethod: 'chute',
        jointing: 'tooled',
      },
      ...{ peopleToFinish: 2, wantedOn: '2026-06-12' },
    });
    const after = await stateOf(b, visitId);
    expect(after.visits[0]).toMatchObject({
      title: 'Drive and apron',
      partYd3: '40.000',
      wantedOn: '2026-06-12',
    });
    expect(after.bookings).toEqual([]);
    // Nothing is sawn any more.
    expect(after.visits.map(({ kind }) => kind)).toEqual(['pour', 'strip']);
    const back = await undo(b, edited.revision);
    expect(await stateOf(b, visitId)).toEqual(before);
    await undo(b, back.revision);
    expect(await stateOf(b, visitId)).toEqual(after);
  });

  it('of a pour over two days puts both days back at once', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, { orderedYd3: 30 });
    const second = await splitVisit(b, visitId, '10', '20');
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await drop(b, { visitId: second, crewId: b.south, startMs: at('2026-06-12', 7), reasons: anyReason });
    const before = [await stateOf(b, visitId), await stateOf(b, second)];
    const edited = await edit(b, pourId, { orderedYd3: 45 });
    expect([(await visitRow(b, visitId)).partYd3, (await visitRow(b, second)).partYd3]).toEqual([
      '15.000',
      '30.000',
    ]);
    expect(edited.patch.visitIds).toEqual(expect.arrayContaining([visitId, second]));
    await undo(b, edited.revision);
    expect([await stateOf(b, visitId), await stateOf(b, second)]).toEqual(before);
  });

  it('is refused when the pour was edited again', async () => {
    const b = await board();
    const { pourId } = await waitingPour(b);
    const first = await edit(b, pourId, { notes: 'Gate code at the office' });
    await edit(b, pourId, { notes: 'Gate is open' });
    await expect(undo(b, first.revision)).rejects.toMatchObject({ code: 'changed-since' });
  });
});

/** Gives a pour's visit a part of its yards and makes another visit of the rest. */
async function splitVisit(b: Board, visitId: string, partYd3: string, restYd3: string): Promise<string> {
  await look(b, 'update visits set part_yd3 = $2 where id = $1', [visitId, partYd3]);
  const [row] = await look<{ id: string }>(
    b,
    `insert into visits (company_id, id, kind, site_id, pour_id, part_yd3, title, wanted_on)
     select company_id, gen_random_uuid(), kind, site_id, pour_id, $2, title, wanted_on from visits where id = $1
     returning id`,
    [visitId, restYd3],
  );
  if (!row) throw new Error('The second visit was not made.');
  return row.id;
}
