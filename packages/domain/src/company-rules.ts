/**
 * What a company can set. Trade constants that no published source fixes are here with a default, so that a
 * company's own experience wins over ours.
 */

import { z } from 'zod';
import { cureUses, finishes, placingMethods } from './vocabulary.ts';

const minutes = z.number().min(0).max(1440);

/** Schema of the stored rules; every field has a default, so `{}` is a company that has set nothing. */
export const companyRulesSchema = z.object({
  units: z.enum(['us', 'metric']).default('us'),
  /** First and last minute of the site's day shown on the board (default 4:00 to 20:00). */
  dayFromMin: minutes.default(240),
  dayUntilMin: minutes.default(1200),
  /** A drop further out than this many days is pencilled. */
  tellingHorizonDays: z.number().int().min(0).max(365).default(7),
  /** Crew's set-up between arrival and the first load, minutes. Common practice, no source. */
  setUpMin: minutes.default(45),
  /** Wash-up after the finishing ends, minutes. Common practice, no source. */
  washUpMin: minutes.default(30),
  /** Yards placed per hour where the pour names no rate. Common practice, no source. */
  placingRateYd3PerHour: z.number().positive().max(400).default(20),
  /** Yards in a full truck. Common practice: 8 to 11, 10 typical. */
  loadYd3: z.number().positive().max(15).default(10),
  /** Minutes to discharge a full truck. Published planning example: 10. */
  unloadMin: minutes.default(10),
  /** Minutes from batching to arrival beyond the road: loading and checking. Published planning example: 5 + 5. */
  batchAndCheckMin: minutes.default(10),
  /** Minutes from water meeting cement to the end of discharge, where the order states none. ASTM C94 before 2021: 90. */
  dischargeLimitMin: z.number().positive().max(600).default(90),
  /** Longest spacing before the placed edge is too stiff to knit, minutes, at 70 °F. Common practice, no source. */
  coldJointMin: z.number().positive().max(600).default(45),
  /** Concrete temperature assumed where the pour names none, °F. */
  concreteTempF: z.number().min(40).max(110).default(70),
  /** Road speed, mph, and road-to-straight-line factor for travel. Common practice, no source. */
  travelMph: z.number().positive().max(80).default(30),
  travelRoadFactor: z.number().min(1).max(3).default(1.3),
  /** Travel minutes where a site has no coordinates. */
  travelUnknownMin: minutes.default(30),
  /** Crew's yard, where the day starts. */
  yardLatDeg: z.number().min(-90).max(90).nullable().default(null),
  yardLonDeg: z.number().min(-180).max(180).nullable().default(null),
  /** Longest shift and least rest between shifts, hours. Common practice, no source. */
  maxShiftHours: z.number().positive().max(24).default(14),
  restHours: z.number().min(0).max(24).default(8),
  /** Waste added to a takeoff, percent, and the plant's order step, yd³. */
  wastePercent: z.number().min(0).max(30).default(5),
  orderStepYd3: z.number().positive().max(5).default(0.25),
  /** Person-hours per ft² by finish, overriding the defaults. */
  workRatesPersonHoursPerFt2: z.partialRecord(z.enum(finishes), z.number().positive().max(1)).default({}),
  /** People who place, per 10 yd³/h, by placing method, overriding the defaults. */
  placersPer10Yd3PerHour: z.partialRecord(z.enum(placingMethods), z.number().positive().max(20)).default({}),
  /** Hours until release by use at 68 °F, overriding the published minimum times. */
  cureHours: z.partialRecord(z.enum(cureUses), z.number().min(0).max(2400)).default({}),
});

/** A company's settings with every default filled in. */
export type CompanyRules = z.infer<typeof companyRulesSchema>;

/** The rules of a company that has set nothing. */
export const defaultCompanyRules: CompanyRules = companyRulesSchema.parse({});
