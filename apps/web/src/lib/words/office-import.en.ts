/** English words of the import: choosing a file, its columns, what is wrong with it, and accepting it. */

import type { IntakeKind } from '@strikeboard/domain/intake/fields';

interface KindWords {
  one: string;
  many: string;
  Many: string;
  /** What its file should say. */
  columns: string;
}

const kinds: Readonly<Record<IntakeKind, KindWords>> = {
  people: {
    one: 'person',
    many: 'people',
    Many: 'People',
    columns: 'Name, phone, e-mail, role, crew, language, finishes they can do',
  },
  crews: { one: 'crew', many: 'crews', Many: 'Crews', columns: 'Crew, foreman, members' },
  sites: {
    one: 'site',
    many: 'sites',
    Many: 'Sites',
    columns: 'Name, address, coordinates, time zone, permitted hours, customer, access notes',
  },
  pours: {
    one: 'pour',
    many: 'pours',
    Many: 'Waiting pours',
    columns:
      'Site, slab, day wanted, yards, thickness, size, finish, placing method, mix, first truck, notes',
  },
};

const counted = (kind: IntakeKind, count: number) =>
  `${count} ${count === 1 ? kinds[kind].one : kinds[kind].many}`;

export const importWords = {
  title: 'Import',
  about:
    'Bring in the spreadsheets you have: people first, then crews, sites and pours. Nothing is saved before you accept it, and the same file twice adds nothing twice.',
  kinds,

  whatIsInIt: 'What is in the file?',
  chooseFile: 'Choose a CSV or XLSX file',
  dropHint: 'Or drop it here. Columns may stand in any order and be called what you call them. Up to 10 MB.',
  reading: (fileName: string) => `Reading ${fileName}… A file of 5,000 rows takes a few seconds.`,

  willHappen: 'What will happen',
  rows: (kind: IntakeKind, rows: number) => `${kinds[kind].Many}, ${rows} rows`,
  noHeadings: ', no row looks like headings',
  headingsIn: (line: number) => `, headings in row ${line}`,
  skippedOf: (rows: number) => `, ${rows} rows skipped`,
  willBeAdded: (kind: IntakeKind, count: number) => `${counted(kind, count)} will be added`,
  filledIn: (count: number) => `${count} filled in`,
  hereAlready: (count: number) => `${count} are here already`,
  keptOut: (cells: number) => `${cells} ${cells === 1 ? 'cell keeps its row' : 'cells keep their rows'} out.`,
  sheet: 'Sheet',
  putAside: 'Put aside',
  acceptAll: (records: number) => `Accept all ${records}`,
  acceptOthers: (records: number) => `Accept the other ${records}`,

  added: (kind: IntakeKind, count: number) => `${counted(kind, count)} added`,
  wasFilledIn: (count: number) => `${count} filled in. `,
  leftAsTheyAre: (count: number) => `${count} here already, left as they are.`,
  next: (kind: IntakeKind) => `Next: ${kinds[kind].many}`,
  toBoard: 'To the board',

  columns: 'Columns',
  columnsToLookAt: (count: number) => (count === 1 ? 'one to look at' : `${count} to look at`),
  inTheFile: 'In the file',
  firstRows: 'First rows',
  is: 'Is',
  noHeading: 'no heading',
  whatIs: (heading: string) => `What "${heading}" is`,
  columnAt: (position: number) => `column ${position}`,
  notImported: 'Not imported',
  lookAtIt: 'Look at it',
  inUnit: (unit: string) => `in ${unit}`,

  toLookAt: 'To look at',
  counts: (errors: number, warnings: number) =>
    `${errors} ${errors === 1 ? 'error' : 'errors'}, ${warnings} ${warnings === 1 ? 'warning' : 'warnings'}`,
  nothingWrong: 'Nothing. Every row was read as it stands.',
  line: 'Line',
  column: 'Column',
  field: 'Field',
  expected: 'Expected, or how it was read',
  error: 'Error',
  warning: 'Warning',
  andMore: (count: number) => `And ${count} more.`,
  rowsSkipped: (rows: number) => `${rows} ${rows === 1 ? 'row was' : 'rows were'} skipped`,
  skippedLine: (line: number, reason: string) => `Line ${line}: ${reason}`,

  asRead: 'As it was read',
  firstOf: (shown: number, all: number) => `the first ${shown} of ${all}`,
};
