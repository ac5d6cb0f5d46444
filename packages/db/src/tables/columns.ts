/** Column kinds and policies that every table shares. */

import type { Interval } from '@strikeboard/domain/interval';
import { sql } from 'drizzle-orm';
import {
  type AnyPgColumn,
  customType,
  numeric,
  pgPolicy,
  pgRole,
  timestamp,
  uuid,
} from 'drizzle-orm/pg-core';

/** Serves the web under row-level security. Made with the cluster, so only named here. */
export const appWeb = pgRole('app_web').existing();
/** Runs the background jobs under row-level security. Made with the cluster, so only named here. */
export const appWorker = pgRole('app_worker').existing();

/** The company of this transaction; NULL when none is set (the setting reads '' on a reused connection). */
export const currentCompany = sql`nullif(current_setting('app.company_id', true), '')::uuid`;
/** The person who acts in this transaction; NULL when none is set. */
export const currentPerson = sql`nullif(current_setting('app.person_id', true), '')::uuid`;

/** Parses one bound of a range as PostgreSQL prints it in UTC. */
function boundMs(text: string): number {
  const ms = Date.parse(`${text.replace(' ', 'T').replace(/([+-]\d\d)$/, '$1:00')}`);
  if (Number.isNaN(ms)) throw new Error(`Not a range bound: ${text}`);
  return ms;
}

/** A range as PostgreSQL prints it, half-open and bounded on both sides. */
export function parseRange(text: string): Interval {
  const match = /^\["?([^",]+)"?,"?([^",]+)"?\)$/.exec(text);
  if (!match?.[1] || !match[2]) throw new Error(`Not a half-open bounded range: ${text}`);
  return { startMs: boundMs(match[1]), endMs: boundMs(match[2]) };
}

/** Half-open range of instants, bounded on both sides, as epoch milliseconds. */
export const instantRange = customType<{ data: Interval; driverData: string }>({
  dataType: () => 'tstzrange',
  toDriver: (value) => `[${new Date(value.startMs).toISOString()},${new Date(value.endMs).toISOString()})`,
  fromDriver: parseRange,
});

/** Case-insensitive text. */
export const citext = customType<{ data: string }>({ dataType: () => 'citext' });

/** Cubic yards in the plant's increment, exact. */
export const yards = (name: string) => numeric(name, { precision: 9, scale: 3 });
/** Feet, inches or square feet, exact. */
export const measure = (name: string) => numeric(name, { precision: 12, scale: 4 });
/** An instant. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });
/** The tenant's key; first in every company table's primary key. */
export const companyIdColumn = () => uuid('company_id').notNull();

/** A company table's rows are seen and written only with that company set. */
export function companyPolicy(table: string, companyId: AnyPgColumn) {
  return pgPolicy(`${table}_company`, {
    as: 'permissive',
    for: 'all',
    to: [appWeb, appWorker, 'app_owner'],
    using: sql`${companyId} = ${currentCompany}`,
    withCheck: sql`${companyId} = ${currentCompany}`,
  });
}

/** A person reads their own rows in every company. */
export function ownRowsPolicy(table: string, personId: AnyPgColumn) {
  return pgPolicy(`${table}_own`, {
    as: 'permissive',
    for: 'select',
    to: [appWeb],
    using: sql`${personId} = ${currentPerson}`,
  });
}
