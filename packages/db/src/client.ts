/** Connections, and the transactions in which a company and a person are set. */

import { sql } from 'drizzle-orm';
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { guarded, sqlStateOf } from './errors.ts';
import * as tables from './tables/index.ts';

/** deadlock_detected and serialization_failure (PostgreSQL 15, appendix A): nothing was written, so it may be tried again. */
const PASSING = new Set(['40P01', '40001']);
const ATTEMPTS = 3;

export type Orm = NodePgDatabase<typeof tables>;
/** A transaction with its settings made. */
export type Tx = Parameters<Parameters<Orm['transaction']>[0]>[0];

export interface Database {
  readonly pool: pg.Pool;
  readonly orm: Orm;
  close(): Promise<void>;
}

/** Opens a pool. Sessions read and print instants in UTC, whatever the server's own zone. */
export function openDatabase(url: string, options: { max?: number } = {}): Database {
  const pool = new pg.Pool({
    connectionString: url,
    max: options.max ?? 10,
    options: '-c timezone=UTC',
    application_name: 'strikeboard',
  });
  // A connection that is lost with its server must not end the process; the pool opens another at need.
  pool.on('error', () => {});
  pool.on('connect', (client) => client.on('error', () => {}));
  return { pool, orm: drizzle(pool, { schema: tables }), close: () => pool.end() };
}

/**
 * Runs work in one transaction with the company and the acting person set, which row-level security reads.
 * `personId` is null for what a link's holder, a provider or the worker does. Work that lost against another
 * transaction (deadlock, serialization) is run anew, so it must do nothing that a rollback does not take back.
 */
export function inCompany<T>(
  db: Database,
  of: { companyId: string; personId: string | null },
  work: (tx: Tx) => Promise<T>,
): Promise<T> {
  return inSettings(db, of.companyId, of.personId ?? '', work);
}

/** Runs work in one transaction in which only the person is set: they see their own rows in every company. */
export function asPerson<T>(db: Database, personId: string, work: (tx: Tx) => Promise<T>): Promise<T> {
  return inSettings(db, '', personId, work);
}

async function inSettings<T>(
  db: Database,
  companyId: string,
  personId: string,
  work: (tx: Tx) => Promise<T>,
): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await guarded(() =>
        db.orm.transaction(async (tx) => {
          await tx.execute(
            sql`select set_config('app.company_id', ${companyId}, true), set_config('app.person_id', ${personId}, true)`,
          );
          return work(tx);
        }),
      );
    } catch (error) {
      if (attempt === ATTEMPTS || !PASSING.has(sqlStateOf(error) ?? '')) throw error;
    }
  }
}
