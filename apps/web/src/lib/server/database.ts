import { type Database, openDatabase } from '@strikeboard/db/client';
import { env } from '../../env.ts';
import { onClosing } from './closing.ts';

let kept: Database | undefined;

/** This process's connections, opened at the first call and closed with the server. */
export function database(): Database {
  if (kept === undefined) {
    const opened = openDatabase(env().DATABASE_URL);
    onClosing(() => opened.close());
    kept = opened;
  }
  return kept;
}
