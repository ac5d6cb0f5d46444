import type { APIRoute } from 'astro';
import { database } from '../lib/server/database.ts';
import { describeError } from '../lib/server/describe-error.ts';
import { log } from '../lib/server/log.ts';

/** 200 once the database answers; for whatever watches the process. */
export const GET: APIRoute = async ({ locals }) => {
  try {
    await database().pool.query('select 1');
    return Response.json({ ok: true });
  } catch (error) {
    log.error({ requestId: locals.requestId, error: describeError(error) }, 'not healthy');
    return Response.json({ ok: false, reason: 'The database does not answer.' }, { status: 503 });
  }
};
