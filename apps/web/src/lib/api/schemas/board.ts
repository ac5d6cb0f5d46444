import { findingCodes } from '@strikeboard/domain/finding';
import { answers, visitKinds } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { contract } from '../contract.ts';
import {
  daySchema,
  idSchema,
  instantMsSchema,
  minutes,
  revisionSchema,
  text,
  versionSchema,
} from './common.ts';
import { boardPatchSchema, snapshotSchema } from './snapshot.ts';

const whoMoves = ['owner', 'dispatcher'] as const;
const whoSees = ['owner', 'dispatcher', 'foreman'] as const;

/** A write's answer: the revision it made, and the rows as they are now. */
export const boardChangeSchema = z.object({ revision: revisionSchema, patch: boardPatchSchema });
export type BoardChange = z.infer<typeof boardChangeSchema>;

/** Reasons by finding code. A caution without one is refused with `reason-needed`. */
export const reasonsSchema = z.partialRecord(z.enum(findingCodes), text(500));

export const readBoard = contract({
  method: 'GET',
  path: '/api/{slug}/board',
  summary: 'The board of some days, with everything that waits',
  access: whoSees,
  query: z.object({
    from: daySchema,
    days: z.coerce
      .number('a number of days')
      .int('whole days')
      .min(1, '1 to 35 days')
      .max(35, '1 to 35 days')
      .default(7),
  }),
  output: snapshotSchema,
});

export const streamBoard = contract({
  method: 'GET',
  path: '/api/{slug}/stream',
  summary: 'Changes of the board as they happen: events `change` (a patch) and `reload` (too far behind)',
  access: whoSees,
  query: z.object({ since: z.coerce.number('a revision').int('a revision').min(0, 'a revision from 0 on') }),
  output: boardPatchSchema,
  answers: 'events',
});

export const placeVisit = contract({
  method: 'POST',
  path: '/api/{slug}/visits/{id}/place',
  summary: "Put a visit on a crew's lane, or move it",
  access: whoMoves,
  body: z.object({
    crewId: idSchema,
    crewStartMs: instantMsSchema,
    pumpId: idSchema.nullable().optional(),
    baseVersion: versionSchema,
    reasons: reasonsSchema.default({}),
  }),
  output: boardChangeSchema,
  idempotent: true,
});

export const returnVisit = contract({
  method: 'POST',
  path: '/api/{slug}/visits/{id}/wait',
  summary: 'Take a visit off the board; it waits again',
  access: whoMoves,
  body: z.object({ baseVersion: versionSchema }),
  output: boardChangeSchema,
  idempotent: true,
});

export const makeVisitFirm = contract({
  method: 'POST',
  path: '/api/{slug}/visits/{id}/firm',
  summary: 'Make a pencilled visit firm; its people are told once it has settled',
  access: whoMoves,
  body: z.object({ baseVersion: versionSchema }),
  output: boardChangeSchema,
  idempotent: true,
});

export const callOffVisit = contract({
  method: 'POST',
  path: '/api/{slug}/visits/{id}/call-off',
  summary: 'Call a visit off; whoever was told of it is told',
  access: whoMoves,
  body: z.object({ baseVersion: versionSchema, reason: text(500) }),
  output: boardChangeSchema,
  idempotent: true,
});

export const undoChange = contract({
  method: 'POST',
  path: '/api/{slug}/changes/{revision}/undo',
  summary: 'Undo a change, if nothing it touched has changed since',
  access: whoMoves,
  output: boardChangeSchema,
  idempotent: true,
});

export const createVisit = contract({
  method: 'POST',
  path: '/api/{slug}/visits',
  summary: 'Add a waiting visit that is no pour',
  access: whoMoves,
  body: z.object({
    kind: z.enum(visitKinds, 'a kind of visit').exclude(['pour'], 'a kind of visit other than pour'),
    siteId: idSchema,
    title: text(120),
    plannedMin: minutes(1440).min(15, 'at least 15 minutes'),
    wantedOn: daySchema.nullable().optional(),
  }),
  output: boardChangeSchema,
  idempotent: true,
});

export const readVisit = contract({
  method: 'GET',
  path: '/api/{slug}/visits/{id}',
  summary: 'Who is on a visit, what they were told, what they answered, and what has happened to it',
  access: whoSees,
  output: z.object({
    people: z.array(
      z.object({
        personId: z.string(),
        name: z.string(),
        role: z.string(),
        state: z.string(),
        answer: z.enum(answers),
        told: z.boolean(),
      }),
    ),
    notices: z.array(
      z.object({
        id: z.string(),
        personName: z.string(),
        channel: z.string(),
        state: z.string(),
        body: z.string(),
        queuedMs: z.number(),
      }),
    ),
    history: z.array(
      z.object({
        id: z.string(),
        atMs: z.number(),
        actorName: z.string().nullable(),
        action: z.string(),
        reason: z.string().nullable(),
      }),
    ),
  }),
});

export const sendNow = contract({
  method: 'POST',
  path: '/api/{slug}/visits/{id}/send-now',
  summary: 'Tell people now instead of when it has settled',
  access: whoMoves,
  output: z.object({ due: z.boolean() }),
  idempotent: true,
});
