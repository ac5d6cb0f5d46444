import { sql } from 'drizzle-orm';
import { type AnyPgColumn, check } from 'drizzle-orm/pg-core';

/** Check constraint that holds a text column to one of the domain's closed lists. */
export function oneOf(name: string, column: AnyPgColumn, values: readonly string[]) {
  return check(name, sql`${column} in (${sql.raw(values.map((v) => `'${v}'`).join(', '))})`);
}
