/** The same hour wanted many times at once: one wins, whatever runs beside it. */

import { type Database, inCompany, openDatabase } from '@strikeboard/db/client';
import { DatabaseFailure, Refused } from '@strikeboard/db/errors';
import { newId } from '@strikeboard/db/ids';
import { placeVisit } from '@strikeboard/db/queries/placement';
import { createPour } from '@strikeboard/db/queries/pours';
import { createCrew, editCrew, joinCrew } from '@strikeboard/db/queries/set-up-crews';
import { createEquipment } from '@strikeboard/db/queries/set-up-supply';
import type { FindingCode } from '@strikeboard/domain/finding';
import type { PlacingMethod } from '@strikeboard/domain/vocabulary';
import { freshDatabase } from '@strikeboard/local-stack/test-database';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addPerson,
  makeCompany,
  placePour,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

const TIMES = 50;
const NOW_MS = Date.parse('2026-03-06T15:00:00Z');
/** 6:30 on a Tuesday in Denver (UTC-6 after 2026-03-08; IANA time zone database). */
const START_MS = Date.parse('2026-03-10T12:30:00Z');
const reasons = new Proxy<Partial<Record<FindingCode, string>>>(
  {},
  { get: () => 'Looked at and found right' },
);

let db: TestDatabases;
let many: Database;
let close: () => Promise<void>;
let urls: { web: string };

beforeAll(async () => {
  const fresh = await freshDatabase();
  urls = fresh.urls;
  close = fresh.close;
  many = openDatabase(fresh.urls.web, { max: 25 });
  db = {
    web: many,
    worker: openDatabase(fresh.urls.worker, { max: 2 }),
    owner: openDatabase(fresh.urls.owner, { max: 2 }),
    close: async () => {},
  };
});
afterAll(async () => {
  await Promise.all([db.web.close(), db.worker.close(), db.owner.close()]);
  await close();
});

async function waitingPour(company: TestCompany, name: string, placingMethod: PlacingMethod = 'chute') {
  const change = await inCompany(many, { companyId: company.companyId, personId: company.ownerId }, (tx) =>
    createPour(tx, {
      actorId: company.ownerId,
      nowMs: NOW_MS,
      settleSeconds: 120,
      pour: {
        siteId: company.siteId,
        name,
        orderedYd3: 12,
        areaFt2: 900,
        thicknessIn: 4,
        finish: 'broom',
        placingMethod,
      },
    }),
  );
  const [visit] = change.patch.visits;
  if (!visit) throw new Error('A pour has a visit.');
  return visit;
}

const drop = (
  company: TestCompany,
  visit: { id: string; version: number },
  crewId: string,
  crewStartMs = START_MS,
) =>
  inCompany(many, { companyId: company.companyId, personId: company.ownerId }, (tx) =>
    placeVisit(tx, {
      actorId: company.ownerId,
      nowMs: NOW_MS,
      settleSeconds: 120,
      placement: { visitId: visit.id, crewId, crewStartMs },
      baseVersion: visit.version,
      reasons,
    }),
  );

function outcomes(settled: PromiseSettledResult<unknown>[]) {
  const lost = settled.flatMap((one) => (one.status === 'rejected' ? [one.reason] : []));
  return { won: settled.length - lost.length, lost };
}

async function countOf(sql: string, values: unknown[], companyId: string): Promise<number> {
  const client = new pg.Client(urls.web);
  await client.connect();
  await client.query("select set_config('app.company_id', $1, false)", [companyId]);
  const { rows } = await client.query(sql, values);
  await client.end();
  return Number(rows[0]?.count);
}

describe(`${TIMES} drops onto the same people and hour`, () => {
  it('lets exactly one through and gives the others the finding', async () => {
    const company = await makeCompany(db, { slug: 'same-people', name: 'Same People' });
    for (const name of ['Ana', 'Ben', 'Cruz', 'Dee']) {
      const personId = await addPerson(many, company, { name });
      await inCompany(many, { companyId: company.companyId, personId: null }, (tx) =>
        joinCrew(tx, { crewId: company.crewId, personId, fromMs: NOW_MS - 1 }),
      );
    }
    const visits = [];
    for (let turn = 0; turn < TIMES; turn += 1) visits.push(await waitingPour(company, `Slab ${turn}`));
    const { won, lost } = outcomes(
      await Promise.allSettled(visits.map((visit) => drop(company, visit, company.crewId))),
    );
    expect(won).toBe(1);
    expect(lost).toHaveLength(TIMES - 1);
    for (const error of lost) {
      expect(error).toBeInstanceOf(Refused);
      expect(error.code).toBe('stops');
      expect(error.findings.map(({ code }: { code: FindingCode }) => code)).toEqual(
        expect.arrayContaining(['crew-overlap']),
      );
    }
    expect(await countOf("select count(*) from shifts where state = 'held'", [], company.companyId)).toBe(4);
  }, 120_000);

  for (const isolation of ['read committed', 'serializable'] as const) {
    it(`holds in the database alone at ${isolation}, with nothing above it`, async () => {
      const company = await makeCompany(db, { slug: `bare-${isolation.replace(' ', '-')}`, name: 'Bare' });
      const personId = await addPerson(many, company, { name: 'Ana' });
      const placed = [];
      for (let turn = 0; turn < TIMES; turn += 1)
        placed.push(
          await placePour(many, company, { during: { startMs: START_MS, endMs: START_MS + 3_600_000 } }),
        );
      const settled = await Promise.allSettled(
        placed.map(async ({ visitId }, turn) => {
          const client = new pg.Client(urls.web);
          await client.connect();
          try {
            await client.query(`begin isolation level ${isolation}`);
            await client.query("select set_config('app.company_id', $1, true)", [company.companyId]);
            // Each an hour long and a minute later than the last, so all share time and none is the same.
            const range = `[${new Date(START_MS + turn * 60_000).toISOString()},${new Date(START_MS + turn * 60_000 + 3_600_000).toISOString()})`;
            await client.query(
              'insert into shifts (company_id, id, visit_id, person_id, during, held) values ($1, $2, $3, $4, $5, $5)',
              [company.companyId, newId(), visitId, personId, range],
            );
            await client.query('commit');
          } finally {
            await client.end();
          }
        }),
      );
      const { won, lost } = outcomes(settled);
      expect(won).toBe(1);
      // 23P01 exclusion_violation, 40001 serialization_failure, 40P01 deadlock_detected (PostgreSQL 15, appendix A).
      for (const error of lost) expect(['23P01', '40001', '40P01']).toContain(error.code);
      expect(
        await countOf('select count(*) from shifts where person_id = $1', [personId], company.companyId),
      ).toBe(1);
    }, 120_000);
  }
});

describe(`${TIMES} drops that want the same pump`, () => {
  it('lets exactly one have it', async () => {
    const company = await makeCompany(db, { slug: 'one-pump', name: 'One Pump' });
    const own = { companyId: company.companyId, personId: null };
    await inCompany(many, own, (tx) =>
      createEquipment(tx, {
        kind: 'pump',
        name: 'Boom',
        boom: true,
        reachFt: '105',
        outputYd3PerHour: '90',
        setUpMin: 30,
        washOutMin: 30,
        travelMin: 30,
        operatorEmail: null,
        operatorPhoneE164: null,
      }),
    );
    const drops = [];
    for (let turn = 0; turn < TIMES; turn += 1) {
      const personId = await addPerson(many, company, { name: `Person ${turn}` });
      const crewId = await inCompany(many, own, async (tx) => {
        const id = await createCrew(tx, { name: `Pump crew ${turn}`, foremanId: null });
        await joinCrew(tx, { crewId: id, personId, fromMs: NOW_MS - 1 });
        return id;
      });
      drops.push({ crewId, visit: await waitingPour(company, `Deck ${turn}`, 'boom-pump') });
    }
    const { won, lost } = outcomes(
      await Promise.allSettled(drops.map(({ visit, crewId }) => drop(company, visit, crewId))),
    );
    expect(won).toBe(1);
    for (const error of lost) {
      expect(error).toBeInstanceOf(Refused);
      expect(error.findings.map(({ code }: { code: FindingCode }) => code)).toContain('pump-overlap');
    }
    expect(
      await countOf("select count(*) from equipment_bookings where state = 'drafted'", [], company.companyId),
    ).toBe(1);
  }, 180_000);

  for (const isolation of ['read committed', 'serializable'] as const) {
    it(`holds in the database alone at ${isolation}, with nothing above it`, async () => {
      const company = await makeCompany(db, {
        slug: `bare-pump-${isolation.replace(' ', '-')}`,
        name: 'Bare',
      });
      const pumpId = await inCompany(many, { companyId: company.companyId, personId: null }, (tx) =>
        createEquipment(tx, {
          ...{ kind: 'pump', name: 'Boom', boom: true, reachFt: '105', outputYd3PerHour: '90' },
          ...{ setUpMin: 30, washOutMin: 30, travelMin: 30, operatorEmail: null, operatorPhoneE164: null },
        }),
      );
      const during = { startMs: START_MS, endMs: START_MS + 3_600_000 };
      const placed = [];
      for (let turn = 0; turn < TIMES; turn += 1) placed.push(await placePour(many, company, { during }));
      const { won, lost } = outcomes(
        await Promise.allSettled(
          placed.map(async ({ visitId }, turn) => {
            const client = new pg.Client(urls.web);
            await client.connect();
            try {
              await client.query(`begin isolation level ${isolation}`);
              await client.query("select set_config('app.company_id', $1, true)", [company.companyId]);
              await client.query(
                `insert into equipment_bookings (company_id, id, visit_id, equipment_id, during, held)
                 select $1, $2, $3, $4, r, r from tstzrange($5, $6) r`,
                [
                  ...[company.companyId, newId(), visitId, pumpId],
                  new Date(START_MS + turn * 60_000),
                  new Date(START_MS + turn * 60_000 + 3_600_000),
                ],
              );
              await client.query('commit');
            } finally {
              await client.end();
            }
          }),
        ),
      );
      expect(won).toBe(1);
      for (const error of lost) expect(['23P01', '40001', '40P01']).toContain(error.code);
      expect(await countOf('select count(*) from equipment_bookings', [], company.companyId)).toBe(1);
    }, 120_000);
  }
});

describe('two companies that want the same two people', () => {
  it('never both have them, twenty times over', async () => {
    const cedar = await makeCompany(db, { slug: 'shared-cedar', name: 'Cedar' });
    const prairie = await makeCompany(db, { slug: 'shared-prairie', name: 'Prairie' });
    // In the other order on the other crew, so that each would wait for the other's.
    for (const [company, names] of [
      [cedar, ['ana', 'ben']],
      [prairie, ['ben', 'ana']],
    ] as const)
      for (const name of names) {
        const personId = await addPerson(many, company, { name, email: `${name}@shared.example.com` });
        await inCompany(many, { companyId: company.companyId, personId: null }, (tx) =>
          joinCrew(tx, { crewId: company.crewId, personId, fromMs: NOW_MS - 1 }),
        );
      }
    for (let turn = 0; turn < 20; turn += 1) {
      const visits = [
        [cedar, await waitingPour(cedar, `Cedar ${turn}`)],
        [prairie, await waitingPour(prairie, `Prairie ${turn}`)],
      ] as const;
      const { won, lost } = outcomes(
        await Promise.allSettled(
          visits.map(([company, visit]) =>
            drop(company, visit, company.crewId, START_MS + turn * 24 * 3_600_000),
          ),
        ),
      );
      expect(won).toBe(1);
      for (const error of lost) {
        expect(error).toBeInstanceOf(Refused);
        expect(error.findings.map(({ code }: { code: FindingCode }) => code)).toContain('person-overlap');
      }
    }
    const held = "select count(*) from shifts where state = 'held'";
    expect((await countOf(held, [], cedar.companyId)) + (await countOf(held, [], prairie.companyId))).toBe(
      40,
    );
  }, 120_000);
});

it('runs the one of two transactions that a deadlock has ended anew', async () => {
  const company = await makeCompany(db, { slug: 'deadlock', name: 'Deadlock' });
  const of = { companyId: company.companyId, personId: company.ownerId };
  const other = await inCompany(many, of, (tx) => createCrew(tx, { name: 'Crew 2', foremanId: null }));
  let attempts = 0;
  let arrived = 0;
  let open = () => {};
  const both = new Promise<void>((resolve) => {
    open = resolve;
  });
  const rename = (crewIds: readonly string[], sortOrder: number) =>
    inCompany(many, of, async (tx) => {
      attempts += 1;
      for (const [at, crewId] of crewIds.entries()) {
        await editCrew(tx, { crewId, fields: { sortOrder } });
        if (at > 0) continue;
        arrived += 1;
        if (arrived === 2) open();
        await both;
      }
    });
  await Promise.all([rename([company.crewId, other], 7), rename([other, company.crewId], 8)]);
  expect(attempts).toBe(3);
  const orders = 'select count(*) from crews where sort_order in (7, 8) group by sort_order';
  expect(await countOf(orders, [], company.companyId)).toBe(2);
});

it('says no statement and no value of a failed write', async () => {
  const company = await makeCompany(db, { slug: 'quiet-errors', name: 'Quiet' });
  const failed = inCompany(many, { companyId: company.companyId, personId: null }, (tx) =>
    tx.execute(
      `insert into crews (company_id, id, name, natural_key) values ('${company.companyId}', 'not-a-uuid', 'Secret', 'x')`,
    ),
  );
  await expect(failed).rejects.toBeInstanceOf(DatabaseFailure);
  await expect(failed).rejects.not.toThrow(/Secret|insert/);
});
