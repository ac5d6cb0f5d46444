import { index, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { instant } from './columns.ts';
import { people } from './company.ts';

/** Signed-in browsers. Only the hash of the token is kept; deleting the row signs out at once. */
export const sessions = pgTable(
  'sessions',
  {
    tokenHash: text('token_hash').primaryKey(),
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    userAgent: text('user_agent'),
    createdAt: instant('created_at').notNull().defaultNow(),
    expiresAt: instant('expires_at').notNull(),
  },
  (t) => [index('sessions_person').on(t.personId)],
);
