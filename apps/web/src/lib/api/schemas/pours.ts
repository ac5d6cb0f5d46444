import { finishes, jointings, placingMethods } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { contract } from '../contract.ts';
import { boardChangeSchema, reasonsSchema } from './board.ts';
import { amount, daySchema, idSchema, minutes, optionalText, text, versionSchema } from './common.ts';

const whole = (min: number, max: number) => amount(min, max).int(`a whole number, ${min} to ${max}`);

/** What can be set of a pour. */
const pourFields = {
  name: text(120),
  jobRef: optionalText(60),
  orderedYd3: amount(0.25, 2000),
  mixId: idSchema.nullable(),
  finish: z.enum(finishes, 'a finish'),
  placingMethod: z.enum(placingMethods, 'a placing method'),
  jointing: z.enum(jointings, 'a way of jointing'),
  placingRateYd3PerHour: amount(1, 400).nullable(),
  loadYd3: amount(0.5, 15).nullable(),
  setUpMin: minutes(1440).nullable(),
  concreteTempF: amount(40, 110).nullable(),
  peopleToPlace: whole(1, 100).nullable(),
  peopleToFinish: whole(1, 100).nullable(),
  pumpId: idSchema.nullable(),
  willCall: z.boolean('true or false'),
  readiness: z
    .array(z.object({ item: text(120), done: z.boolean('true or false') }))
    .max(40, 'at most 40 items'),
  notes: optionalText(2000),
  wantedOn: daySchema.nullable(),
};

export const createPour = contract({
  method: 'POST',
  path: '/api/{slug}/pours',
  summary: 'Add a waiting pour with one slab',
  access: ['owner', 'dispatcher'],
  body: z.object({
    siteId: idSchema,
    ...z.object(pourFields).partial().shape,
    name: pourFields.name,
    orderedYd3: pourFields.orderedYd3,
    finish: pourFields.finish,
    placingMethod: pourFields.placingMethod,
    areaFt2: amount(1, 1_000_000),
    thicknessIn: amount(1, 120),
  }),
  output: boardChangeSchema,
  idempotent: true,
});

export const editPour = contract({
  method: 'PATCH',
  path: '/api/{slug}/pours/{id}',
  summary: 'Change a pour; where it stands on the board it is planned and checked anew',
  access: ['owner', 'dispatcher'],
  body: z.object({
    ...z.object(pourFields).partial().shape,
    baseVersion: versionSchema,
    reasons: reasonsSchema.default({}),
  }),
  output: boardChangeSchema,
  idempotent: true,
});
