/** What can go wrong in a query, as its callers see it. A driver's message holds statement and values, so none escapes. */

import type { Finding } from '@strikeboard/domain/finding';
import pg from 'pg';

/** There is no such row, or it is another company's. */
export class NotFound extends Error {
  readonly what: string;
  readonly id: string;
  constructor(what: string, id: string) {
    super(`There is no such ${what}.`);
    this.name = 'NotFound';
    this.what = what;
    this.id = id;
  }
}

/** The row has changed since the version that the write was based on. */
export class StaleVersion extends Error {
  readonly subject: { kind: string; id: string };
  readonly current: unknown;
  readonly changedFields: readonly string[];
  constructor(subject: { kind: string; id: string }, current: unknown, changedFields: readonly string[]) {
    super(`The ${subject.kind} has changed since.`);
    this.name = 'StaleVersion';
    this.subject = subject;
    this.current = current;
    this.changedFields = changedFields;
  }
}

/** The checks refuse it: a stop, or a caution that nobody has given a reason for. */
export class Refused extends Error {
  readonly code: 'stops' | 'reason-needed';
  readonly findings: readonly Finding[];
  readonly nearest: readonly { crewId: string; crewStartMs: number }[];
  constructor(
    code: 'stops' | 'reason-needed',
    findings: readonly Finding[],
    nearest: readonly { crewId: string; crewStartMs: number }[] = [],
  ) {
    super(code === 'stops' ? 'The checks say that it cannot be.' : 'A caution needs a reason.');
    this.name = 'Refused';
    this.code = code;
    this.findings = findings;
    this.nearest = nearest;
  }
}

/** What is there now does not allow it. `code` is stable; `facts` say what stands against it. */
export class Conflict extends Error {
  readonly code: string;
  readonly facts: Readonly<Record<string, unknown>>;
  constructor(code: string, facts: Readonly<Record<string, unknown>> = {}) {
    super(`Conflict: ${code}.`);
    this.name = 'Conflict';
    this.code = code;
    this.facts = facts;
  }
}

/** The database refused or failed for a reason that no query names: SQLSTATE and constraint only. */
export class DatabaseFailure extends Error {
  readonly sqlState: string | null;
  readonly constraint: string | null;
  constructor(sqlState: string | null, constraint: string | null) {
    super(`The database answered ${sqlState ?? 'with a fault'}${constraint ? ` (${constraint})` : ''}.`);
    this.name = 'DatabaseFailure';
    this.sqlState = sqlState;
    this.constraint = constraint;
  }
}

function databaseErrorIn(error: unknown): pg.DatabaseError | null {
  for (let at = error; at instanceof Error; at = at.cause) if (at instanceof pg.DatabaseError) return at;
  return null;
}

/** The SQLSTATE of a failed statement, or null where none is behind the error. */
export function sqlStateOf(error: unknown): string | null {
  if (error instanceof DatabaseFailure) return error.sqlState;
  return databaseErrorIn(error)?.code ?? null;
}

/** The constraint that a failed statement ran against, or null. */
export function constraintOf(error: unknown): string | null {
  if (error instanceof DatabaseFailure) return error.constraint;
  return databaseErrorIn(error)?.constraint ?? null;
}

/** Runs database work; what fails in the driver leaves without statement and values. */
export async function guarded<T>(work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    const found = databaseErrorIn(error);
    if (found) throw new DatabaseFailure(found.code ?? null, found.constraint ?? null);
    if (error instanceof Error && error.constructor.name === 'DrizzleQueryError') {
      // No answer came from the server at all: only the driver's own code is safe to keep.
      const code = error.cause instanceof Error && 'code' in error.cause ? String(error.cause.code) : null;
      throw new DatabaseFailure(code, null);
    }
    throw error;
  }
}
