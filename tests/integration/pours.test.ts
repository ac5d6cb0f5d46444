/** Pours as they are made and edited. Yards are exact to a thousandth (numeric in the database). */

import { newId } from '@strikeboard/db/ids';
import { answerVisit } from '@strikeboard/db/queries/answers';
import { closeVisit } from '@strikeboard/db/queries/close';
import { createPour, createVisit, editPour, visitDetail } from '@strikeboard/db/queries/pours';
import { createEquipment } from '@strikeboard/db/queries/set-up-supply';
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
  openBoardDatabases,
  shiftsOf,
  traces,
  visitRow,
  visitRows,
  waitingPour,
} from './board-fixture.ts';

let db: BoardDatabases;
let count = 0;
const board = () => makeBoard(db, { slug: `pouring-${++count}` });

beforeAll(async () => {
  db = await openBoardDatabases();
});
afterAll(() => db.close());

type Edit = Parameters<typeof editPour>[1];

async function edit(
  b: Board,
  pourId: string,
  fields: Edit['fields'],
  options: { baseVersion?: number; reasons?: Edit['reasons'] } = {},
) {
  const [pour] = await look<{ version: number }>(b, 'select version from pours where id = $1', [pourId]);
  const { baseVersion = pour?.version ?? 1, reasons = {} } = options;
  return act(b, (tx) => editPour(tx, { ...acting(b), pourId, baseVersion, fields, reasons }));
}

/** Splits a pour's visit: the first keeps the first part, and each further part gets a visit of its own. */
async function split(b: Board, visitId: string, parts: string[]): Promise<string[]> {
  const [first, ...others] = parts;
  await look(b, 'update visits set part_yd3 = $2 where id = $1', [visitId, first]);
  const ids = [visitId];
  for (const part of others) {
    const id = newId();
    ids.push(id);
    await look(
      b,
      `insert into visits (company_id, id, kind, site_id, pour_id, part_yd3, title, wanted_on)
       select company_id, $2, kind, site_id, pour_id, $3, title, wanted_on from visits where id = $1`,
      [visitId, id, part],
    );
  }
  return ids;
}

const partsOf = async (b: Board, visitIds: readonly string[]) =>
  Promise.all(visitIds.map(async (id) => (await visitRow(b, id)).partYd3));

describe('a new pour', () => {
  it('waits with one slab, whose volume is that of its area and thickness', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, {
      areaFt2: 1000.5,
      thicknessIn: 5.5,
      orderedYd3: 17.25,
    });
    expect(await visitRow(b, visitId)).toMatchObject({
      kind: 'pour',
      state: 'waiting',
      partYd3: '17.250',
      version: 1,
    });
    // 1000.5 ft² x 5.5 in / 12 / 27: arithmetic.
    expect(
      await look(
        b,
        `select s.area_ft2, s.thickness_in, s.volume_yd3 from slabs s
         join pour_slabs ps on ps.company_id = s.company_id and ps.slab_id = s.id where ps.pour_id = $1`,
        [pourId],
      ),
    ).toEqual([{ area_ft2: '1000.5000', thickness_in: '5.5000', volume_yd3: '16.9838' }]);
  });

  it("takes the company's own site, mix and pump, once per name and day", async () => {
    const [b, other] = [await board(), await board()];
    const saw = await act(b, (tx) =>
      createEquipment(tx, {
        ...{ kind: 'saw', name: 'Saw 1', boom: false, reachFt: null, outputYd3PerHour: null },
        ...{ setUpMin: 0, washOutMin: 0, travelMin: 0, operatorEmail: null, operatorPhoneE164: null },
      }),
    );
    const before = await traces(b);
    await expect(waitingPour(b, { siteId: other.siteId })).rejects.toMatchObject({ what: 'site' });
    await expect(waitingPour(b, { mixId: other.mixId })).rejects.toMatchObject({ what: 'mix' });
    await expect(waitingPour(b, { pumpId: other.pumpId })).rejects.toMatchObject({ what: 'pump' });
    await expect(waitingPour(b, { pumpId: saw })).rejects.toMatchObject({ what: 'pump' });
    expect(await traces(b)).toEqual(before);
    await waitingPour(b, { name: 'Garage' });
    await expect(waitingPour(b, { name: '  GÁRAGE ' })).rejects.toMatchObject({ code: 'pour-taken' });
    await waitingPour(b, { name: 'Garage', wantedOn: '2026-06-30' });
  });

  it('is one of the visits that a crew can have; the others are made without yards', async () => {
    const b = await board();
    const visit = { kind: 'strip', siteId: b.siteId, title: 'Strip', plannedMin: 90, wantedOn: DAY } as const;
    const { patch } = await act(b, (tx) => createVisit(tx, { ...acting(b), visit }));
    expect(patch).toMatchObject({
      kind: 'create-visit',
      visits: [{ ...visit, state: 'waiting', partYd3: null }],
    });
    const of = { ...acting(b), visit: { ...visit, siteId: newId() } };
    await expect(act(b, (tx) => createVisit(tx, of))).rejects.toMatchObject({ what: 'site' });
  });
});

describe('an edit', () => {
  it('of a pour that waits changes it and its visit', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b);
    const { patch } = await edit(b, pourId, {
      name: 'Apron',
      orderedYd3: 20.5,
      wantedOn: '2026-06-30',
      notes: 'Gate',
    });
    expect(patch).toMatchObject({
      kind: 'edit-pour',
      pours: [{ id: pourId, version: 2, name: 'Apron', orderedYd3: 20.5, notes: 'Gate' }],
      visits: [{ id: visitId, title: 'Apron', partYd3: 20.5, wantedOn: '2026-06-30', version: 2 }],
    });
    expect(await traces(b)).toMatchObject({ outbox: 0, jobs: 0 });
    expect(
      await look(
        b,
        `select subject_kind, before ->> 'orderedYd3' as was, after ->> 'orderedYd3' as is, before ->> 'wantedOn' as day
         from audit where action = 'edit-pour' and company_id = $1 order by id`,
        [b.companyId],
      ),
    ).toEqual([
      { subject_kind: 'pour', was: '12.000', is: '20.5', day: DAY },
      { subject_kind: 'visit', was: '12.000', is: '20.5', day: DAY },
    ]);
  });

  it('of a pour that stands plans it anew: its end, its order, its pump, and those who are asked', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, { placingMethod: 'boom-pump' });
    const startMs = at(DAY, 7);
    await drop(b, { visitId, crewId: b.north, startMs });
    await act(b, (tx) =>
      answerVisit(tx, { visitId, personId: b.people.ada, answer: 'yes', nowMs: NOW_MS, seenStartMs: null }),
    );
    const before = await visitRow(b, visitId);
    const { patch } = await edit(b, pourId, { orderedYd3: 30 }, { reasons: anyReason });
    const after = await visitRow(b, visitId);
    expect(after).toMatchObject({ state: 'firm', crewId: b.north, startMs, partYd3: '30.000' });
    expect(after.endMs).toBeGreaterThan(before.endMs ?? Number.POSITIVE_INFINITY);
    // 3 loads of 10 yd³ each 40 min and the last unloaded in 10: 7:45 to 9:15 (arithmetic).
    const placing = { startMs: at(DAY, 7, 45), endMs: at(DAY, 9, 15) };
    expect(patch.mixOrders).toMatchObject([{ orderedYd3: 30, during: placing }]);
    expect(await bookingsOf(b, visitId)).toMatchObject([{ who: b.pumpId, ...placing }]);
    for (const shift of await shiftsOf(b, visitId))
      expect(shift).toMatchObject({ state: 'held', answer: 'none', endMs: after.endMs });
    expect(await traces(b)).toMatchObject({ outbox: 2, jobs: 1 });
    expect(patch).toMatchObject({
      visits: expect.arrayContaining([expect.objectContaining({ untold: true })]),
    });
  });

  it('that changes no time keeps the answers', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b);
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await act(b, (tx) =>
      answerVisit(tx, { visitId, personId: b.people.ada, answer: 'yes', nowMs: NOW_MS, seenStartMs: null }),
    );
    const before = await shiftsOf(b, visitId);
    await edit(b, pourId, { notes: 'Bring the bull float' });
    expect(await shiftsOf(b, visitId)).toEqual(before);
  });

  it('that the checks refuse leaves everything as it was', async () => {
    const b = await board();
    const [one, next] = [await waitingPour(b), await waitingPour(b)];
    await drop(b, { ...one, crewId: b.north, startMs: at(DAY, 7) });
    await drop(b, { ...next, crewId: b.north, startMs: at(DAY, 15, 10), reasons: anyReason });
    const before = [await traces(b), await visitRows(b, 'true'), await shiftsOf(b, one.visitId)];
    // With 30 yd³ it runs into the next pour of the same people.
    await expect(
      edit(b, one.pourId, { orderedYd3: 30, name: 'Longer' }, { reasons: anyReason }),
    ).rejects.toMatchObject({
      ...{
        code: 'stops',
        findings: expect.arrayContaining([expect.objectContaining({ code: 'crew-overlap' })]),
      },
    });
    await expect(edit(b, one.pourId, { peopleToFinish: 5 })).rejects.toMatchObject({ code: 'reason-needed' });
    expect([await traces(b), await visitRows(b, 'true'), await shiftsOf(b, one.visitId)]).toEqual(before);
    await edit(b, one.pourId, { peopleToFinish: 5 }, { reasons: anyReason });
    expect(await visitRow(b, one.visitId)).toMatchObject({
      acceptedCodes: expect.arrayContaining(['short-handed']),
    });
  });

  it('books the pump that is chosen, and none where none is needed any more', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, { placingMethod: 'boom-pump' });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    const second = await act(b, (tx) =>
      createEquipment(tx, {
        ...{ kind: 'pump', name: 'Boom 2', boom: true, reachFt: '105', outputYd3PerHour: '90' },
        ...{ setUpMin: 30, washOutMin: 45, travelMin: 30, operatorEmail: null, operatorPhoneE164: null },
      }),
    );
    await edit(b, pourId, { pumpId: second });
    const states = async () =>
      Object.fromEntries((await bookingsOf(b, visitId)).map(({ who, state }) => [who, state]));
    expect(await states()).toEqual({ [b.pumpId]: 'called-off', [second]: 'drafted' });
    await edit(b, pourId, { notes: 'By the alley' });
    expect(await states()).toEqual({ [b.pumpId]: 'called-off', [second]: 'drafted' });
    await edit(b, pourId, { placingMethod: 'chute', pumpId: null }, { reasons: anyReason });
    expect(await states()).toEqual({ [b.pumpId]: 'called-off', [second]: 'called-off' });
  });

  it('calls off the saw visit that waits when nothing is sawn, and leaves the one that stands', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, { jointing: 'saw-conventional' });
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
    await edit(b, pourId, { jointing: 'tooled' });
    expect((await visitRows(b, "kind = 'saw'")).map(({ state }) => state)).toEqual(['called-off']);
    await edit(b, pourId, { jointing: 'saw-early-entry' }, { reasons: anyReason });
    const saw = (await visitRows(b, "kind = 'saw' and state = 'waiting'"))[0];
    if (!saw?.window) throw new Error('A sawn pour has a saw visit with a window.');
    await drop(b, { visitId: saw.id, crewId: b.south, startMs: saw.window.startMs, reasons: anyReason });
    await edit(b, pourId, { jointing: 'tooled' });
    expect((await visitRow(b, saw.id)).state).toBe('firm');
  });

  it('names what was edited since the version that it was based on', async () => {
    const b = await board();
    const { pourId } = await waitingPour(b);
    await edit(b, pourId, { notes: 'Gate code at the office' });
    await edit(b, pourId, { orderedYd3: 14, wantedOn: null });
    await expect(edit(b, pourId, { name: 'Mine' }, { baseVersion: 1 })).rejects.toMatchObject({
      ...{ subject: { kind: 'pour', id: pourId }, current: { version: 3 } },
      changedFields: expect.arrayContaining(['notes', 'orderedYd3', 'wantedOn']),
    });
    await expect(edit(b, pourId, { name: 'Mine' }, { baseVersion: 2 })).rejects.toMatchObject({
      changedFields: expect.not.arrayContaining(['notes']),
    });
    await expect(edit(b, newId(), { name: 'Mine' })).rejects.toMatchObject({ what: 'pour' });
  });
});

describe('the yards of a pour over several visits', () => {
  it('are shared as before, exact to the last thousandth', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, { orderedYd3: 30 });
    const ids = await split(b, visitId, ['10', '10', '10']);
    const { patch } = await edit(b, pourId, { orderedYd3: 100 });
    expect(await partsOf(b, ids)).toEqual(['33.333', '33.333', '33.334']);
    expect(patch.visitIds.toSorted()).toEqual(ids.toSorted());
    expect(patch.visits).toHaveLength(3);
    await edit(b, pourId, { orderedYd3: 30 });
    const parts = (await partsOf(b, ids)).map(Number);
    expect(parts.reduce((sum, part) => sum + Math.round(part * 1000), 0)).toBe(30_000);
  });

  it('that are placed stay placed, and only what is to come is shared', async () => {
    const b = await board();
    const { visitId, pourId } = await waitingPour(b, { orderedYd3: 40 });
    const ids = await split(b, visitId, ['10', '20', '10']);
    await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7), reasons: anyReason });
    const { version } = await visitRow(b, visitId);
    const nowMs = at('2026-06-10', 12);
    await act(b, (tx) => closeVisit(tx, { ...acting(b, nowMs), visitId, baseVersion: version }));
    await edit(b, pourId, { orderedYd3: 55, wantedOn: '2026-06-20' });
    expect(await partsOf(b, ids)).toEqual(['10.000', '30.000', '15.000']);
    expect(await visitRow(b, visitId)).toMatchObject({ state: 'done', wantedOn: DAY, startMs: at(DAY, 7) });
    await expect(edit(b, pourId, { orderedYd3: 10 })).rejects.toMatchObject({
      ...{ code: 'yards-placed', facts: { placedYd3: 10 } },
    });
  });
});

it('says of each person on a visit where they stand now, and what has happened, newest first', async () => {
  const b = await board();
  const { visitId } = await waitingPour(b);
  const { ada, ben, cal, sol } = b.people;
  await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 7) });
  const say = (personId: string, answer: 'yes' | 'no') =>
    act(b, (tx) => answerVisit(tx, { visitId, personId, answer, nowMs: NOW_MS, seenStartMs: null }));
  await say(ada, 'yes');
  await say(ben, 'no');
  await say(sol, 'no');
  await drop(b, { visitId, crewId: b.south, startMs: at(DAY, 8) });
  await drop(b, { visitId, crewId: b.north, startMs: at(DAY, 9), reasons: anyReason });
  await say(sol, 'no');
  const detail = await act(b, (tx) => visitDetail(tx, visitId));
  expect(detail.people.map(({ personId, state, answer }) => [personId, state, answer]).toSorted()).toEqual(
    [
      [ada, 'held', 'none'],
      [ben, 'held', 'none'],
      [cal, 'held', 'none'],
      [sol, 'declined', 'no'],
    ].toSorted(),
  );
  expect(detail.history.map(({ action }) => action).slice(0, 4)).toEqual([
    'answer',
    'place',
    'place',
    'answer',
  ]);
  expect(detail.history.at(-1)).toMatchObject({
    action: 'create-pour',
    actorName: 'Olive Owner',
    atMs: NOW_MS,
  });
  expect(detail.notices).toEqual([]);
  await expect(act(b, (tx) => visitDetail(tx, newId()))).rejects.toMatchObject({ what: 'visit' });
  const other = await board();
  await expect(act(other, (tx) => visitDetail(tx, visitId))).rejects.toMatchObject({ what: 'visit' });
});

it('makes nothing of a pour whose yards are none', async () => {
  const b = await board();
  const pour = {
    siteId: b.siteId,
    name: 'Nothing',
    orderedYd3: 0,
    areaFt2: 1,
    thicknessIn: 4,
    finish: 'broom',
    placingMethod: 'chute',
  } as const;
  const before = await traces(b);
  await expect(act(b, (tx) => createPour(tx, { ...acting(b), pour }))).rejects.toMatchObject({
    sqlState: '23514',
  });
  expect(await traces(b)).toEqual(before);
});
