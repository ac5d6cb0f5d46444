import { finishes, jointings, placingMethods } from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { companyIdColumn, companyPolicy, instant, measure, yards } from './columns.ts';
import { oneOf } from './one-of.ts';
import { sites, slabs } from './sites.ts';
import { equipment, mixes } from './supply.ts';

/** What is to be placed at a site; when, and by whom, stands on its visits. */
export const pours = pgTable(
  'pours',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    version: integer('version').notNull().default(1),
    siteId: uuid('site_id').notNull(),
    name: text('name').notNull(),
    naturalKey: text('natural_key').notNull(),
    jobRef: text('job_ref'),
    orderedYd3: yards('ordered_yd3').notNull(),
    mixId: uuid('mix_id'),
    finish: text('finish', { enum: finishes }).notNull(),
    placingMethod: text('placing_method', { enum: placingMethods }).notNull(),
    jointing: text('jointing', { enum: jointings }).notNull().default('saw-conventional'),
    placingRateYd3PerHour: yards('placing_rate_yd3_per_hour'),
    loadYd3: yards('load_yd3'),
    setUpMin: integer('set_up_min'),
    concreteTempF: measure('concrete_temp_f'),
    peopleToPlace: integer('people_to_place'),
    peopleToFinish: integer('people_to_finish'),
    pumpId: uuid('pump_id'),
    willCall: boolean('will_call').notNull().default(false),
    readiness: jsonb('readiness').$type<{ item: string; done: boolean }[]>().notNull().default([]),
    notes: text('notes'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('pours_natural_key').on(t.companyId, t.naturalKey),
    index('pours_site').on(t.companyId, t.siteId),
    foreignKey({
      columns: [t.companyId, t.siteId],
      foreignColumns: [sites.companyId, sites.id],
      name: 'pours_site_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.mixId],
      foreignColumns: [mixes.companyId, mixes.id],
      name: 'pours_mix_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.pumpId],
      foreignColumns: [equipment.companyId, equipment.id],
      name: 'pours_pump_fk',
    }),
    oneOf('pours_finish', t.finish, finishes),
    oneOf('pours_placing_method', t.placingMethod, placingMethods),
    oneOf('pours_jointing', t.jointing, jointings),
    check('pours_amounts', sql`${t.orderedYd3} > 0 and ${t.placingRateYd3PerHour} > 0 and ${t.loadYd3} > 0`),
    companyPolicy('pours', t.companyId),
  ],
);

/** The slabs that a pour places. */
export const pourSlabs = pgTable(
  'pour_slabs',
  {
    companyId: companyIdColumn(),
    pourId: uuid('pour_id').notNull(),
    slabId: uuid('slab_id').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.pourId, t.slabId] }),
    foreignKey({
      columns: [t.companyId, t.pourId],
      foreignColumns: [pours.companyId, pours.id],
      name: 'pour_slabs_pour_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.slabId],
      foreignColumns: [slabs.companyId, slabs.id],
      name: 'pour_slabs_slab_fk',
    }),
    companyPolicy('pour_slabs', t.companyId),
  ],
);
