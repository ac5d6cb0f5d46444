import { answers, offerStates, visitKinds } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { contract } from '../contract.ts';
import { daySchema, idSchema, instantMsSchema, intervalSchema, optionalText } from './common.ts';

/** A shift or an offer of the person, in whatever company. */
export const calendarEntrySchema = z.object({
  kind: z.enum(['shift', 'offer']),
  companySlug: z.string(),
  companyName: z.string(),
  visitId: z.string(),
  visitKind: z.enum(visitKinds),
  title: z.string(),
  crewName: z.string().nullable(),
  siteName: z.string(),
  address: z.string(),
  /** IANA zone of the site, in which the times are read. */
  zone: z.string(),
  during: intervalSchema,
  state: z.union([z.enum(['held', 'declined']), z.enum(offerStates)]),
  answer: z.enum(answers),
});

export const busySchema = z.object({
  id: z.string(),
  during: intervalSchema,
  wholeDays: z.boolean(),
  note: z.string().nullable(),
});

export const readCalendar = contract({
  method: 'GET',
  path: '/api/me/calendar',
  summary: "The person's shifts, offers and marked time in every company",
  access: 'signed-in',
  query: z.object({
    from: daySchema,
    days: z.coerce
      .number('a number of days')
      .int('whole days')
      .min(1, '1 to 62 days')
      .max(62, '1 to 62 days')
      .default(14),
  }),
  output: z.object({ entries: z.array(calendarEntrySchema), busy: z.array(busySchema) }),
});

export const markBusy = contract({
  method: 'POST',
  path: '/api/me/busy',
  summary: 'Mark time as taken; every company sees that it is, and nothing more',
  access: 'signed-in',
  body: z
    .object({
      startMs: instantMsSchema,
      endMs: instantMsSchema,
      wholeDays: z.boolean('true or false'),
      note: optionalText(200).optional(),
    })
    .refine(({ startMs, endMs }) => endMs > startMs, {
      path: ['endMs'],
      message: 'an instant after the start',
    })
    .refine(({ startMs, endMs }) => endMs - startMs <= 400 * 86_400_000, {
      path: ['endMs'],
      message: 'at most 400 days',
    }),
  output: z.object({
    id: z.string(),
    /** Shifts that the person still holds in that time. */
    heldShifts: z.array(calendarEntrySchema),
  }),
});

export const endBusy = contract({
  method: 'POST',
  path: '/api/me/busy/{id}/end',
  summary: 'Make marked time free again',
  access: 'signed-in',
  output: z.object({ ended: z.literal(true) }),
});

/** What became of an answer: kept; the time is taken meanwhile; or there is nothing to answer any more. */
export const answerOutcomes = ['recorded', 'not-free', 'not-asked'] as const;

export const answerVisit = contract({
  method: 'POST',
  path: '/api/me/answers',
  summary: 'Say yes or no to a shift or an offer',
  access: 'signed-in',
  body: z.object({
    companySlug: z.string('a company').min(1, 'a company').max(60, 'a company'),
    visitId: idSchema,
    answer: z.enum(['yes', 'no'], 'yes or no'),
    /** The start that the person was shown; another one now is a conflict. */
    seenStartMs: instantMsSchema,
  }),
  output: z.object({ outcome: z.enum(answerOutcomes) }),
});
