import { cements, equipmentKinds } from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  date,
  doublePrecision,
  foreignKey,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { companyIdColumn, companyPolicy, instant, measure, yards } from './columns.ts';
import { companies } from './company.ts';
import { oneOf } from './one-of.ts';

/** Ready-mix plants. */
export const plants = pgTable(
  'plants',
  {
    companyId: companyIdColumn().references(() => companies.id),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    zone: text('zone').notNull(),
    latDeg: doublePrecision('lat_deg'),
    lonDeg: doublePrecision('lon_deg'),
    maxYd3PerHour: yards('max_yd3_per_hour'),
    shortLoadYd3: yards('short_load_yd3'),
    orderStepYd3: yards('order_step_yd3').notNull().default('0.25'),
    /** Seven entries, Monday first: {fromMin, untilMin} of the plant's day, or null when closed. */
    hours: jsonb('hours').$type<({ fromMin: number; untilMin: number } | null)[]>().notNull(),
    closedDays: date('closed_days', { mode: 'string' }).array().notNull().default(sql`'{}'`),
    orderEmail: text('order_email'),
    orderPhoneE164: text('order_phone_e164'),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('plants_name').on(t.companyId, t.name),
    check('plants_hours', sql`jsonb_array_length(${t.hours}) = 7`),
    companyPolicy('plants', t.companyId),
  ],
);

/** Mixes that a plant carries. */
export const mixes = pgTable(
  'mixes',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    plantId: uuid('plant_id').notNull(),
    code: text('code').notNull(),
    name: text('name').notNull(),
    strengthPsi: integer('strength_psi').notNull(),
    slumpIn: measure('slump_in'),
    cement: text('cement', { enum: cements }).notNull().default('type-i'),
    dischargeLimitMin: integer('discharge_limit_min'),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('mixes_code').on(t.companyId, t.plantId, t.code),
    // Lets a mix order name plant and mix together, so that a mix of another plant cannot be ordered.
    unique('mixes_plant_and_id').on(t.companyId, t.plantId, t.id),
    foreignKey({
      columns: [t.companyId, t.plantId],
      foreignColumns: [plants.companyId, plants.id],
      name: 'mixes_plant_fk',
    }),
    oneOf('mixes_cement', t.cement, cements),
    check('mixes_strength', sql`${t.strengthPsi} > 0`),
    companyPolicy('mixes', t.companyId),
  ],
);

/** What a company owns or hires few of. */
export const equipment = pgTable(
  'equipment',
  {
    companyId: companyIdColumn().references(() => companies.id),
    id: uuid('id').notNull(),
    kind: text('kind', { enum: equipmentKinds }).notNull(),
    name: text('name').notNull(),
    boom: boolean('boom').notNull().default(false),
    reachFt: measure('reach_ft'),
    outputYd3PerHour: yards('output_yd3_per_hour'),
    setUpMin: integer('set_up_min').notNull().default(30),
    washOutMin: integer('wash_out_min').notNull().default(30),
    travelMin: integer('travel_min').notNull().default(30),
    operatorEmail: text('operator_email'),
    operatorPhoneE164: text('operator_phone_e164'),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('equipment_name').on(t.companyId, t.name),
    oneOf('equipment_kind', t.kind, equipmentKinds),
    check('equipment_minutes', sql`${t.setUpMin} >= 0 and ${t.washOutMin} >= 0 and ${t.travelMin} >= 0`),
    companyPolicy('equipment', t.companyId),
  ],
);
