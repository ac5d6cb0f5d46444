import { type Finding, findingCodes, severities } from '@strikeboard/domain/finding';
import { z } from 'zod';
import { intervalSchema } from './common.ts';

const clearingSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('more-people'), people: z.number() }),
  z.object({ kind: z.literal('placing-rate-under'), yd3PerHour: z.number() }),
  z.object({ kind: z.literal('start-by'), atMs: z.number() }),
  z.object({ kind: z.literal('start-after'), atMs: z.number() }),
  z.object({ kind: z.literal('other-crew') }),
  z.object({ kind: z.literal('other-pump') }),
  z.object({ kind: z.literal('other-plant') }),
  z.object({ kind: z.literal('choose-mix') }),
  z.object({ kind: z.literal('spacing-under'), minutes: z.number() }),
  z.object({ kind: z.literal('spacing-over'), minutes: z.number() }),
  z.object({ kind: z.literal('order-at-least'), yd3: z.number() }),
  z.object({ kind: z.literal('man-follow-up'), window: intervalSchema }),
  z.object({ kind: z.literal('make-ready'), items: z.array(z.string()) }),
]);

/** One result of a check, as the domain gives it. */
export const findingSchema = z
  .object({
    code: z.enum(findingCodes),
    severity: z.enum(severities),
    visitId: z.string(),
    against: z.array(
      z.object({
        kind: z.enum(['visit', 'person', 'crew', 'equipment', 'plant', 'site']),
        id: z.string(),
      }),
    ),
    during: intervalSchema.nullable(),
    facts: z.record(z.string(), z.union([z.number(), z.string(), z.boolean(), z.null()])),
    formula: z.string().nullable(),
    source: z.object({
      title: z.string(),
      status: z.enum([
        'published',
        'from memory',
        'common practice, no source',
        'arithmetic',
        'company setting',
      ]),
    }),
    clears: z.array(clearingSchema),
  })
  .meta({ id: 'Finding' }) satisfies z.ZodType<Finding>;
