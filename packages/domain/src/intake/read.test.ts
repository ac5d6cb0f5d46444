import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputProblem } from '../problem.ts';
import { type IntakeKind, intakeKinds } from './fields.ts';
import { readHeadings, suggestMapping } from './headings.ts';
import { readRows } from './read.ts';
import type { ReadOptions } from './reading.ts';
import type { IntakeProblem, ReadRows } from './records.ts';

// The company is in Denver; sites below name Phoenix and Chicago, and nothing depends on the machine's zone.
const options: ReadOptions = { referenceDay: '2026-12-01', zone: 'America/Denver', country: 'US' };

function read<K extends IntakeKind>(kind: K, table: string[][]): ReadRows<K> {
  const headings = readHeadings(kind, table);
  if (headings === null) throw new Error('the table of this test has no headings');
  return readRows(kind, table, headings.mapping, options);
}
const brief = (problems: readonly IntakeProblem[]): string[] =>
  problems.map((one) => `${one.severity} ${one.line}:${one.column ?? '-'} ${one.expected.code}`);

describe('people', () => {
  it('reads the usual columns in any order', () => {
    const result = read('people', [
      ['Cell', 'Nombre', 'Correo', 'Puesto', 'Cuadrilla', 'Idioma', 'Acabados'],
      [
        '(970) 555-0141',
        'Castañeda, José',
        'Jose@Example.com',
        'capataz',
        'Norte',
        'Español',
        'broom, stamped',
      ],
      ['970.555.0142', 'Mara Lind', '', '', '', '', ''],
    ]);
    expect(result.records).toEqual([
      {
        naturalKey: 'email:jose@example.com',
        line: 2,
        name: 'José Castañeda',
        phoneE164: '+19705550141',
        email: 'jose@example.com',
        role: 'foreman',
        crewName: 'Norte',
        language: 'es',
        skills: ['broom', 'stamped'],
      },
      {
        naturalKey: 'phone:+19705550142',
        line: 3,
        name: 'Mara Lind',
        phoneE164: '+19705550142',
        email: null,
        role: 'finisher',
        crewName: null,
        language: null,
        skills: [],
      },
    ]);
    expect(brief(result.problems)).toEqual(['warning 3:3 assumed']);
  });

  it('names every bad cell by line and column and keeps its row out', () => {
    const result = read('people', [
      ['Title row'],
      [],
      ['First name', 'Last name', 'Phone', 'E-mail', 'Role'],
      ['Bo', 'Lind', '555-0143', 'bo@example', 'pilot'],
      ['', '', '970-555-0144', '', 'sub'],
      ['Ana', 'Ruiz', '970-555-0145', '', 'sub'],
    ]);
    expect(brief(result.problems)).toEqual([
      'error 4:2 phone-area-code',
      'error 4:3 email',
      'error 4:4 role',
      'error 5:- required',
    ]);
    expect(result.problems[1]?.value).toBe('bo@example');
    expect(result.records.map((one) => one.name)).toEqual(['Ana Ruiz']);
  });

  it('skips repeats, and says when a repeat says something else', () => {
    const result = read('people', [
      ['Name', 'Phone', 'Email', 'Role'],
      ['Ana Ruiz', '970-555-0145', 'ana@example.com', 'sub'],
      ['ANA  RUIZ', '(970) 555-0145', 'Ana@example.com', 'sub'],
      ['Ana Ruiz', '970-555-0145', '', 'sub'],
      ['Ana Ruiz', '970-555-0146', 'ana@example.com', 'sub'],
      ['Name', 'Phone', 'Email', 'Role'],
      ['Bo Lind', '970-555-0145', 'bo@example.com', 'sub'],
      ['Cy Dent', '970-555-0147', 'bo@example.com', 'sub'],
      ['', '-', '', ''],
    ]);
    expect(result.skipped).toEqual([
      { line: 3, reason: 'duplicate' },
      { line: 4, reason: 'duplicate' },
      { line: 5, reason: 'duplicate' },
      { line: 6, reason: 'repeated heading' },
      { line: 9, reason: 'blank' },
    ]);
    expect(brief(result.problems)).toEqual([
      'warning 3:- duplicate-differs',
      'warning 5:- duplicate-differs',
      'warning 7:- phone-shared',
      'error 8:- email-shared',
    ]);
    expect(result.records.map((one) => one.line)).toEqual([2, 7]);
  });
});

describe('crews', () => {
  const right = [
    {
      naturalKey: 'norte',
      line: 2,
      name: 'Norte',
      foremanName: 'José Castañeda',
      foremanEmail: 'jose@example.com',
      memberNames: ['Ana Ruiz', 'Bo Lind'],
    },
  ];
  it('reads one row per crew with members in one cell or in several', () => {
    const headings = ['Crew', 'Foreman', 'Foreman email'];
    const row = ['Norte', 'Castañeda, José', 'jose@example.com'];
    expect(
      read('crews', [
        [...headings, 'Members'],
        [...row, 'Ana Ruiz, Bo Lind'],
      ]).records,
    ).toEqual(right);
    expect(
      read('crews', [
        [...headings, 'Member 1', 'Member 2'],
        [...row, 'Ana Ruiz', 'Lind, Bo'],
      ]).records,
    ).toEqual(right);
  });

  it('joins one row per member', () => {
    const result = read('crews', [
      ['Crew', 'Foreman', 'Foreman email', 'Finisher'],
      ['Norte', 'José Castañeda', 'jose@example.com', 'Ana Ruiz'],
      ['NORTE', '"', '', 'Bo Lind'],
      ['Norte', '', '', 'ana ruiz'],
      ['Norte', 'Someone Else', '', ''],
    ]);
    expect(result.records).toMatchObject([{ ...right[0], memberNames: expect.arrayContaining(['Bo Lind']) }]);
    expect(result.records[0]?.memberNames).toHaveLength(2);
    expect(brief(result.problems)).toEqual([
      'warning 3:1 copied-from-above',
      'warning 5:- duplicate-differs',
    ]);
  });
});

describe('sites', () => {
  it('folds the address, and takes place, zone and hours', () => {
    const result = read('sites', [
      ['Job', 'Address', 'City', 'State', 'Zip', 'Lat', 'Lon', 'Tz', 'Customer', 'Access', 'Hours'],
      [
        'Lot 4',
        '1410 Larkbunting Dr',
        'Loveland',
        'CO',
        '80537',
        '40.4',
        '-105.1',
        'MST',
        'Tamarisk Homes',
        'gate 4411',
        '7-5',
      ],
      [
        'Lot 5',
        '12 Loveland Ave, Fort Collins, CO 80521',
        'Fort Collins',
        'CO',
        '80521',
        '',
        '',
        'America/Phoenix',
        '',
        '',
        '22:00-05:00',
      ],
      ['Lot 6', '3 Loveland Ave', 'Loveland', 'CO', '', '', '', 'Central', '', '', 'any'],
      ['', '9 Quarry Rd', '', '', '', '40.5', '', '', '', '', ''],
      ['Lot 7', '', '', '', '', '40.5', '105.1', '', '', '', '7-7'],
    ]);
    expect(result.records).toMatchObject([
      {
        name: 'Lot 4',
        address: '1410 Larkbunting Dr, Loveland, CO 80537',
        latDeg: 40.4,
        lonDeg: -105.1,
        timeZone: 'America/Denver',
        customerName: 'Tamarisk Homes',
        accessNotes: 'gate 4411',
        permittedFromMin: 420,
        permittedUntilMin: 1020,
      },
      {
        address: '12 Loveland Ave, Fort Collins, CO 80521',
        latDeg: null,
        timeZone: 'America/Phoenix',
        permittedFromMin: 1320,
        permittedUntilMin: 300,
      },
      {
        address: '3 Loveland Ave, Loveland, CO',
        timeZone: 'America/Chicago',
        permittedFromMin: null,
        permittedUntilMin: null,
      },
    ]);
    expect(brief(result.problems)).toEqual([
      'warning 4:7 read-as',
      'warning 5:0 assumed',
      'error 5:6 required',
      'error 6:1 required',
      'error 6:6 longitude-sign',
    ]);
  });
});

describe('pours', () => {
  const headings = [
    'Job #',
    'Job',
    'Slab',
    'Wanted',
    'Yds',
    'Thk',
    'Size',
    'Finish',
    'Placing',
    'Truck time',
    'Notes',
  ];

  it('reads what contractors type', () => {
    const result = read('pours', [
      headings,
      [
        '24-118',
        'Lot 4',
        'Driveway',
        '12/8/2026',
        '11 yd',
        '4"',
        "22' x 40'",
        'Broom w/ picture frame',
        'off the truck',
        '6:30 AM',
        'wash out in the bin',
      ],
      ['', 'Lot 5', '', '', '', '', '', 'stamped', 'line pump', '', 'size to come'],
    ]);
    expect(result.records).toEqual([
      {
        naturalKey: 'ref:24 118|driveway',
        line: 2,
        siteName: 'Lot 4',
        siteAddress: null,
        name: 'Driveway',
        wantedOn: '2026-12-08',
        orderedYd3: '11',
        thicknessIn: '4',
        dimensions: [{ lengthFt: '22', widthFt: '40' }],
        areaFt2: null,
        finish: 'broom',
        placingMethod: 'chute',
        mixName: null,
        placingRateYd3PerHour: null,
        firstLoadMin: 390,
        notes: 'wash out in the bin; Broom w/ picture frame',
        jobRef: '24-118',
      },
      expect.objectContaining({
        naturalKey: 'pour:lot 5|lot 5||',
        name: 'Lot 5',
        orderedYd3: null,
        notes: 'size to come',
      }),
    ]);
    expect(brief(result.problems)).toEqual(['warning 2:7 kept-in-notes', 'warning 3:- no-quantity']);
  });

  it('passes over totals in words and sums without words', () => {
    const result = read('pours', [
      ['Job', 'Date', 'Yds', 'SF', 'Finish', 'Placing'],
      ['Lot 4', '12/8/2026', '11', '880', 'broom', 'chute'],
      ['Lot 5', '12/9/2026', '7.5', '600', 'broom', 'chute'],
      ['Total yds', '', '18.5', '', '', ''],
      ['', '', '18.5', '1,480', '', ''],
      ['Lot 6', '12/9/2026', '18.5', '', 'broom', 'chute'],
      ['Grand total:', '', '37 yd', '1,480', '', ''],
    ]);
    expect(result.skipped).toEqual([4, 5, 7].map((line) => ({ line, reason: 'totals' })));
    expect(result.records.map((one) => one.line)).toEqual([2, 3, 6]);
  });

  it('says once per file what was taken for a missing column', () => {
    const result = read('pours', [
      ['Job', 'Yds'],
      ['Lot 4', '11'],
      ['Lot 5', '12'],
    ]);
    expect(brief(result.problems)).toEqual(['warning 1:- column-missing', 'warning 1:- column-missing']);
    expect(result.records).toMatchObject([{ finish: 'broom', placingMethod: 'chute' }, { finish: 'broom' }]);
  });

  it('reads a file of decimal commas and days first, and says so', () => {
    const result = read('pours', [
      ['Obra', 'Fecha', 'Yardas', 'Espesor', 'Acabado', 'Colocación'],
      ['Lote 4', '28/12/2026', '24,5', '4"', 'escobillado', 'canaleta'],
      ['Lote 5', '1/12/2026', '1.250,5', '4"', 'pulido', 'bomba pluma'],
    ]);
    expect(result.records).toMatchObject([
      { wantedOn: '2026-12-28', orderedYd3: '24.5', finish: 'broom' },
      { wantedOn: '2026-12-01', orderedYd3: '1250.5', finish: 'hard-trowel', placingMethod: 'boom-pump' },
    ]);
    expect(brief(result.problems)).toEqual(['warning 2:1 read-day-first', 'warning 2:2 read-comma-decimals']);
  });

  it('refuses days that contradict the file', () => {
    const result = read('pours', [
      ['Job', 'Date', 'Yds'],
      ['A', '12/28/2026', '5'],
      ['B', '28/12/2026', '5'],
    ]);
    expect(brief(result.problems).filter((one) => one.startsWith('error'))).toEqual([
      'error 3:1 date-month-first',
    ]);
  });

  it('reads bare numbers in the unit of the heading', () => {
    const result = read('pours', [
      ['Job', 'Vol (m3)', 'Thk (mm)', 'Area (m2)', 'Finish', 'Placing'],
      ['Lot 4', '8.4', '100', '82', 'broom', 'chute'],
    ]);
    // 8.4 m3 = 10.99 yd3, 100 mm = 3.937 in, 82 m2 = 882.64 ft2 (NIST SP 811).
    expect(result.records).toMatchObject([{ orderedYd3: '10.99', thicknessIn: '3.937', areaFt2: '882.64' }]);
  });

  it('holds the yards against the size', () => {
    const pour = (yards: string): string[] => ['Lot 4', yards, '4', '22x40', 'broom', 'chute'];
    const codes = (yards: string): string[] =>
      brief(read('pours', [['Job', 'Yds', 'Thk', 'Size', 'Finish', 'Placing'], pour(yards)]).problems);
    // 22 x 40 x 4 / 324 = 10.864 yd3; 95 percent of it is 10.321, 200 percent 21.728.
    expect(codes('10.33')).toEqual([]);
    expect(codes('10.32')).toEqual(['warning 2:1 yards-against-size']);
    expect(codes('21.7')).toEqual([]);
    expect(codes('32')).toEqual(['warning 2:1 yards-against-size']);
  });

  it('keeps several pours of one job apart and skips only true repeats', () => {
    const result = read('pours', [
      headings,
      ['118', 'Lot 4', 'Drive', '12/8/2026', '11', '', '', 'broom', 'chute', '', ''],
      ['118', 'Lot 4', 'Walk', '12/8/2026', '3', '', '', 'broom', 'chute', '', ''],
      ['118', 'Lot 4', 'Drive', '12/9/2026', '11', '', '', 'broom', 'chute', '', ''],
      ['118', 'LOT 4', 'drive', '12/8/26', '11.0', '', '', 'broom', 'chute', '', ''],
    ]);
    expect(result.records.map((one) => one.naturalKey)).toEqual([
      'ref:118|drive|2026-12-08|11',
      'ref:118|walk',
      'ref:118|drive|2026-12-09|11',
    ]);
    expect(result.skipped).toEqual([{ line: 5, reason: 'duplicate' }]);
  });

  it('refuses rows that slipped out of their columns', () => {
    const result = read('pours', [
      ['Job', 'Yds', 'Date'],
      ['1410 Larkbunting Dr', 'Loveland', '11', '12/8/2026'],
      ['WEEK OF 12/8', '', ''],
      ['Lot 4', '#REF!', '12/8/2026'],
      ['Lot 5', '=A1+1', '12/8/2026'],
      ['', '11', '12/8/2026'],
    ]);
    expect(brief(result.problems).filter((one) => one.startsWith('error'))).toEqual([
      'error 2:- too-many-cells',
      'error 2:1 yards',
      'error 2:2 date',
      'error 3:- nearly-empty-row',
      'error 4:1 spreadsheet-error',
      'error 5:1 formula-without-result',
      'error 6:0 site-missing',
    ]);
    expect(result.records).toEqual([]);
  });
});

describe('any file', () => {
  const cell = fc.oneof(
    fc.string({ unit: 'grapheme' }),
    fc.constantFrom(
      'Total',
      '"',
      '12/8/2026',
      '22x40',
      "4''",
      '1,250',
      '24,5',
      '#REF!',
      '970-555-0101',
      'broom',
    ),
  );

  it('is read without a throw, the same way twice, and every row is accounted for', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...intakeKinds),
        fc.array(fc.array(cell, { maxLength: 8 }), { maxLength: 12 }),
        (kind, body) => {
          const headers = {
            people: ['Name', 'Phone', 'Email', 'Role', 'Skills'],
            crews: ['Crew', 'Foreman', 'Members'],
            sites: ['Job', 'Address', 'Lat', 'Lon', 'Hours'],
            pours: ['Job', 'Date', 'Yds', 'Thk', 'Size', 'Finish', 'Placing', 'Time'],
          }[kind];
          const table = [headers, ...body];
          const mapping = suggestMapping(kind, headers);
          const once = readRows(kind, table, mapping, { ...options, headerIndex: 0 });
          expect(readRows(kind, table, mapping, { ...options, headerIndex: 0 })).toEqual(once);
          const errors = new Set(
            once.problems.flatMap((one) => (one.severity === 'error' ? [one.line] : [])),
          );
          const lines = new Set([
            ...once.skipped.map((one) => one.line),
            ...once.records.map((one) => one.line),
            ...errors,
          ]);
          // Rows of one crew are joined into its first line, so only there may a line go unnamed.
          if (kind !== 'crews') expect(lines.size).toBe(body.length);
          expect(new Set(once.records.map((one) => one.naturalKey)).size).toBe(once.records.length);
        },
      ),
      { numRuns: 500 },
    );
  });

  it('has one error, not one per row, where a needed column is missing', () => {
    const result = readRows(
      'people',
      [['Phone'], ['970-555-0101'], ['970-555-0102']],
      suggestMapping('people', ['Phone']),
      options,
    );
    expect(brief(result.problems)).toEqual(['error 1:- column-required']);
    expect(result.records).toEqual([]);
  });

  it('is refused as a whole only for a bad reference day, zone or column', () => {
    const bad =
      (change: Partial<ReadOptions>): (() => void) =>
      () =>
        readRows('pours', [], [], { ...options, ...change });
    expect(bad({ referenceDay: 'today' })).toThrow(InputProblem);
    expect(bad({ zone: 'Mountain' })).toThrow(InputProblem);
    expect(() => readRows('pours', [], [{ column: -1, field: 'name' }], options)).toThrow(InputProblem);
    expect(bad({})).not.toThrow();
  });
});
