/** A write that is sent twice is written once. */

import { inCompany } from '@strikeboard/db/client';
import { Conflict } from '@strikeboard/db/errors';
import { type KeptAnswer, oncePerKey } from '@strikeboard/db/idempotency';
import { placeVisit } from '@strikeboard/db/queries/placement';
import { createVisit } from '@strikeboard/db/queries/pours';
import { afterAll, beforeAll, expect, it } from 'vitest';
import {
  act,
  acting,
  at,
  type Board,
  type BoardDatabases,
  DAY,
  look,
  makeBoard,
  NOW_MS,
  openBoardDatabases,
  traces,
  visitRow,
  waitingPour,
} from './board-fixture.ts';

let db: BoardDatabases;
let count = 0;
const board = () => makeBoard(db, { slug: `once-${++count}` });

beforeAll(async () => {
  db = await openBoardDatabases({ webConnections: 12 });
});
afterAll(() => db.close());

const KEY = 'key-of-one-write';

/** Makes a waiting visit under a key, as an endpoint would. */
function write(
  b: Board,
  of: { key?: string; requestHash?: string; personId?: string } = {},
): Promise<KeptAnswer> {
  const personId = of.personId ?? b.ownerId;
  return act(b, (tx) =>
    oncePerKey(
      tx,
      { key: of.key ?? KEY, personId, requestHash: of.requestHash ?? 'hash-1', nowMs: NOW_MS },
      async () => {
        const visit = {
          kind: 'prep',
          siteId: b.siteId,
          title: 'Grade',
          plannedMin: 60,
          wantedOn: null,
        } as const;
        const change = await createVisit(tx, { ...acting(b), visit });
        return { status: 201, body: { revision: change.revision, visitId: change.patch.visitIds[0] } };
      },
    ),
  );
}

it('answers a repetition as the first time, and writes once', async () => {
  const b = await board();
  const first = await write(b);
  const after = await traces(b);
  expect(first.status).toBe(201);
  expect(await write(b)).toEqual(first);
  expect(await traces(b)).toEqual(after);
  expect(await write(b, { key: 'another-key' })).not.toEqual(first);
});

it('does so for ten at the same time', async () => {
  const b = await board();
  const before = await traces(b);
  const answers = await Promise.all(Array.from({ length: 10 }, () => write(b)));
  for (const answer of answers) expect(answer).toEqual(answers[0]);
  const after = await traces(b);
  expect(after.visits).toBe((before.visits ?? 0) + 1);
  expect(after.revision).toBe((before.revision ?? 0) + 1);
});

it('refuses the key for another request', async () => {
  const b = await board();
  await write(b);
  const after = await traces(b);
  const reused = write(b, { requestHash: 'hash-2' });
  await expect(reused).rejects.toThrow(Conflict);
  await expect(reused).rejects.toMatchObject({ code: 'key-reused', facts: { key: KEY } });
  expect(await traces(b)).toEqual(after);
});

it('keeps a key to its person and company', async () => {
  const [b, other] = [await board(), await board()];
  const first = await write(b);
  expect(await write(b, { personId: b.people.ada, requestHash: 'hash-2' })).not.toEqual(first);
  expect(await write(other, { personId: b.ownerId, requestHash: 'hash-2' })).not.toEqual(first);
});

it('keeps nothing of a write that was refused, so that it can be sent again', async () => {
  const b = await board();
  const { visitId } = await waitingPour(b, { peopleToFinish: 4 });
  const place = (reason: string | undefined, requestHash: string) =>
    inCompany(b.db.web, { companyId: b.companyId, personId: b.ownerId }, (tx) =>
      oncePerKey(tx, { key: KEY, personId: b.ownerId, requestHash, nowMs: NOW_MS }, async () => {
        const change = await placeVisit(tx, {
          ...acting(b),
          placement: { visitId, crewId: b.north, crewStartMs: at(DAY, 7) },
          baseVersion: 1,
          reasons: reason === undefined ? {} : { 'short-handed': reason },
        });
        return { status: 200, body: { revision: change.revision } };
      }),
    );
  await expect(place(undefined, 'without')).rejects.toMatchObject({ code: 'reason-needed' });
  expect(await look(b, 'select key from idempotency_keys where company_id = $1', [b.companyId])).toEqual([]);
  const placed = await place('Cal brings his brother', 'with');
  expect(await place('Cal brings his brother', 'with')).toEqual(placed);
  expect((await visitRow(b, visitId)).version).toBe(2);
});
