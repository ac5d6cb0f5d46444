import { bigint, index, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { companyIdColumn, companyPolicy, instant } from './columns.ts';
import { companies } from './company.ts';
import { oneOf } from './one-of.ts';

/** Every change of the board in the order of the company's revision: for streams to resume from and for undo. */
export const boardChanges = pgTable(
  'board_changes',
  {
    companyId: companyIdColumn().references(() => companies.id),
    revision: bigint('revision', { mode: 'number' }).notNull(),
    at: instant('at').notNull().defaultNow(),
    /** Null for what a link's holder, a provider or the worker did. */
    actorPersonId: uuid('actor_person_id'),
    kind: text('kind').notNull(),
    visitIds: uuid('visit_ids').array().notNull(),
    /** Rows as they stand after the change, in the snapshot's shape. */
    patch: jsonb('patch').$type<Record<string, unknown>>().notNull(),
    /** What undo would put back, with the versions it needs; null where it can't be undone. */
    inverse: jsonb('inverse').$type<Record<string, unknown>>(),
    undoneByRevision: bigint('undone_by_revision', { mode: 'number' }),
  },
  (t) => [primaryKey({ columns: [t.companyId, t.revision] }), companyPolicy('board_changes', t.companyId)],
);

/** Who changed what, when, from what to what, and the reason given. Append-only by grant. */
export const audit = pgTable(
  'audit',
  {
    companyId: companyIdColumn().references(() => companies.id),
    id: uuid('id').notNull(),
    at: instant('at').notNull().defaultNow(),
    actorPersonId: uuid('actor_person_id'),
    action: text('action').notNull(),
    subjectKind: text('subject_kind').notNull(),
    subjectId: uuid('subject_id').notNull(),
    before: jsonb('before'),
    after: jsonb('after'),
    reason: text('reason'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('audit_subject').on(t.companyId, t.subjectKind, t.subjectId),
    companyPolicy('audit', t.companyId),
  ],
);

/** Answers already given to a write, so that a repeated Idempotency-Key gets the same one. */
export const idempotencyKeys = pgTable(
  'idempotency_keys',
  {
    companyId: companyIdColumn().references(() => companies.id),
    personId: uuid('person_id').notNull(),
    key: text('key').notNull(),
    requestHash: text('request_hash').notNull(),
    status: integer('status').notNull(),
    body: jsonb('body'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.personId, t.key] }),
    companyPolicy('idempotency_keys', t.companyId),
  ],
);

export const importKinds = ['people', 'crews', 'sites', 'pours'] as const;
export const importStates = ['open', 'accepted', 'discarded'] as const;

/** A spreadsheet brought in: what was read, how its columns are mapped, and what became of it. */
export const imports = pgTable(
  'imports',
  {
    companyId: companyIdColumn().references(() => companies.id),
    id: uuid('id').notNull(),
    version: integer('version').notNull().default(1),
    kind: text('kind', { enum: importKinds }).notNull(),
    fileName: text('file_name').notNull(),
    sheetName: text('sheet_name'),
    encoding: text('encoding').notNull(),
    rows: jsonb('rows').$type<string[][]>().notNull(),
    mapping: jsonb('mapping').$type<Record<string, unknown>[]>().notNull(),
    state: text('state', { enum: importStates }).notNull().default('open'),
    result: jsonb('result').$type<Record<string, unknown>>(),
    createdBy: uuid('created_by').notNull(),
    createdAt: instant('created_at').notNull().defaultNow(),
    acceptedAt: instant('accepted_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    oneOf('imports_kind', t.kind, importKinds),
    oneOf('imports_state', t.state, importStates),
    companyPolicy('imports', t.companyId),
  ],
);
