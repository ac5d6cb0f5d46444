import { channels, noticeStates } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { contract } from '../contract.ts';
import { idSchema } from './common.ts';

export const noticeSchema = z
  .object({
    id: z.string(),
    visitId: z.string(),
    visitTitle: z.string(),
    personId: z.string(),
    personName: z.string(),
    channel: z.enum(channels),
    toAddress: z.string(),
    subject: z.string().nullable(),
    /** The exact words. */
    body: z.string(),
    state: z.enum(noticeStates),
    errorCode: z.string().nullable(),
    /** What went wrong, in a sentence; null: nothing. */
    error: z.string().nullable(),
    attempts: z.number(),
    queuedMs: z.number(),
    sentMs: z.number().nullable(),
    deliveredMs: z.number().nullable(),
  })
  .meta({ id: 'Notice' });
export type NoticeView = z.infer<typeof noticeSchema>;

export const listNotices = contract({
  method: 'GET',
  path: '/api/{slug}/notices',
  summary: 'Notices with their state and exact words, newest first',
  access: ['owner', 'dispatcher'],
  query: z.object({ before: idSchema.optional(), state: z.enum(noticeStates).optional() }),
  output: z.object({ notices: z.array(noticeSchema), hasMore: z.boolean() }),
});
