import { channels, languages, noticeStates } from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import {
  foreignKey,
  index,
  integer,
  jsonb,
  pgPolicy,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import { appWeb, appWorker, companyIdColumn, companyPolicy, instant } from './columns.ts';
import { members } from './company.ts';
import { oneOf } from './one-of.ts';
import { visits } from './visits.ts';

/** A visit whose people may have to be told, written in the transaction that changed it. */
export const outbox = pgTable(
  'outbox',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    visitId: uuid('visit_id').notNull(),
    /** When the change has settled. */
    dueAt: instant('due_at').notNull(),
    createdBy: uuid('created_by'),
    createdAt: instant('created_at').notNull().defaultNow(),
    doneAt: instant('done_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('outbox_visit').on(t.companyId, t.visitId),
    // What is left to tell is little, of a table that only grows.
    index('outbox_left').on(t.companyId, t.visitId).where(sql`done_at is null`),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'outbox_visit_fk',
    }),
    companyPolicy('outbox', t.companyId),
  ],
);

/** The exact facts that each person was last told of each visit. */
export const told = pgTable(
  'told',
  {
    companyId: companyIdColumn(),
    visitId: uuid('visit_id').notNull(),
    personId: uuid('person_id').notNull(),
    facts: jsonb('facts').$type<Record<string, unknown>>().notNull(),
    toldAt: instant('told_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.visitId, t.personId] }),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'told_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.personId],
      foreignColumns: [members.companyId, members.personId],
      name: 'told_person_fk',
    }),
    companyPolicy('told', t.companyId),
  ],
);

/** One SMS or e-mail to one person, with its delivery record. */
export const notices = pgTable(
  'notices',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    visitId: uuid('visit_id').notNull(),
    personId: uuid('person_id').notNull(),
    channel: text('channel', { enum: channels }).notNull(),
    language: text('language', { enum: languages }).notNull(),
    toAddress: text('to_address').notNull(),
    subject: text('subject'),
    body: text('body').notNull(),
    state: text('state', { enum: noticeStates }).notNull().default('queued'),
    providerId: text('provider_id'),
    errorCode: text('error_code'),
    error: text('error'),
    attempts: integer('attempts').notNull().default(0),
    queuedAt: instant('queued_at').notNull().defaultNow(),
    sentAt: instant('sent_at'),
    deliveredAt: instant('delivered_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('notices_queued_at').on(t.companyId, t.queuedAt),
    index('notices_visit').on(t.companyId, t.visitId),
    uniqueIndex('notices_provider_id').on(t.providerId).where(sql`provider_id is not null`),
    index('notices_to_address').on(t.toAddress, t.queuedAt),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'notices_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.personId],
      foreignColumns: [members.companyId, members.personId],
      name: 'notices_person_fk',
    }),
    oneOf('notices_channel', t.channel, channels),
    oneOf('notices_language', t.language, languages),
    oneOf('notices_state', t.state, noticeStates),
    companyPolicy('notices', t.companyId),
  ],
);

/** Links that open one visit to one person without sign-in. Only the hash of the token is kept. */
export const links = pgTable(
  'links',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    tokenHash: text('token_hash').notNull().unique(),
    visitId: uuid('visit_id').notNull(),
    personId: uuid('person_id').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    expiresAt: instant('expires_at').notNull(),
    revokedAt: instant('revoked_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('links_visit_person').on(t.companyId, t.visitId, t.personId),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'links_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.personId],
      foreignColumns: [members.companyId, members.personId],
      name: 'links_person_fk',
    }),
    companyPolicy('links', t.companyId),
  ],
);

/** Numbers that have said STOP, for every company at once. */
export const silencedNumbers = pgTable(
  'silenced_numbers',
  { phoneE164: text('phone_e164').primaryKey(), silencedAt: instant('silenced_at').notNull().defaultNow() },
  () => [
    pgPolicy('silenced_numbers_all', {
      for: 'all',
      to: [appWeb, appWorker],
      using: sql`true`,
      withCheck: sql`true`,
    }),
  ],
);
