/** What can be imported. */
export const intakeKinds = ['people', 'crews', 'sites', 'pours'] as const;
export type IntakeKind = (typeof intakeKinds)[number];

export const peopleFields = [
  'name',
  'firstName',
  'lastName',
  'phone',
  'email',
  'role',
  'crewName',
  'language',
  'skills',
] as const;
export const crewFields = ['name', 'foremanName', 'foremanEmail', 'memberNames'] as const;
export const siteFields = [
  'name',
  'address',
  'city',
  'state',
  'zip',
  'latitude',
  'longitude',
  'coordinates',
  'timeZone',
  'customerName',
  'accessNotes',
  'permittedFrom',
  'permittedUntil',
  'permittedHours',
] as const;
export const pourFields = [
  'siteName',
  'siteAddress',
  'name',
  'wantedOn',
  'orderedYd3',
  'thicknessIn',
  'dimensions',
  'lengthFt',
  'widthFt',
  'areaFt2',
  'finish',
  'placingMethod',
  'mixName',
  'placingRateYd3PerHour',
  'firstLoad',
  'notes',
  'jobRef',
] as const;

/** The fields a column can be mapped to, by kind. */
export const fieldsOf = {
  people: peopleFields,
  crews: crewFields,
  sites: siteFields,
  pours: pourFields,
} as const;
export type IntakeField =
  | (typeof peopleFields)[number]
  | (typeof crewFields)[number]
  | (typeof siteFields)[number]
  | (typeof pourFields)[number];

/** Fields that several columns may feed ("Member 1", "Member 2"; "Notes", "Comments"). */
export const manyColumnFields: ReadonlySet<IntakeField> = new Set<IntakeField>([
  'memberNames',
  'notes',
  'accessNotes',
]);

/** Fields whose cells are quantities; they decide a file's decimal style and recognise totals rows. */
export const quantityFields: ReadonlySet<IntakeField> = new Set<IntakeField>([
  'orderedYd3',
  'thicknessIn',
  'lengthFt',
  'widthFt',
  'areaFt2',
  'placingRateYd3PerHour',
]);

/** Fields of which at least one must have a column; the first stands for them in messages. */
export const neededFields: { readonly [K in IntakeKind]: readonly [IntakeField, ...IntakeField[]] } = {
  people: ['name', 'firstName', 'lastName'],
  crews: ['name'],
  sites: ['address'],
  pours: ['siteName', 'siteAddress'],
};
