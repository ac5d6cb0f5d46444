import { sectionShapes } from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
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
import { companyIdColumn, companyPolicy, instant, measure } from './columns.ts';
import { companies } from './company.ts';
import { oneOf } from './one-of.ts';

/** Where concrete goes. */
export const sites = pgTable(
  'sites',
  {
    companyId: companyIdColumn().references(() => companies.id),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    naturalKey: text('natural_key').notNull(),
    address: text('address').notNull(),
    zone: text('zone').notNull(),
    latDeg: doublePrecision('lat_deg'),
    lonDeg: doublePrecision('lon_deg'),
    permittedFromMin: integer('permitted_from_min'),
    permittedUntilMin: integer('permitted_until_min'),
    customerName: text('customer_name'),
    accessNotes: text('access_notes'),
    createdAt: instant('created_at').notNull().defaultNow(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('sites_natural_key').on(t.companyId, t.naturalKey),
    check(
      'sites_position',
      sql`(${t.latDeg} is null) = (${t.lonDeg} is null) and ${t.latDeg} between -90 and 90 and ${t.lonDeg} between -180 and 180`,
    ),
    check(
      'sites_permitted',
      sql`${t.permittedFromMin} is null or ${t.permittedUntilMin} is null or ${t.permittedUntilMin} > ${t.permittedFromMin}`,
    ),
    companyPolicy('sites', t.companyId),
  ],
);

/** An area at a site with its takeoff. Area and volume are those of its sections. */
export const slabs = pgTable(
  'slabs',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    siteId: uuid('site_id').notNull(),
    name: text('name').notNull(),
    thicknessIn: measure('thickness_in').notNull(),
    areaFt2: measure('area_ft2').notNull(),
    volumeYd3: measure('volume_yd3').notNull(),
    base: text('base'),
    vapourRetarder: boolean('vapour_retarder').notNull().default(false),
    reinforcement: text('reinforcement'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('slabs_site').on(t.companyId, t.siteId),
    foreignKey({
      columns: [t.companyId, t.siteId],
      foreignColumns: [sites.companyId, sites.id],
      name: 'slabs_site_fk',
    }),
    check('slabs_sizes', sql`${t.thicknessIn} > 0 and ${t.areaFt2} >= 0 and ${t.volumeYd3} >= 0`),
    companyPolicy('slabs', t.companyId),
  ],
);

/** A part of a slab. Only the measures of its shape are set; points are [[x, y], …] in feet. */
export const sections = pgTable(
  'sections',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    slabId: uuid('slab_id').notNull(),
    position: integer('position').notNull(),
    shape: text('shape', { enum: sectionShapes }).notNull(),
    opening: boolean('opening').notNull().default(false),
    lengthFt: measure('length_ft'),
    widthFt: measure('width_ft'),
    diameterFt: measure('diameter_ft'),
    widthIn: measure('width_in'),
    extraDepthIn: measure('extra_depth_in'),
    thicknessIn: measure('thickness_in'),
    pointsFt: jsonb('points_ft').$type<[number, number][]>(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    unique('sections_position').on(t.companyId, t.slabId, t.position),
    foreignKey({
      columns: [t.companyId, t.slabId],
      foreignColumns: [slabs.companyId, slabs.id],
      name: 'sections_slab_fk',
    }),
    oneOf('sections_shape', t.shape, sectionShapes),
    check(
      'sections_measures',
      sql`case ${t.shape}
        when 'rectangle' then ${t.lengthFt} > 0 and ${t.widthFt} > 0
        when 'circle' then ${t.diameterFt} > 0
        when 'strip' then ${t.lengthFt} > 0 and ${t.widthIn} > 0 and ${t.extraDepthIn} > 0
        else jsonb_array_length(${t.pointsFt}) >= 3 end`,
    ),
    companyPolicy('sections', t.companyId),
  ],
);
