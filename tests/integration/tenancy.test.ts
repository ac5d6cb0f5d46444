/**
 * No company sees another's rows. The tables are read from the catalogue, so that a new one cannot be forgotten: it
 * fails here until it has its security and a row in the fixture below.
 */

import { randomBytes } from 'node:crypto';
import { freshDatabase } from '@strikeboard/local-stack/test-database';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const uuid = (kind: string, company: 'a' | 'b'): string =>
  `00000000-0000-7000-8000-${Buffer.from(`${company}${kind}`.padEnd(6, '_').slice(0, 6)).toString('hex')}`;
const A = uuid('co', 'a');
const B = uuid('co', 'b');
const companyIds = { a: A, b: B } as const;
const RANGE = '[2026-03-10T12:30:00Z,2026-03-10T20:30:00Z)';

/** One row of every company table, by table; `id` gives the same key for the same name within a company. */
function rowsOf(company: 'a' | 'b'): Record<string, Record<string, unknown>> {
  const company_id = companyIds[company];
  const id = (kind: string) => uuid(kind, company);
  const own = (kind: string) => ({ company_id, id: id(kind) });
  const ranges = { during: RANGE, held: RANGE };
  return {
    members: { company_id, person_id: id('person'), role: 'finisher', name: 'Ana' },
    crews: { ...own('crew'), name: 'Crew', natural_key: 'crew' },
    crew_memberships: {
      ...own('place'),
      crew_id: id('crew'),
      person_id: id('person'),
      starts_at: '2026-01-01T00:00:00Z',
    },
    sites: {
      ...own('site'),
      name: 'Site',
      natural_key: 'site',
      address: '1 Alder Ct',
      zone: 'America/Denver',
    },
    slabs: {
      ...own('slab'),
      site_id: id('site'),
      name: 'Slab',
      thickness_in: 4,
      area_ft2: 100,
      volume_yd3: 1.2346,
    },
    sections: {
      ...own('sect'),
      slab_id: id('slab'),
      position: 0,
      shape: 'rectangle',
      length_ft: 10,
      width_ft: 10,
    },
    plants: {
      ...own('plant'),
      name: 'Plant',
      zone: 'America/Denver',
      hours: '[null,null,null,null,null,null,null]',
    },
    mixes: { ...own('mix'), plant_id: id('plant'), code: 'M', name: 'Mix', strength_psi: 4000 },
    equipment: { ...own('pump'), kind: 'pump', name: 'Pump' },
    pours: {
      ...own('pour'),
      site_id: id('site'),
      name: 'Pour',
      natural_key: 'pour',
      ordered_yd3: 4,
      finish: 'broom',
      placing_method: 'chute',
    },
    pour_slabs: { company_id, pour_id: id('pour'), slab_id: id('slab') },
    visits: {
      ...own('visit'),
      kind: 'pour',
      state: 'firm',
      site_id: id('site'),
      crew_id: id('crew'),
      pour_id: id('pour'),
      part_yd3: 4,
      title: 'Pour',
      during: RANGE,
    },
    shifts: { ...own('shift'), visit_id: id('visit'), person_id: id('person'), ...ranges },
    offers: { ...own('offer'), visit_id: id('visit'), person_id: id('person'), ...ranges },
    mix_orders: {
      ...own('order'),
      visit_id: id('visit'),
      plant_id: id('plant'),
      mix_id: id('mix'),
      ordered_yd3: 4,
      load_yd3: 10,
      spacing_min: 20,
      during: RANGE,
    },
    equipment_bookings: { ...own('book'), visit_id: id('visit'), equipment_id: id('pump'), ...ranges },
    outbox: { ...own('out'), visit_id: id('visit'), due_at: '2026-03-10T00:00:00Z' },
    told: {
      company_id,
      visit_id: id('visit'),
      person_id: id('person'),
      facts: '{}',
      told_at: '2026-03-10T00:00:00Z',
    },
    notices: {
      ...own('note'),
      visit_id: id('visit'),
      person_id: id('person'),
      channel: 'sms',
      language: 'en',
      to_address: '+19705550100',
      body: 'x',
    },
    links: {
      ...own('link'),
      token_hash: randomBytes(32).toString('hex'),
      visit_id: id('visit'),
      person_id: id('person'),
      expires_at: '2027-01-01T00:00:00Z',
    },
    board_changes: { company_id, revision: 1, kind: 'place', visit_ids: `{${id('visit')}}`, patch: '{}' },
    audit: { ...own('audit'), action: 'place', subject_kind: 'visit', subject_id: id('visit') },
    idempotency_keys: { company_id, person_id: id('person'), key: 'key-1', request_hash: 'h', status: 200 },
    imports: {
      ...own('imp'),
      kind: 'people',
      file_name: 'people.csv',
      encoding: 'utf-8',
      rows: '[]',
      mapping: '[]',
      created_by: id('person'),
    },
  };
}

let close: () => Promise<void>;
let urls: { owner: string; web: string; worker: string };
let adminUrl: string;
let tables: string[];

async function as<T>(
  url: string,
  work: (client: pg.Client) => Promise<T>,
  company: string | null = null,
): Promise<T> {
  const client = new pg.Client(url);
  await client.connect();
  try {
    if (company !== null) await client.query("select set_config('app.company_id', $1, false)", [company]);
    return await work(client);
  } finally {
    await client.end();
  }
}

function insert(table: string, row: Record<string, unknown>): [string, unknown[]] {
  const columns = Object.keys(row);
  const places = columns.map((_, at) => `$${at + 1}`).join(', ');
  return [`insert into ${table} (${columns.join(', ')}) values (${places})`, Object.values(row)];
}

beforeAll(async () => {
  const db = await freshDatabase();
  ({ urls, adminUrl, close } = db);
  await as(adminUrl, async (admin) => {
    const { rows } = await admin.query<{ name: string }>(`
      select c.relname as name from pg_class c join pg_attribute a on a.attrelid = c.oid
      where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p') and a.attname = 'company_id' and not a.attisdropped
      order by 1`);
    tables = rows.map(({ name }) => name);
    for (const company of ['a', 'b'] as const) {
      await admin.query(
        ...insert('companies', {
          id: companyIds[company],
          slug: `company-${company}`,
          name: company,
          zone: 'America/Denver',
        }),
      );
      await admin.query(
        ...insert('people', { id: uuid('person', company), name: 'Ana', zone: 'America/Denver' }),
      );
      for (const [table, row] of Object.entries(rowsOf(company))) await admin.query(...insert(table, row));
    }
  });
});
afterAll(() => close());

describe('every table with a company', () => {
  it('is in this fixture with a row of two companies', () => {
    expect(tables.length).toBeGreaterThan(20);
    expect(tables).toEqual(Object.keys(rowsOf('a')).sort());
  });

  it('has row-level security enabled and forced, and the company first in its key', async () => {
    const found = await as(adminUrl, async (admin) => {
      const { rows } = await admin.query(
        `
        select c.relname as name, c.relrowsecurity and c.relforcerowsecurity as secured,
          (select a.attname from pg_index i join pg_attribute a on a.attrelid = c.oid and a.attnum = i.indkey[0]
           where i.indrelid = c.oid and i.indisprimary) as first
        from pg_class c where c.relnamespace = 'public'::regnamespace and c.relname = any($1)`,
        [tables],
      );
      return rows;
    });
    expect(found).toHaveLength(tables.length);
    for (const table of found)
      expect(table).toEqual({ name: table.name, secured: true, first: 'company_id' });
  });

  it('carries the company in every foreign key to another such table', async () => {
    const found = await as(adminUrl, async (admin) => {
      const { rows } = await admin.query<{ name: string; first: string; firstThere: string }>(
        `
        select k.conname as name,
          (select attname from pg_attribute where attrelid = k.conrelid and attnum = k.conkey[1]) as first,
          (select attname from pg_attribute where attrelid = k.confrelid and attnum = k.confkey[1]) as "firstThere"
        from pg_constraint k
        where k.contype = 'f' and k.conrelid::regclass::text = any($1) and k.confrelid::regclass::text = any($1)`,
        [tables],
      );
      return rows;
    });
    expect(found.length).toBeGreaterThan(20);
    for (const key of found)
      expect(key).toEqual({ name: key.name, first: 'company_id', firstThere: 'company_id' });
  });

  for (const role of ['web', 'worker', 'owner'] as const) {
    it(`shows the ${role} role nothing while no company is set`, async () => {
      const counts = await as(urls[role], async (client) => {
        const found: Record<string, number> = {};
        for (const table of [...tables, 'companies', ...(role === 'worker' ? [] : ['people', 'person_busy'])])
          found[table] = Number(
            (
              await client.query(
                `select count(*) from ${table === 'people' ? '(select id from people) p' : table}`,
              )
            ).rows[0].count,
          );
        return found;
      });
      expect(counts).toEqual(Object.fromEntries(Object.keys(counts).map((table) => [table, 0])));
    });

    it(`shows the ${role} role the set company's rows and no other's`, async () => {
      for (const [set, other] of [
        [A, B],
        [B, A],
      ] as const) {
        await as(
          urls[role],
          async (client) => {
            for (const table of tables) {
              const { rows } = await client.query<{ company_id: string }>(`select company_id from ${table}`);
              expect({ table, seen: rows.length > 0 }).toEqual({ table, seen: true });
              expect(rows.filter((row) => row.company_id === other)).toEqual([]);
              expect(rows.every((row) => row.company_id === set)).toBe(true);
            }
          },
          set,
        );
      }
    });
  }

  it('refuses a row for another company (42501, insufficient_privilege)', async () => {
    await as(
      urls.web,
      async (client) => {
        for (const [table, row] of Object.entries(rowsOf('b'))) {
          const error = await client.query(...insert(table, row)).catch((thrown: unknown) => thrown);
          expect({ table, code: error instanceof pg.DatabaseError ? error.code : 'none' }).toEqual({
            table,
            code: '42501',
          });
        }
      },
      A,
    );
  });

  it("refuses a reference to another company's row (23503, foreign_key_violation)", async () => {
    const row = {
      ...rowsOf('a').crew_memberships,
      id: uuid('fk', 'a'),
      crew_id: uuid('crew', 'b'),
      starts_at: '2020-01-01T00:00:00Z',
      ends_at: '2020-01-02T00:00:00Z',
    };
    const error = await as(
      urls.web,
      (client) => client.query(...insert('crew_memberships', row)).catch((thrown: unknown) => thrown),
      A,
    );
    expect(error).toMatchObject({ code: '23503' });
  });
});

describe('the roles', () => {
  it('are no superusers and may not pass row-level security', async () => {
    const { rows } = await as(adminUrl, (admin) =>
      admin.query(
        "select rolname, rolsuper, rolbypassrls, rolcreaterole, rolcanlogin from pg_roles where rolname like 'app\\_%' order by 1",
      ),
    );
    const plain = { rolsuper: false, rolbypassrls: false, rolcreaterole: false };
    expect(rows).toEqual([
      { rolname: 'app_cross', ...plain, rolcanlogin: false },
      { rolname: 'app_owner', ...plain, rolcanlogin: true },
      { rolname: 'app_web', ...plain, rolcanlogin: true },
      { rolname: 'app_worker', ...plain, rolcanlogin: true },
    ]);
  });

  for (const role of ['web', 'worker'] as const) {
    it(`leave history to be appended to only (${role})`, async () => {
      await as(
        urls[role],
        async (client) => {
          for (const statement of [
            "update audit set action = 'other'",
            'delete from audit',
            "update board_changes set kind = 'other'",
            'delete from board_changes',
            'delete from visits',
            'delete from shifts',
            'delete from members',
            'truncate audit',
          ]) {
            const error = await client.query(statement).catch((thrown: unknown) => thrown);
            expect({ statement, code: error instanceof pg.DatabaseError ? error.code : 'none' }).toEqual({
              statement,
              code: '42501',
            });
          }
        },
        A,
      );
    });
  }

  it('leave nothing set for the next user of a connection', async () => {
    await as(urls.web, async (client) => {
      await client.query('begin');
      await client.query("select set_config('app.company_id', $1, true)", [A]);
      expect((await client.query('select count(*) from visits')).rows[0].count).toBe('1');
      await client.query('commit');
      expect((await client.query('select count(*) from visits')).rows[0].count).toBe('0');
    });
  });

  it('show a person their own rows in every company, and nobody both', async () => {
    await as(urls.web, async (client) => {
      await client.query("select set_config('app.person_id', $1, false)", [uuid('person', 'b')]);
      const { rows } = await client.query<{ company_id: string; person_id: string }>(
        'select company_id, person_id from shifts',
      );
      expect(rows).toEqual([{ company_id: B, person_id: uuid('person', 'b') }]);
      expect((await client.query('select 1 from visits')).rowCount).toBe(0);
    });
  });
});
