import { z } from 'zod';
import { findingSchema } from './finding.ts';

/** One field of a request that is wrong. */
export const fieldErrorSchema = z.object({
  /** Path of the field, `readiness.0.item`; a header's or parameter's name where it is one. */
  field: z.string(),
  /** What was given, cut to 100 letters; null: it is missing. */
  value: z.unknown(),
  /** What would be right, as the end of the sentence "expected …". */
  expected: z.string(),
});

/** A problem document (RFC 9457). `code` never changes once landed; `type` opens its explanation. */
export const problemSchema = z
  .object({
    type: z.string(),
    title: z.string(),
    status: z.number().int(),
    detail: z.string(),
    code: z.string(),
    errors: z.array(fieldErrorSchema).optional(),
    /** Why a placement was refused. */
    findings: z.array(findingSchema).optional(),
    /** Where it would fit. */
    nearest: z.array(z.object({ crewId: z.string(), crewStartMs: z.number() })).optional(),
    /** What stands there now. */
    current: z.unknown().optional(),
    /** Which fields differ from the version the request was based on. */
    changed: z.array(z.string()).optional(),
    /** Names the request in the server's log. */
    requestId: z.string().optional(),
  })
  .meta({ id: 'Problem' });

export type Problem = z.infer<typeof problemSchema>;
export type FieldError = z.infer<typeof fieldErrorSchema>;
