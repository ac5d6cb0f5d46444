import { languages } from '@strikeboard/domain/vocabulary';
import { isSiteDay, isZone } from '@strikeboard/domain/zone';
import { z } from 'zod';

/** Schemas that several endpoints use. Each message ends the sentence "expected …". */

export const idSchema = z.uuid('an id');
export const instantMsSchema = z
  .number('an instant in epoch milliseconds')
  .int('an instant in whole milliseconds')
  .min(0, 'an instant after 1970')
  .max(4_102_444_800_000, 'an instant before 2100')
  .meta({ description: 'Instant, epoch milliseconds' });
export const daySchema = z
  .string('a day as YYYY-MM-DD')
  .refine(isSiteDay, 'a day as YYYY-MM-DD')
  .meta({ description: 'Day at the site, YYYY-MM-DD' });
export const zoneSchema = z
  .string('an IANA time zone')
  .refine(isZone, 'an IANA time zone such as America/Denver');
export const versionSchema = z.number('the version it was based on').int().min(1, 'a version from 1 on');
export const revisionSchema = z.number().int().min(0);
export const languageSchema = z.enum(languages, 'en or es');

export const intervalSchema = z
  .object({ startMs: z.number(), endMs: z.number() })
  .readonly()
  .meta({ description: 'Half-open stretch of time, epoch milliseconds' });

/** A text without blanks around it, not empty. */
export function text(maxLength: number) {
  return z
    .string('a text')
    .trim()
    .min(1, 'a text that is not blank')
    .max(maxLength, `at most ${maxLength} letters`);
}

/** A text that may be left blank, which is null. */
export function optionalText(maxLength: number) {
  return z
    .string('a text')
    .trim()
    .max(maxLength, `at most ${maxLength} letters`)
    .transform((value) => (value === '' ? null : value))
    .nullable();
}

/** A number in a range, both ends included. */
export function amount(min: number, max: number) {
  const expected = `a number, ${min} to ${max}`;
  return z.number(expected).min(min, expected).max(max, expected);
}

/** Minutes, whole. */
export function minutes(max = 1440) {
  const expected = `whole minutes, 0 to ${max}`;
  return z.number(expected).int(expected).min(0, expected).max(max, expected);
}
