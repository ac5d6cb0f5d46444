import type { CompanyRules } from '@strikeboard/domain/company-rules';
import { languages, roles } from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import {
  bigint,
  boolean,
  check,
  index,
  jsonb,
  pgPolicy,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import {
  appWeb,
  appWorker,
  citext,
  companyIdColumn,
  companyPolicy,
  currentCompany,
  currentPerson,
  instant,
  instantRange,
  ownRowsPolicy,
} from './columns.ts';
import { oneOf } from './one-of.ts';

/** The tenants. */
export const companies = pgTable(
  'companies',
  {
    id: uuid('id').primaryKey(),
    slug: text('slug').notNull().unique(),
    name: text('name').notNull(),
    /** IANA zone of the office. */
    zone: text('zone').notNull(),
    /** Only what the company has set; defaults are filled in on reading. */
    rules: jsonb('rules').$type<Partial<CompanyRules>>().notNull().default({}),
    /** Grows by one in every board transaction; its row lock puts a company's board transactions in order. */
    revision: bigint('revision', { mode: 'number' }).notNull().default(0),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    check('companies_slug', sql`${t.slug} ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length(${t.slug}) <= 60`),
    pgPolicy('companies_current', {
      for: 'all',
      to: [appWeb, appWorker, 'app_owner'],
      using: sql`${t.id} = ${currentCompany}`,
      withCheck: sql`${t.id} = ${currentCompany}`,
    }),
    pgPolicy('companies_own', {
      for: 'select',
      to: [appWeb],
      using: sql`exists (select 1 from members m where m.company_id = ${t.id} and m.person_id = ${currentPerson} and m.ended_at is null)`,
    }),
  ],
);

/** Persons as themselves, across companies: how they sign in and read. What a company knows of them is in members. */
export const people = pgTable(
  'people',
  {
    id: uuid('id').primaryKey(),
    name: text('name').notNull(),
    email: citext('email').unique(),
    passwordHash: text('password_hash'),
    language: text('language', { enum: languages }).notNull().default('en'),
    zone: text('zone').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    oneOf('people_language', t.language, languages),
    pgPolicy('people_self', {
      for: 'all',
      to: [appWeb],
      using: sql`${t.id} = ${currentPerson}`,
      withCheck: sql`${t.id} = ${currentPerson}`,
    }),
    pgPolicy('people_of_company', {
      for: 'select',
      to: [appWeb, appWorker],
      using: sql`exists (select 1 from members m where m.person_id = ${t.id} and m.company_id = ${currentCompany})`,
    }),
  ],
);

/** A person's seat in a company, with the contact details that this company has. */
export const members = pgTable(
  'members',
  {
    companyId: companyIdColumn().references(() => companies.id),
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    role: text('role', { enum: roles }).notNull(),
    name: text('name').notNull(),
    phoneE164: text('phone_e164'),
    email: citext('email'),
    language: text('language', { enum: languages }).notNull().default('en'),
    skills: text('skills').array().notNull().default(sql`'{}'`),
    naturalKey: text('natural_key'),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.personId] }),
    index('members_person').on(t.personId),
    oneOf('members_role', t.role, roles),
    oneOf('members_language', t.language, languages),
    check('members_phone', sql`${t.phoneE164} ~ '^\\+[1-9][0-9]{1,14}$'`),
    companyPolicy('members', t.companyId),
    ownRowsPolicy('members', t.personId),
  ],
);

/** Time a person has marked as taken, by themselves. Companies see it only through app.busy_times. */
export const personBusy = pgTable(
  'person_busy',
  {
    id: uuid('id').primaryKey(),
    personId: uuid('person_id')
      .notNull()
      .references(() => people.id),
    during: instantRange('during').notNull(),
    wholeDays: boolean('whole_days').notNull().default(false),
    note: text('note'),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    index('person_busy_person').on(t.personId),
    check(
      'person_busy_range',
      sql`not isempty(${t.during}) and lower(${t.during}) is not null and upper(${t.during}) is not null`,
    ),
    pgPolicy('person_busy_self', {
      for: 'all',
      to: [appWeb],
      using: sql`${t.personId} = ${currentPerson}`,
      withCheck: sql`${t.personId} = ${currentPerson}`,
    }),
  ],
);
