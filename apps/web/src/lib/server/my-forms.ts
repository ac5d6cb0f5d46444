import type { Database } from '@strikeboard/db/client';
import { Conflict } from '@strikeboard/db/errors';
import { endBusy, markBusy } from '@strikeboard/db/queries/my-calendar';
import { addDays, instantAt, isSiteDay } from '@strikeboard/domain/zone';
import { z } from 'zod';
import type { SignedIn } from '../locals.ts';
import type { Words } from '../words/words.ts';
import { answerAsPerson } from './my-answer.ts';

/** What a form of the page led to: a sentence, and what was typed where it has to be typed again. */
export interface FormResult {
  message: string;
  isError: boolean;
  typed?: Record<string, string>;
}

const answerSchema = z.object({
  companySlug: z.string().min(1).max(60),
  visitId: z.uuid(),
  answer: z.enum(['yes', 'no']),
  seenStartMs: z.coerce.number().int(),
});
const day = z.string().refine(isSiteDay);
const clock = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/);
const busySchema = z.object({
  fromDay: day,
  toDay: day,
  wholeDays: z.literal('on').optional(),
  fromClock: clock.optional(),
  toClock: clock.optional(),
  note: z.string().trim().max(200).optional(),
});

/** Handles one of the forms of the page "My work". */
export async function handleMyForm(
  form: FormData,
  of: { db: Database; person: SignedIn; words: Words; nowMs: number },
): Promise<FormResult> {
  const fields = Object.fromEntries(
    [...form].flatMap(([name, value]) => (typeof value === 'string' && value !== '' ? [[name, value]] : [])),
  );
  switch (fields.form) {
    case 'answer':
      return handleAnswer(fields, of);
    case 'busy':
      return handleBusy(fields, of);
    case 'free':
      await endBusy(of.db, { personId: of.person.id, id: fields.id ?? '', nowMs: of.nowMs });
      return { message: of.words.saved, isError: false };
    default:
      return { message: of.words.didNotWork, isError: true };
  }
}

async function handleAnswer(
  fields: unknown,
  { db, person, words, nowMs }: { db: Database; person: SignedIn; words: Words; nowMs: number },
): Promise<FormResult> {
  const parsed = answerSchema.safeParse(fields);
  if (!parsed.success) return { message: words.didNotWork, isError: true };
  try {
    const outcome = await answerAsPerson(db, { ...parsed.data, personId: person.id, nowMs });
    if (outcome === 'recorded') return { message: words.answerKept, isError: false };
    return { message: outcome === 'not-free' ? words.notFreeThen : words.notOnIt, isError: true };
  } catch (error) {
    if (error instanceof Conflict && error.code === 'changed-since') {
      return { message: words.changedSince, isError: true };
    }
    throw error;
  }
}

async function handleBusy(
  fields: Record<string, string>,
  { db, person, words }: { db: Database; person: SignedIn; words: Words },
): Promise<FormResult> {
  const refused = (message: string) => ({ message, isError: true, typed: fields });
  const parsed = busySchema.safeParse(fields);
  if (!parsed.success) return refused(words.endBeforeStart);
  const { fromDay, toDay, wholeDays, fromClock, toClock, note } = parsed.data;
  const isWhole = wholeDays === 'on';
  const startMs = instantAt(fromDay, isWhole ? 0 : minuteOf(fromClock ?? '00:00'), person.zone);
  const endMs = isWhole
    ? instantAt(addDays(toDay, 1), 0, person.zone)
    : instantAt(toDay, minuteOf(toClock ?? '00:00'), person.zone);
  if (endMs <= startMs) return refused(words.endBeforeStart);
  const { heldShifts } = await markBusy(db, {
    personId: person.id,
    startMs,
    endMs,
    wholeDays: isWhole,
    note: note ?? null,
  });
  const still = heldShifts.length === 0 ? '' : ` ${words.stillOn(heldShifts.length)}`;
  return { message: `${words.saved}${still}`, isError: false };
}

function minuteOf(text: string): number {
  const [hour = 0, minute = 0] = text.split(':').map(Number);
  return hour * 60 + minute;
}
