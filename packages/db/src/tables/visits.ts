import {
  answers,
  offerStates,
  orderStates,
  shiftStates,
  visitKinds,
  visitStates,
} from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import {
  type AnyPgColumn,
  check,
  date,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import { companyIdColumn, companyPolicy, instant, instantRange, ownRowsPolicy, yards } from './columns.ts';
import { members } from './company.ts';
import { crews } from './crews.ts';
import { oneOf } from './one-of.ts';
import { pours } from './pours.ts';
import { sites } from './sites.ts';
import { equipment, mixes, plants } from './supply.ts';

const startOf = (range: AnyPgColumn) => sql`lower(${range})`;
const bounded = (range: AnyPgColumn) =>
  sql`(not isempty(${range}) and lower_inc(${range}) and not upper_inc(${range}) and lower(${range}) is not null and upper(${range}) is not null)`;

/** Blocks of a crew's time at a site: what the board shows. */
export const visits = pgTable(
  'visits',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    version: integer('version').notNull().default(1),
    kind: text('kind', { enum: visitKinds }).notNull(),
    state: text('state', { enum: visitStates }).notNull().default('waiting'),
    siteId: uuid('site_id').notNull(),
    crewId: uuid('crew_id'),
    pourId: uuid('pour_id'),
    partYd3: yards('part_yd3'),
    title: text('title').notNull(),
    /** Crew's start until the end of wash-up; null while waiting. */
    during: instantRange('during'),
    // Range operators are not leakproof, so under row-level security only this can be searched by index.
    startsAt: instant('starts_at').generatedAlwaysAs((): ReturnType<typeof sql> => startOf(visits.during)),
    wantedOn: date('wanted_on', { mode: 'string' }),
    plannedMin: integer('planned_min').notNull().default(240),
    window: instantRange('window'),
    causedByVisitId: uuid('caused_by_visit_id'),
    acceptedCodes: text('accepted_codes').array().notNull().default(sql`'{}'`),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('visits_starts_at').on(t.companyId, t.startsAt),
    index('visits_state').on(t.companyId, t.state),
    index('visits_site').on(t.companyId, t.siteId),
    index('visits_pour').on(t.companyId, t.pourId),
    index('visits_caused_by').on(t.companyId, t.causedByVisitId),
    foreignKey({
      columns: [t.companyId, t.siteId],
      foreignColumns: [sites.companyId, sites.id],
      name: 'visits_site_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.crewId],
      foreignColumns: [crews.companyId, crews.id],
      name: 'visits_crew_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.pourId],
      foreignColumns: [pours.companyId, pours.id],
      name: 'visits_pour_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.causedByVisitId],
      foreignColumns: [t.companyId, t.id],
      name: 'visits_caused_by_fk',
    }),
    oneOf('visits_kind', t.kind, visitKinds),
    oneOf('visits_state', t.state, visitStates),
    check(
      'visits_placed',
      sql`${t.state} not in ('pencilled', 'firm', 'done') or (${t.crewId} is not null and ${t.during} is not null)`,
    ),
    check('visits_waiting', sql`${t.state} <> 'waiting' or (${t.crewId} is null and ${t.during} is null)`),
    check(
      'visits_pour_part',
      sql`(${t.kind} = 'pour') = (${t.pourId} is not null and ${t.partYd3} is not null)`,
    ),
    check('visits_during', sql`${t.during} is null or ${bounded(t.during)}`),
    check('visits_planned', sql`${t.plannedMin} > 0`),
    companyPolicy('visits', t.companyId),
  ],
);

/**
 * One person's time on one visit. `held` contains the travel to it; an exclusion constraint over `held` by person
 * alone, across companies, makes a double booking impossible.
 */
export const shifts = pgTable(
  'shifts',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    visitId: uuid('visit_id').notNull(),
    personId: uuid('person_id').notNull(),
    during: instantRange('during').notNull(),
    held: instantRange('held').notNull(),
    startsAt: instant('starts_at').generatedAlwaysAs((): ReturnType<typeof sql> => startOf(shifts.during)),
    state: text('state', { enum: shiftStates }).notNull().default('held'),
    answer: text('answer', { enum: answers }).notNull().default('none'),
    answeredAt: instant('answered_at'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('shifts_visit').on(t.companyId, t.visitId),
    index('shifts_starts_at').on(t.companyId, t.startsAt),
    index('shifts_person').on(t.personId, t.startsAt),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'shifts_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.personId],
      foreignColumns: [members.companyId, members.personId],
      name: 'shifts_person_fk',
    }),
    oneOf('shifts_state', t.state, shiftStates),
    oneOf('shifts_answer', t.answer, answers),
    check('shifts_ranges', sql`${bounded(t.during)} and ${bounded(t.held)} and ${t.held} @> ${t.during}`),
    companyPolicy('shifts', t.companyId),
    ownRowsPolicy('shifts', t.personId),
  ],
);

/** Shifts put to subs. They hold no time. */
export const offers = pgTable(
  'offers',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    visitId: uuid('visit_id').notNull(),
    personId: uuid('person_id').notNull(),
    during: instantRange('during').notNull(),
    held: instantRange('held').notNull(),
    startsAt: instant('starts_at').generatedAlwaysAs((): ReturnType<typeof sql> => startOf(offers.during)),
    state: text('state', { enum: offerStates }).notNull().default('open'),
    answeredAt: instant('answered_at'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('offers_visit').on(t.companyId, t.visitId),
    index('offers_starts_at').on(t.companyId, t.startsAt),
    index('offers_person').on(t.personId, t.startsAt),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'offers_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.personId],
      foreignColumns: [members.companyId, members.personId],
      name: 'offers_person_fk',
    }),
    oneOf('offers_state', t.state, offerStates),
    check('offers_ranges', sql`${bounded(t.during)} and ${bounded(t.held)} and ${t.held} @> ${t.during}`),
    companyPolicy('offers', t.companyId),
    ownRowsPolicy('offers', t.personId),
  ],
);

/** What is asked of a plant for one visit. */
export const mixOrders = pgTable(
  'mix_orders',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    visitId: uuid('visit_id').notNull(),
    plantId: uuid('plant_id').notNull(),
    mixId: uuid('mix_id').notNull(),
    orderedYd3: yards('ordered_yd3').notNull(),
    loadYd3: yards('load_yd3').notNull(),
    spacingMin: yards('spacing_min').notNull(),
    during: instantRange('during').notNull(),
    startsAt: instant('starts_at').generatedAlwaysAs((): ReturnType<typeof sql> => startOf(mixOrders.during)),
    state: text('state', { enum: orderStates }).notNull().default('drafted'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('mix_orders_visit').on(t.companyId, t.visitId),
    index('mix_orders_starts_at').on(t.companyId, t.startsAt),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'mix_orders_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.plantId],
      foreignColumns: [plants.companyId, plants.id],
      name: 'mix_orders_plant_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.plantId, t.mixId],
      foreignColumns: [mixes.companyId, mixes.plantId, mixes.id],
      name: 'mix_orders_mix_fk',
    }),
    oneOf('mix_orders_state', t.state, orderStates),
    check('mix_orders_during', bounded(t.during)),
    check('mix_orders_amounts', sql`${t.orderedYd3} > 0 and ${t.loadYd3} > 0 and ${t.spacingMin} > 0`),
    companyPolicy('mix_orders', t.companyId),
  ],
);

/**
 * A piece of equipment's time on one visit. `held` contains travel, set-up and wash-out; an exclusion constraint
 * over `held` by piece makes a double booking impossible.
 */
export const equipmentBookings = pgTable(
  'equipment_bookings',
  {
    companyId: companyIdColumn(),
    id: uuid('id').notNull(),
    visitId: uuid('visit_id').notNull(),
    equipmentId: uuid('equipment_id').notNull(),
    during: instantRange('during').notNull(),
    held: instantRange('held').notNull(),
    startsAt: instant('starts_at').generatedAlwaysAs(
      (): ReturnType<typeof sql> => startOf(equipmentBookings.during),
    ),
    state: text('state', { enum: orderStates }).notNull().default('drafted'),
    createdAt: instant('created_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.companyId, t.id] }),
    index('equipment_bookings_visit').on(t.companyId, t.visitId),
    index('equipment_bookings_starts_at').on(t.companyId, t.startsAt),
    foreignKey({
      columns: [t.companyId, t.visitId],
      foreignColumns: [visits.companyId, visits.id],
      name: 'equipment_bookings_visit_fk',
    }),
    foreignKey({
      columns: [t.companyId, t.equipmentId],
      foreignColumns: [equipment.companyId, equipment.id],
      name: 'equipment_bookings_equipment_fk',
    }),
    oneOf('equipment_bookings_state', t.state, orderStates),
    check(
      'equipment_bookings_ranges',
      sql`${bounded(t.during)} and ${bounded(t.held)} and ${t.held} @> ${t.during}`,
    ),
    companyPolicy('equipment_bookings', t.companyId),
  ],
);
