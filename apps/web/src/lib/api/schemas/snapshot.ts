import { companyRulesSchema } from '@strikeboard/domain/company-rules';
import type { Snapshot } from '@strikeboard/domain/snapshot';
import {
  answers,
  cements,
  equipmentKinds,
  finishes,
  jointings,
  languages,
  offerStates,
  orderStates,
  placingMethods,
  roles,
  shiftStates,
  visitKinds,
  visitStates,
} from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { intervalSchema, revisionSchema } from './common.ts';

/** The board's rows as the domain's snapshot has them. */

const id = z.string();
const number = z.number();
const maybeNumber = z.number().nullable();
const maybeText = z.string().nullable();

export const slabSchema = z.object({
  id,
  siteId: id,
  name: z.string(),
  areaFt2: number,
  thicknessIn: number,
  vapourRetarder: z.boolean(),
});

export const pourSchema = z
  .object({
    id,
    version: number,
    siteId: id,
    name: z.string(),
    jobRef: maybeText,
    slabIds: z.array(id),
    areaFt2: number,
    thicknessIn: maybeNumber,
    vapourRetarder: z.boolean(),
    orderedYd3: number,
    mixId: maybeText,
    finish: z.enum(finishes),
    placingMethod: z.enum(placingMethods),
    jointing: z.enum(jointings),
    placingRateYd3PerHour: maybeNumber,
    loadYd3: maybeNumber,
    setUpMin: maybeNumber,
    concreteTempF: maybeNumber,
    peopleToPlace: maybeNumber,
    peopleToFinish: maybeNumber,
    pumpId: maybeText,
    willCall: z.boolean(),
    readiness: z.array(z.object({ item: z.string(), done: z.boolean() })),
    notes: maybeText,
  })
  .meta({ id: 'Pour' });

export const visitSchema = z
  .object({
    id,
    version: number,
    kind: z.enum(visitKinds),
    state: z.enum(visitStates),
    siteId: id,
    crewId: maybeText,
    pourId: maybeText,
    partYd3: maybeNumber,
    title: z.string(),
    during: intervalSchema.nullable(),
    wantedOn: maybeText,
    plannedMin: number,
    window: intervalSchema.nullable(),
    causedByVisitId: maybeText,
    acceptedCodes: z.array(z.string()),
    untold: z.boolean(),
  })
  .meta({ id: 'Visit' });

export const shiftSchema = z
  .object({
    id,
    visitId: id,
    personId: id,
    during: intervalSchema,
    held: intervalSchema,
    state: z.enum(shiftStates),
    answer: z.enum(answers),
    told: z.boolean(),
  })
  .meta({ id: 'Shift' });

export const offerSchema = z
  .object({ id, visitId: id, personId: id, during: intervalSchema, state: z.enum(offerStates) })
  .meta({ id: 'Offer' });

export const mixOrderSchema = z.object({
  id,
  visitId: id,
  plantId: id,
  mixId: id,
  orderedYd3: number,
  loadYd3: number,
  spacingMin: number,
  during: intervalSchema,
  state: z.enum(orderStates),
});

export const bookingSchema = z.object({
  id,
  visitId: id,
  equipmentId: id,
  during: intervalSchema,
  held: intervalSchema,
  state: z.enum(orderStates),
});

export const snapshotSchema = z
  .object({
    companyId: id,
    revision: revisionSchema,
    zone: z.string(),
    range: intervalSchema,
    rules: companyRulesSchema,
    crews: z.array(z.object({ id, name: z.string(), foremanId: maybeText, sortOrder: number })),
    people: z.array(
      z.object({
        id,
        name: z.string(),
        role: z.enum(roles),
        language: z.enum(languages),
        skills: z.array(z.enum(finishes)),
        hasPhone: z.boolean(),
        hasEmail: z.boolean(),
      }),
    ),
    memberships: z.array(z.object({ crewId: id, personId: id, during: intervalSchema })),
    sites: z.array(
      z.object({
        id,
        name: z.string(),
        address: z.string(),
        zone: z.string(),
        latDeg: maybeNumber,
        lonDeg: maybeNumber,
        permittedFromMin: maybeNumber,
        permittedUntilMin: maybeNumber,
        customerName: maybeText,
        accessNotes: maybeText,
      }),
    ),
    slabs: z.array(slabSchema),
    pours: z.array(pourSchema),
    visits: z.array(visitSchema),
    shifts: z.array(shiftSchema),
    offers: z.array(offerSchema),
    busy: z.array(z.object({ personId: id, during: intervalSchema })),
    plants: z.array(
      z.object({
        id,
        name: z.string(),
        zone: z.string(),
        latDeg: maybeNumber,
        lonDeg: maybeNumber,
        maxYd3PerHour: maybeNumber,
        shortLoadYd3: maybeNumber,
        hours: z.array(z.object({ fromMin: number, untilMin: number }).nullable()),
        closedDays: z.array(z.string()),
      }),
    ),
    mixes: z.array(
      z.object({
        id,
        plantId: id,
        code: z.string(),
        name: z.string(),
        strengthPsi: number,
        slumpIn: maybeNumber,
        cement: z.enum(cements),
        dischargeLimitMin: maybeNumber,
      }),
    ),
    mixOrders: z.array(mixOrderSchema),
    equipment: z.array(
      z.object({
        id,
        kind: z.enum(equipmentKinds),
        name: z.string(),
        boom: z.boolean(),
        reachFt: maybeNumber,
        outputYd3PerHour: maybeNumber,
        setUpMin: number,
        washOutMin: number,
        travelMin: number,
      }),
    ),
    bookings: z.array(bookingSchema),
    weather: z.array(
      z.object({
        siteId: id,
        startMs: number,
        airTempF: number,
        humidityPercent: number,
        windMph: number,
        rainChancePercent: maybeNumber,
      }),
    ),
  })
  .meta({ id: 'Snapshot' }) satisfies z.ZodType<Snapshot>;

/** What one change of the board leaves behind: a client drops the rows of `visitIds` and inserts these. */
export const boardPatchSchema = z
  .object({
    revision: revisionSchema,
    kind: z.string(),
    actorPersonId: maybeText,
    visitIds: z.array(id),
    visits: z.array(visitSchema),
    pours: z.array(pourSchema),
    slabs: z.array(slabSchema),
    shifts: z.array(shiftSchema),
    offers: z.array(offerSchema),
    mixOrders: z.array(mixOrderSchema),
    bookings: z.array(bookingSchema),
  })
  .meta({ id: 'BoardPatch' });
export type BoardPatch = z.infer<typeof boardPatchSchema>;
