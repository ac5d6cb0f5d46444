import { type Database, openDatabase } from '@strikeboard/db/client';
import { env } from '../../env.ts';

let kept: Database | undefined;

/** This process's connections, opened at the first call. They end with the process, after its last answer. */
export function database(): Database {
  kept ??= openDatabase(env().DATABASE_URL);
  return kept;
}
