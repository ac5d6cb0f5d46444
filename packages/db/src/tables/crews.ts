import { sql } from 'drizzle-orm';
import {
  check,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { companyIdColumn, companyPolicy, instant } from './columns.ts';
import { companies, members } from './company.ts';

/** The board's lanes. */
export const crews = pgTable(
  'crews',
  {
    companyId: companyIdColumn().references(() => companies.id),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    naturalKey: text('natural_key').notNull(),
    foremanId: uuid('foreman_id'),
    sortOrder: integer('sort_order').notNull().default(0),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('crews_natural_key').on(t.companyId, t.naturalKey),
    foreignKey({
      columns: [t.companyId, t.foremanId],
      foreignColumns: [members.companyId, members.personId],
      name: 'crews_foreman',
    }),
    companyPolicy('crews', t.companyId),
  ],
);

/** A person belongs to a crew from an instant until another; open while they still do. */
export const crewMemberships = pgTable(
  'crew_memberships',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    crewId: uuid('crew_id').notNull(),
    personId: uuid('person_id').notNull(),
    startsAt: instant('starts_at').notNull(),
    endsAt: instant('ends_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('crew_memberships_crew').on(t.companyId, t.crewId),
    index('crew_memberships_person').on(t.companyId, t.personId),
    foreignKey({
      columns: [t.companyId, t.crewId],
      foreignColumns: [crews.companyId, crews.id],
      name: 'crew_memberships_crew_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.personId],
      foreignColumns: [members.companyId, members.personId],
      name: 'crew_memberships_person_fk',
    }),
    check('crew_memberships_order', sql`${t.endsAt} is null or ${t.endsAt} > ${t.startsAt}`),
    companyPolicy('crew_memberships', t.companyId),
  ],
);
