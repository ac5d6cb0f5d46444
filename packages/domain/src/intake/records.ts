import type { Finish, Language, PlacingMethod, Role } from '../vocabulary.ts';
import type { SiteDay } from '../zone.ts';
import type { IntakeKind } from './fields.ts';
import type { DecimalText } from './ratio.ts';
import type { Reason } from './reason.ts';
import type { Rectangle } from './values.ts';

/** Every record carries the line it came from and a key that stays the same when the file is imported again. */
interface RecordBase {
  readonly naturalKey: string;
  /** Row of the sheet, counted from 1 as spreadsheet programs show it. */
  readonly line: number;
}

export interface PersonRecord extends RecordBase {
  readonly name: string;
  readonly phoneE164: string | null;
  readonly email: string | null;
  readonly role: Role;
  readonly crewName: string | null;
  /** Null: not said. */
  readonly language: Language | null;
  /** Empty: any. */
  readonly skills: readonly Finish[];
}

export interface CrewRecord extends RecordBase {
  readonly name: string;
  readonly foremanName: string | null;
  readonly foremanEmail: string | null;
  readonly memberNames: readonly string[];
}

export interface SiteRecord extends RecordBase {
  readonly name: string;
  /** Street, city, state and zip in one line. */
  readonly address: string;
  readonly latDeg: number | null;
  readonly lonDeg: number | null;
  /** IANA name; null: the company's own zone. */
  readonly timeZone: string | null;
  readonly customerName: string | null;
  readonly accessNotes: string | null;
  /** Minutes of the site's day, half-open; until may be below from (night work). Null: no limit. */
  readonly permittedFromMin: number | null;
  readonly permittedUntilMin: number | null;
}

export interface PourRecord extends RecordBase {
  readonly siteName: string | null;
  readonly siteAddress: string | null;
  readonly name: string;
  readonly wantedOn: SiteDay | null;
  readonly orderedYd3: DecimalText | null;
  readonly thicknessIn: DecimalText | null;
  readonly dimensions: readonly Rectangle[];
  readonly areaFt2: DecimalText | null;
  readonly finish: Finish;
  readonly placingMethod: PlacingMethod;
  readonly mixName: string | null;
  readonly placingRateYd3PerHour: DecimalText | null;
  /** Minute of the site's day at which the first truck is wanted. */
  readonly firstLoadMin: number | null;
  readonly notes: string | null;
  readonly jobRef: string | null;
}

export interface RecordOf {
  readonly people: PersonRecord;
  readonly crews: CrewRecord;
  readonly sites: SiteRecord;
  readonly pours: PourRecord;
}

/** One thing to look at. An error keeps its row out of the records, a warning does not. */
export interface IntakeProblem {
  readonly line: number;
  /** Counted from 0; null: the row as a whole, or a column that the file does not have. */
  readonly column: number | null;
  readonly field: string | null;
  /** The cell as it stands in the file. */
  readonly value: string;
  /** What would be right (error), or how the cell was read (warning). */
  readonly expected: Reason;
  readonly severity: 'error' | 'warning';
}

export const skipReasons = ['blank', 'totals', 'duplicate', 'repeated heading'] as const;
export type SkipReason = (typeof skipReasons)[number];
export interface SkippedRow {
  readonly line: number;
  readonly reason: SkipReason;
}

export interface ReadRows<K extends IntakeKind> {
  readonly records: readonly RecordOf[K][];
  readonly problems: readonly IntakeProblem[];
  readonly skipped: readonly SkippedRow[];
}
