import { pino } from 'pino';
import { env } from '../../env.ts';

/** The web server's log: one line of JSON each. Never bodies, tokens, phone numbers or SQL. */
export const log = pino({ level: env().LOG_LEVEL, base: { part: 'web' } });
