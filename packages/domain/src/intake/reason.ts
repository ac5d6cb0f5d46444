import type { SiteDay } from '../zone.ts';

/** Reasons that carry no facts beyond the cell itself. */
export const plainReasonCodes = [
  'number',
  'number-comma-style',
  'number-point-style',
  'thickness',
  'length',
  'dimensions',
  'yards',
  'area',
  'placing-rate',
  'date',
  'date-month-first',
  'date-day-first',
  'time',
  'time-range',
  'phone',
  'phone-area-code',
  'phone-only-one',
  'email',
  'yes-no',
  'language',
  'role',
  'finish',
  'placing-method',
  'which-pump',
  'cement',
  'time-zone',
  'latitude',
  'longitude',
  'coordinates',
  'spreadsheet-error',
  'formula-without-result',
  'nothing-above',
  'nearly-empty-row',
  'site-missing',
  'cannot-be-told',
  'no-quantity',
  'approximate',
  'read-comma-decimals',
  'read-day-first',
  'thickness-unusual',
] as const;
export type PlainReasonCode = (typeof plainReasonCodes)[number];

/**
 * Why a cell or row was refused or needs a look, as facts; `words.ts` makes the sentence. Codes are stable.
 * The same union serves errors ("expected ...") and warnings ("read as ...").
 */
export type Reason =
  | { readonly code: PlainReasonCode }
  /** A cell that must not be blank. `field` is the record's field. */
  | { readonly code: 'required'; readonly field: string }
  /** No column is mapped to a field that every record needs; none of the rows can be read. */
  | { readonly code: 'column-required'; readonly field: string }
  | { readonly code: 'out-of-range'; readonly min: number; readonly max: number; readonly unit: string }
  | { readonly code: 'weekday-disagrees'; readonly day: SiteDay }
  | { readonly code: 'longitude-sign'; readonly suggested: string }
  | { readonly code: 'too-many-cells'; readonly count: number; readonly headings: number }
  /** Another line of the file has the same e-mail or phone for another name. */
  | { readonly code: 'email-shared' | 'phone-shared'; readonly line: number }
  /** A repeated row was skipped although `fields` differ from the first one. */
  | { readonly code: 'duplicate-differs'; readonly line: number; readonly fields: readonly string[] }
  | { readonly code: 'job-ref-shared'; readonly line: number }
  /** The cell is blank, or (`column-missing`) the file has no such column; `assumed` was taken. */
  | {
      readonly code: 'assumed' | 'column-missing' | 'read-as' | 'copied-from-above';
      readonly assumed: string;
    }
  | { readonly code: 'year-assumed' | 'day-far'; readonly day: SiteDay }
  /** A time without am or pm, taken as written. `minute` is the minute of the day. */
  | { readonly code: 'half-day-assumed'; readonly minute: number }
  | { readonly code: 'converted'; readonly from: string; readonly to: string }
  | { readonly code: 'left-out' | 'kept-in-notes'; readonly text: string }
  | { readonly code: 'yards-against-size'; readonly orderedYd3: string; readonly computedYd3: string }
  | { readonly code: 'thickness-differs'; readonly other: string };

export type ReasonCode = Reason['code'];

/** What a cell parser returns: the value, perhaps with warnings, or what would have been right. */
export type Parsed<T> =
  | { readonly ok: true; readonly value: T; readonly warnings?: readonly Reason[] }
  | { readonly ok: false; readonly expected: Reason };

export function parsed<T>(value: T, warnings: readonly Reason[] = []): Parsed<T> {
  return warnings.length === 0 ? { ok: true, value } : { ok: true, value, warnings };
}

export function refused(expected: Reason): { readonly ok: false; readonly expected: Reason } {
  return { ok: false, expected };
}
