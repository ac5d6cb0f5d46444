import { answers, finishes, visitKinds } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { contract } from '../contract.ts';
import { instantMsSchema, languageSchema } from './common.ts';
import { answerOutcomes } from './me.ts';

/** What a link shows: the shift of one person, and nothing else of the company. */
export const linkPageSchema = z.object({
  companyName: z.string(),
  language: languageSchema,
  personName: z.string(),
  kind: z.enum(visitKinds),
  title: z.string(),
  /** Day at the site. */
  day: z.string(),
  crewStartMs: z.number(),
  firstTruckMs: z.number().nullable(),
  /** IANA zone of the site. */
  zone: z.string(),
  siteName: z.string(),
  address: z.string(),
  accessNotes: z.string().nullable(),
  yards: z.number().nullable(),
  finish: z.enum(finishes).nullable(),
  crewName: z.string().nullable(),
  people: z.array(z.object({ name: z.string(), foreman: z.boolean() })),
  bring: z.array(z.string()),
  cautions: z.array(z.string()),
  answer: z.enum(answers),
  /** `offer`: taking it books the time. */
  relation: z.enum(['shift', 'offer']),
  state: z.enum(['open', 'called-off', 'not-on-it', 'over']),
});
export type LinkPage = z.infer<typeof linkPageSchema>;

export const readLink = contract({
  method: 'GET',
  path: '/api/links/{token}',
  summary: 'What a link from a message opens',
  access: 'open',
  output: linkPageSchema,
});

export const answerLink = contract({
  method: 'POST',
  path: '/api/links/{token}',
  summary: 'Answer yes or no through a link',
  access: 'open',
  body: z.object({ answer: z.enum(['yes', 'no'], 'yes or no'), seenStartMs: instantMsSchema }),
  output: z.object({ outcome: z.enum(answerOutcomes) }),
});
