import type { Tx } from '@strikeboard/db/client';
import { parseEmail, parsePhone } from '@strikeboard/domain/intake/contacts';
import { reasonSentence } from '@strikeboard/domain/intake/words';
import type { Role } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';

/** One control of a set-up form. */
export interface FormField {
  name: string;
  label: string;
  kind:
    | 'text'
    | 'decimal'
    | 'whole'
    | 'clock'
    | 'select'
    | 'checks'
    | 'checkbox'
    | 'lines'
    | 'week-hours'
    | 'zone';
  hint?: string;
  optional?: boolean;
  options?: readonly { value: string; label: string }[];
  /** Stands beside the field before it. */
  half?: boolean;
}

/** What a form holds, as typed: one text per control, several for checks. */
export type FormValues = Readonly<Record<string, string | readonly string[]>>;

/** A row as the list shows it. */
export interface ListedRow {
  id: string;
  cells: readonly string[];
}

export interface SetUpContext {
  nowMs: number;
  /** Role of the person who sets up. */
  role: Role;
  zone: string;
}

/** A kind of thing that a company sets up: how it is listed, and how its form is filled, read and saved. */
export interface SetUpKind {
  title: string;
  one: string;
  about: string;
  headings: readonly string[];
  /** What ending one of them is called; left out: it cannot be ended. */
  endWord?: string;
  rows(tx: Tx, context: SetUpContext): Promise<ListedRow[]>;
  fields(tx: Tx, context: SetUpContext): Promise<FormField[]>;
  /** The form's values for a row, or for a new one. @throws NotFound */
  values(tx: Tx, id: string | null, context: SetUpContext): Promise<FormValues>;
  /** Reads, checks and saves. @returns problems by field; none when it is saved */
  save(tx: Tx, id: string | null, form: FormData, context: SetUpContext): Promise<Record<string, string>>;
  end?(tx: Tx, id: string, context: SetUpContext): Promise<void>;
}

/** Values of a form as typed, so that they stand there again when something is wrong. */
export function typedValues(form: FormData): FormValues {
  const values: Record<string, string | string[]> = {};
  for (const name of new Set(form.keys())) {
    const all = form.getAll(name).filter((value) => typeof value === 'string');
    values[name] = all.length > 1 ? all : (all[0] ?? '');
  }
  return values;
}

/** Fields of a form as an object of texts, blank ones left out; names in `lists` as lists of texts. */
export function formObject(form: FormData, lists: readonly string[] = []): Record<string, unknown> {
  const object: Record<string, unknown> = {};
  for (const [name, value] of form) {
    if (typeof value !== 'string' || value.trim() === '' || lists.includes(name)) continue;
    object[name] = value.trim();
  }
  for (const name of lists) object[name] = form.getAll(name).filter((value) => typeof value === 'string');
  return object;
}

/** The first problem of each field, as a sentence. */
export function problemsOf(error: z.ZodError): Record<string, string> {
  const problems: Record<string, string> = {};
  for (const issue of error.issues) problems[String(issue.path[0] ?? '')] ??= `Expected ${issue.message}.`;
  return problems;
}

export const requiredText = (maxLength: number) =>
  z.string('a text').max(maxLength, `at most ${maxLength} letters`);
export const blankable = (maxLength: number) =>
  z
    .string()
    .max(maxLength, `at most ${maxLength} letters`)
    .optional()
    .transform((text) => text ?? null);

/** A decimal as typed, kept as text so that it stays exact. */
export function decimal(min: number, max: number) {
  const expected = `a number, ${min} to ${max}`;
  return z
    .string(expected)
    .transform((text) => text.replace(/^(\d{1,3}(,\d{3})+)/, (whole) => whole.replaceAll(',', '')))
    .pipe(
      z
        .string()
        .regex(/^-?\d{1,6}(\.\d{1,4})?$/, expected)
        .refine((text) => Number(text) >= min && Number(text) <= max, expected),
    );
}

export function whole(min: number, max: number) {
  const expected = `a whole number, ${min} to ${max}`;
  return decimal(min, max)
    .transform(Number)
    .refine((number) => Number.isInteger(number), expected);
}

export const orNull = <S extends z.ZodType>(schema: S) =>
  schema.optional().transform((value) => value ?? null);

/** A phone number as people write it, in E.164. */
export const phone = parsedBy((text) => parsePhone(text, 'US'), 'phone');
export const email = parsedBy(parseEmail, 'email');

/** `HH:MM` as minutes of the day. */
export const clockMin = z
  .string()
  .regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'a time such as 07:00')
  .transform((text) => Number(text.slice(0, 2)) * 60 + Number(text.slice(3)));

/** Minutes of the day as a time control shows them; '' for none. */
export function clockText(minute: number | null): string {
  if (minute === null) return '';
  const within = minute % 1440;
  return `${String(Math.floor(within / 60)).padStart(2, '0')}:${String(within % 60).padStart(2, '0')}`;
}

type ParsedText = ReturnType<typeof parseEmail>;

function parsedBy(parse: (text: string) => ParsedText, field: string) {
  return z.string().transform((text, context) => {
    const result = parse(text);
    if (result.ok) return result.value;
    const message = reasonSentence(result.expected, 'en', field).replace(/\.$/, '');
    context.addIssue({ code: 'custom', message: message.charAt(0).toLowerCase() + message.slice(1) });
    return z.NEVER;
  });
}
