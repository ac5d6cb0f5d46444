/** A company with crews, people, a plant, a pump and two sites, and the moves of a dispatcher on its board. */

import { type Database, inCompany, openDatabase, type Tx } from '@strikeboard/db/client';
import type { BoardChange } from '@strikeboard/db/queries/board-change';
import { placeVisit } from '@strikeboard/db/queries/placement';
import { createPour } from '@strikeboard/db/queries/pours';
import { addMember, createCompany } from '@strikeboard/db/queries/set-up';
import { createCrew, joinCrew } from '@strikeboard/db/queries/set-up-crews';
import { createSite } from '@strikeboard/db/queries/set-up-sites';
import { createEquipment, createMix, createPlant } from '@strikeboard/db/queries/set-up-supply';
import type { CompanyRules } from '@strikeboard/domain/company-rules';
import type { FindingCode } from '@strikeboard/domain/finding';
import type { Interval } from '@strikeboard/domain/interval';
import { instantAt } from '@strikeboard/domain/zone';
import { freshDatabase } from '@strikeboard/local-stack/test-database';
import pg from 'pg';

/** The sites' zone; the office sits an hour further east, and the machine of the tests is in Asia. */
export const SITE_ZONE = 'America/Chicago';
export const OFFICE_ZONE = 'America/New_York';
/** Monday 2026-06-08, 7:00 at the sites. */
export const NOW_MS = Date.parse('2026-06-08T12:00:00Z');
export const SETTLE_SECONDS = 120;
/** Tuesday. */
export const DAY = '2026-06-09';
export const HOUR_MS = 3_600_000;

export interface BoardDatabases {
  web: Database;
  worker: Database;
  owner: Database;
  /** Sees every row, to look at what was written. */
  admin: pg.Pool;
  urls: { web: string; worker: string; owner: string };
  close(): Promise<void>;
}

export async function openBoardDatabases(options: { webConnections?: number } = {}): Promise<BoardDatabases> {
  const { urls, adminUrl, close } = await freshDatabase();
  const web = openDatabase(urls.web, { max: options.webConnections ?? 10 });
  const [worker, owner] = [openDatabase(urls.worker, { max: 4 }), openDatabase(urls.owner, { max: 2 })];
  const admin = new pg.Pool({ connectionString: adminUrl, max: 2 });
  return {
    ...{ web, worker, owner, admin, urls },
    close: async () => {
      await Promise.all([web.close(), worker.close(), owner.close(), admin.end()]);
      await close();
    },
  };
}

export interface Board {
  db: BoardDatabases;
  companyId: string;
  ownerId: string;
  /** Three finishers and a sub. */
  north: string;
  /** Three finishers. */
  south: string;
  people: { ada: string; ben: string; cal: string; sol: string; dee: string; eli: string; fay: string };
  /** In Chicago's zone, near the plant. */
  siteId: string;
  /** Half an hour away. */
  farSiteId: string;
  plantId: string;
  mixId: string;
  pumpId: string;
}

/** Days and hours of the sites' clock. */
export function at(day: string, hour: number, minute = 0, zone = SITE_ZONE): number {
  return instantAt(day, hour * 60 + minute, zone);
}

export async function makeBoard(
  db: BoardDatabases,
  named: { slug: string; rules?: Partial<CompanyRules>; subEmail?: string; zone?: string; siteZone?: string },
): Promise<Board> {
  const { slug } = named;
  const { companyId, ownerId } = await createCompany(db.owner, {
    slug,
    name: `Company ${slug}`,
    zone: named.zone ?? OFFICE_ZONE,
    rules: { placingRateYd3PerHour: 15, ...named.rules },
    owner: { name: 'Olive Owner', email: `owner@${slug}.example.com`, phoneE164: null, language: 'en' },
  });
  return inCompany(db.web, { companyId, personId: ownerId }, async (tx) => {
    const person = (name: string, role: 'finisher' | 'sub' = 'finisher', email: string | null = null) =>
      addMember(tx, { name, role, email, phoneE164: null, language: 'en', skills: [] });
    const people = {
      ada: await person('Ada'),
      ben: await person('Ben'),
      cal: await person('Cal'),
      sol: await person('Sol', 'sub', named.subEmail ?? `sol@${slug}.example.com`),
      dee: await person('Dee'),
      eli: await person('Eli'),
      fay: await person('Fay'),
    };
    const crew = async (name: string, personIds: string[]) => {
      const crewId = await createCrew(tx, { name, foremanId: null });
      for (const personId of personIds) await joinCrew(tx, { crewId, personId, fromMs: 0 });
      return crewId;
    };
    const { ada, ben, cal, sol, dee, eli, fay } = people;
    const site = (name: string, latDeg: number) =>
      createSite(tx, {
        name,
        address: `${name}, 410 Gravel Lane`,
        zone: named.siteZone ?? SITE_ZONE,
        ...{ latDeg, lonDeg: -88.2, permittedFromMin: null, permittedUntilMin: null },
        ...{ customerName: null, accessNotes: null },
      });
    const plantId = await createPlant(tx, {
      name: 'River plant',
      zone: named.siteZone ?? SITE_ZONE,
      ...{ latDeg: 40.1, lonDeg: -88.12, maxYd3PerHour: null, shortLoadYd3: null, orderStepYd3: '0.25' },
      hours: Array.from({ length: 7 }, () => ({ fromMin: 0, untilMin: 1439 })),
      ...{ closedDays: [], orderEmail: null, orderPhoneE164: null },
    });
    return {
      db,
      companyId,
      ownerId,
      north: await crew('North', [ada, ben, cal, sol]),
      south: await crew('South', [dee, eli, fay]),
      people,
      siteId: await site('Orchard house', 40.1),
      farSiteId: await site('Depot', 40.245),
      plantId,
      mixId: await createMix(tx, {
        ...{ plantId, code: 'F4000', name: 'Flatwork 4000', strengthPsi: 4000 },
        ...{ slumpIn: '4', cement: 'type-i', dischargeLimitMin: null },
      }),
      pumpId: await createEquipment(tx, {
        ...{ kind: 'pump', name: 'Boom 1', boom: true, reachFt: '90', outputYd3PerHour: '80' },
        ...{ setUpMin: 30, washOutMin: 45, travelMin: 30, operatorEmail: null, operatorPhoneE164: null },
      }),
    };
  });
}

/** One transaction of the owner. */
export function act<T>(board: Board, work: (tx: Tx) => Promise<T>): Promise<T> {
  return inCompany(board.db.web, { companyId: board.companyId, personId: board.ownerId }, work);
}

export const acting = (board: Board, nowMs = NOW_MS) => ({
  actorId: board.ownerId,
  nowMs,
  settleSeconds: SETTLE_SECONDS,
});

type NewPour = Parameters<typeof createPour>[1]['pour'];

let pourCount = 0;

/** A driveway of 12 yd³ for three people that waits: broom finish by chute, tooled joints, unless said otherwise. */
export async function waitingPour(board: Board, changes: Partial<NewPour> = {}) {
  pourCount += 1;
  const { patch } = await act(board, (tx) =>
    createPour(tx, {
      ...acting(board),
      pour: {
        siteId: board.siteId,
        name: `Driveway ${pourCount}`,
        ...{ orderedYd3: 12, areaFt2: 900, thicknessIn: 4, finish: 'broom', placingMethod: 'chute' },
        ...{ jointing: 'tooled', mixId: board.mixId, wantedOn: DAY, peopleToPlace: 3, peopleToFinish: 3 },
        ...changes,
      },
    }),
  );
  const [visit, pour] = [patch.visits[0], patch.pours[0]];
  if (!visit || !pour) throw new Error('A new pour comes with its visit.');
  return { visitId: visit.id, pourId: pour.id };
}

/** Reasons for every caution. */
export const anyReason = new Proxy<Partial<Record<FindingCode, string>>>({}, { get: () => 'Seen, and fine' });

export interface Drop {
  visitId: string;
  crewId: string;
  startMs: number;
  pumpId?: string;
  reasons?: Partial<Record<FindingCode, string>>;
  baseVersion?: number;
  nowMs?: number;
}

/** Drops a visit, at the version that it has unless another is named. */
export async function drop(board: Board, of: Drop): Promise<BoardChange> {
  const baseVersion = of.baseVersion ?? (await visitRow(board, of.visitId)).version;
  return act(board, (tx) =>
    placeVisit(tx, {
      ...acting(board, of.nowMs),
      placement: {
        visitId: of.visitId,
        crewId: of.crewId,
        crewStartMs: of.startMs,
        ...(of.pumpId !== undefined && { pumpId: of.pumpId }),
      },
      baseVersion,
      reasons: of.reasons ?? {},
    }),
  );
}

export interface StoredVisit {
  id: string;
  version: number;
  kind: string;
  state: string;
  crewId: string | null;
  startMs: number | null;
  endMs: number | null;
  partYd3: string | null;
  title: string;
  wantedOn: string | null;
  acceptedCodes: string[];
  window: Interval | null;
}

const rangeMs = (column: string, name: string) =>
  `(extract(epoch from lower(${column})) * 1000)::float8 as "${name}StartMs",
   (extract(epoch from upper(${column})) * 1000)::float8 as "${name}EndMs"`;

/** The visits that a condition picks, oldest first. */
export async function visitRows(board: Board, condition: string, values: unknown[] = []) {
  const { rows } = await board.db.admin.query(
    `select id, version, kind, state, crew_id as "crewId", part_yd3 as "partYd3", title,
       wanted_on::text as "wantedOn", accepted_codes as "acceptedCodes", ${rangeMs('during', 'during')},
       ${rangeMs('"window"', 'window')}
     from visits where company_id = $1 and ${condition} order by id`,
    [board.companyId, ...values],
  );
  return rows.map(
    ({ duringStartMs, duringEndMs, windowStartMs, windowEndMs, ...row }): StoredVisit => ({
      ...row,
      startMs: duringStartMs,
      endMs: duringEndMs,
      window: windowStartMs === null ? null : { startMs: windowStartMs, endMs: windowEndMs },
    }),
  );
}

export async function visitRow(board: Board, visitId: string): Promise<StoredVisit> {
  const [row] = await visitRows(board, 'id = $2', [visitId]);
  if (!row) throw new Error(`No visit ${visitId}`);
  return row;
}

export interface StoredTime {
  id: string;
  /** Person or piece of equipment. */
  who: string;
  startMs: number;
  endMs: number;
  heldStartMs: number;
  heldEndMs: number;
  state: string;
  answer?: string;
}

async function timeRows(board: Board, table: string, who: string, visitId: string): Promise<StoredTime[]> {
  const answer = table === 'shifts' ? ', answer' : '';
  const { rows } = await board.db.admin.query(
    `select id, ${who} as who, state${answer}, ${rangeMs('during', 'during')}, ${rangeMs('held', 'held')}
     from ${table} where company_id = $1 and visit_id = $2 order by ${who}, id`,
    [board.companyId, visitId],
  );
  return rows.map(({ duringStartMs, duringEndMs, ...row }) => ({
    ...row,
    startMs: duringStartMs,
    endMs: duringEndMs,
  }));
}

export const shiftsOf = (board: Board, visitId: string) => timeRows(board, 'shifts', 'person_id', visitId);
export const offersOf = (board: Board, visitId: string) => timeRows(board, 'offers', 'person_id', visitId);
export const bookingsOf = (board: Board, visitId: string) =>
  timeRows(board, 'equipment_bookings', 'equipment_id', visitId);

/** Everything of the company that a write could leave behind, counted. */
export async function traces(board: Board) {
  const { rows } = await board.db.admin.query(
    `select (select revision::int from companies where id = $1) as revision,
       (select count(*)::int from board_changes where company_id = $1) as changes,
       (select count(*)::int from audit where company_id = $1) as audit,
       (select count(*)::int from outbox where company_id = $1) as outbox,
       (select count(*)::int from shifts where company_id = $1) as shifts,
       (select count(*)::int from offers where company_id = $1) as offers,
       (select count(*)::int from visits where company_id = $1) as visits,
       (select coalesce(sum(version), 0)::int from visits where company_id = $1) as versions,
       (select coalesce(sum(version), 0)::int from pours where company_id = $1) as "pourVersions",
       (select count(*)::int from graphile_worker._private_jobs where payload ->> 'companyId' = $1::text) as jobs`,
    [board.companyId],
  );
  return rows[0] as Record<string, number>;
}

/** Rows of any query, as the superuser sees them. */
export async function look<Row extends object>(board: Board, text: string, values: unknown[] = []) {
  const { rows } = await board.db.admin.query(text, values);
  return rows as Row[];
}
