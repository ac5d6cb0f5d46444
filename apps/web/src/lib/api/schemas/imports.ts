import { fieldsOf, type IntakeField, intakeKinds } from '@strikeboard/domain/intake/fields';
import { z } from 'zod';
import { contract } from '../contract.ts';
import { text, versionSchema } from './common.ts';

const office = ['owner', 'dispatcher'] as const;
const allFields: IntakeField[] = [...new Set(intakeKinds.flatMap((kind) => [...fieldsOf[kind]]))];

/** Largest spreadsheet, bytes. */
export const SHEET_LIMIT_BYTES = 10 * 1024 * 1024;
/** Problems that an answer lists; the counts are of all of them. */
export const LISTED_PROBLEMS = 300;

export const columnSchema = z.object({
  /** From 0. */
  column: z.number().int().min(0),
  heading: z.string(),
  /** null: not imported. */
  field: z.enum(allFields, 'a field of this kind of import').nullable(),
  confidence: z.number(),
  unit: z.enum(['in', 'ft', 'yd', 'mm', 'cm', 'm', 'yd3', 'm3', 'ft2', 'm2']).nullable(),
});
export type Column = z.infer<typeof columnSchema>;

/** A cell or row to look at: an error keeps the row out, a warning does not. */
export const importProblemSchema = z.object({
  /** Row of the sheet as spreadsheet programs number them. */
  line: z.number().int(),
  /** Letter of the column; null: the row as a whole. */
  column: z.string().nullable(),
  /** Name of the field as shown. */
  field: z.string().nullable(),
  value: z.string(),
  expected: z.string(),
  severity: z.enum(['error', 'warning']),
});
export type ImportProblem = z.infer<typeof importProblemSchema>;

const countsSchema = z.object({
  created: z.number().int(),
  updated: z.number().int(),
  unchanged: z.number().int(),
});

export const importSchema = z
  .object({
    id: z.string(),
    version: z.number().int(),
    kind: z.enum(intakeKinds),
    fileName: z.string(),
    sheetName: z.string().nullable(),
    encoding: z.string(),
    state: z.enum(['open', 'accepted', 'discarded']),
    /** What accepting did; null before. */
    result: countsSchema.nullable(),
    /** Row with the headings, counted from 1; null: none was found. */
    headerLine: z.number().int().nullable(),
    rowCount: z.number().int(),
    mapping: z.array(columnSchema),
    /** The first rows under the headings as they stand. */
    sample: z.array(z.array(z.string())),
    /** What accepting would do now. */
    forecast: countsSchema,
    errorCount: z.number().int(),
    warningCount: z.number().int(),
    /** In the order of the file, the first {@link LISTED_PROBLEMS}, errors before warnings. */
    problems: z.array(importProblemSchema),
    skipped: z.array(z.object({ line: z.number().int(), reason: z.string() })),
    /** The first records as they were read, field by field. */
    records: z.array(z.object({ line: z.number().int(), cells: z.record(z.string(), z.string()) })),
    recordCount: z.number().int(),
  })
  .meta({ id: 'Import' });
export type Import = z.infer<typeof importSchema>;

export const uploadImport = contract({
  method: 'POST',
  path: '/api/{slug}/imports',
  summary: 'Read a CSV or XLSX file (the raw bytes); nothing is saved as business until it is accepted',
  access: office,
  query: z.object({
    kind: z.enum(intakeKinds, 'people, crews, sites or pours'),
    name: text(200),
    /** Name of the sheet; left out: the one whose headings fit best. */
    sheet: text(200).optional(),
  }),
  bytes: true,
  limitBytes: SHEET_LIMIT_BYTES,
  output: importSchema.extend({ sheetNames: z.array(z.string()) }),
});

export const readImport = contract({
  method: 'GET',
  path: '/api/{slug}/imports/{id}',
  summary: 'An import as it stands, with everything there is to look at',
  access: office,
  output: importSchema,
});

export const mapImport = contract({
  method: 'PUT',
  path: '/api/{slug}/imports/{id}/mapping',
  summary: 'Say which fields the columns feed',
  access: office,
  body: z.object({
    baseVersion: versionSchema,
    mapping: z
      .array(columnSchema.pick({ column: true, field: true, unit: true }).partial({ unit: true }))
      .max(200, 'at most 200 columns'),
  }),
  output: importSchema,
});

export const acceptImport = contract({
  method: 'POST',
  path: '/api/{slug}/imports/{id}/accept',
  summary: 'Save everything that was read without errors, all or nothing',
  access: office,
  body: z.object({ baseVersion: versionSchema }),
  output: countsSchema,
  idempotent: true,
});

export const discardImport = contract({
  method: 'POST',
  path: '/api/{slug}/imports/{id}/discard',
  summary: 'Put an import aside; nothing of it is kept as business',
  access: office,
  output: z.object({ discarded: z.literal(true) }),
});
