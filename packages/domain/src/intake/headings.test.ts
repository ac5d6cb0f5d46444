import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fieldsOf, type IntakeKind, intakeKinds } from './fields.ts';
import { headingWords } from './heading-words.ts';
import { findHeaderRow, readHeadings, SURE_CONFIDENCE, suggestMapping, unitOf } from './headings.ts';

const fields = (kind: IntakeKind, headers: string[]): (string | null)[] =>
  suggestMapping(kind, headers).map((one) => one.field);

// How offices name their columns: common practice, no source.
describe('headings', () => {
  it.each([
    [
      'people',
      ['Nombre', 'Cell', 'Correo electrónico', 'Puesto', 'Cuadrilla', 'Idioma'],
      ['name', 'phone', 'email', 'role', 'crewName', 'language'],
    ],
    [
      'people',
      ['Phone #', 'LAST NAME', 'First Name', 'E-mail', 'Crew'],
      ['phone', 'lastName', 'firstName', 'email', 'crewName'],
    ],
    [
      'crews',
      ['Crew', 'Foreman', "Foreman's E-mail", 'Member 1', 'Member 2'],
      ['name', 'foremanName', 'foremanEmail', 'memberNames', 'memberNames'],
    ],
    [
      'sites',
      ['Job name', 'Addr', 'City', 'ST', 'Zip Code', 'Lat', 'Long', 'GC', 'Gate code'],
      ['name', 'address', 'city', 'state', 'zip', 'latitude', 'longitude', 'customerName', 'accessNotes'],
    ],
    [
      'pours',
      [
        'Job #',
        'Job',
        'Location',
        'Slab',
        'Pour date',
        'Yds',
        'Thk',
        'L x W',
        'SF',
        'Finish',
        'Placing',
        'Mix',
      ],
      [
        'jobRef',
        'siteName',
        'siteAddress',
        'name',
        'wantedOn',
        'orderedYd3',
        'thicknessIn',
        'dimensions',
        'areaFt2',
        'finish',
        'placingMethod',
        'mixName',
      ],
    ],
    [
      'pours',
      ['Obra', 'Fecha', 'Yardas', 'Espesor', 'Largo', 'Ancho', 'Acabado', 'Notas', 'Comentarios'],
      [
        'siteName',
        'wantedOn',
        'orderedYd3',
        'thicknessIn',
        'lengthFt',
        'widthFt',
        'finish',
        'notes',
        'notes',
      ],
    ],
    ['pours', ['Wanted', 'CY', 'Sq ft', 'Yardage per week'], ['wantedOn', 'orderedYd3', 'areaFt2', null]],
  ] as const)('%s: %j', (kind, headers, right) => {
    expect(fields(kind, [...headers])).toEqual([...right]);
  });

  it('leaves a column alone whose words it does not know, above all near misses of meaning', () => {
    expect(fields('people', ['Emergency contact phone', 'Customer phone', 'Shirt size'])).toEqual([
      null,
      null,
      null,
    ]);
    expect(fields('pours', ['Order date', 'Crew', 'Invoice total', ''])).toEqual([null, null, null, null]);
  });

  it('takes a heading in two languages when both mean the same', () => {
    expect(fields('people', ['Nombre / Name', 'Teléfono (Cell)', 'Crew / Phone'])).toEqual([
      'name',
      'phone',
      null,
    ]);
    expect(fields('pours', ['Yds/hr', 'Yds/load', 'Acabado | Finish'])).toEqual([
      'placingRateYd3PerHour',
      null,
      'finish',
    ]);
  });

  it('is unsure of weak words, slips of the pen and rivals', () => {
    const confidence = (kind: IntakeKind, headers: string[]): number[] =>
      suggestMapping(kind, headers).map((one) => one.confidence);
    expect(confidence('pours', ['Yardage'])[0]).toBe(1);
    expect(confidence('pours', ['Total yardage'])[0]).toBeGreaterThanOrEqual(SURE_CONFIDENCE);
    expect(confidence('pours', ['Yardgae'])[0]).toBeLessThan(SURE_CONFIDENCE);
    expect(confidence('pours', ['Qty'])[0]).toBeLessThan(SURE_CONFIDENCE);
    const rivals = suggestMapping('people', ['Cell', 'Phone']);
    expect(rivals.map((one) => one.field)).toEqual(['phone', null]);
    expect(rivals[0]?.confidence).toBeLessThan(SURE_CONFIDENCE);
    expect(fields('people', ['Home phone', 'Cell'])).toEqual([null, 'phone']);
  });

  it.each([
    ['Thk (mm)', 'mm'],
    ['Thickness, in.', 'in'],
    ['Vol (m³)', 'm3'],
    ['M3', 'm3'],
    ['Yds', 'yd3'],
    ['Area m2', 'm2'],
    ['Length (ft)', 'ft'],
    ['Thickness', null],
    ['Pour date', null],
  ])('the unit of %s is %s', (heading, unit) => {
    expect(unitOf(heading)).toBe(unit);
  });

  it('knows every word of its own lists, and no word stands for two fields of a kind', () => {
    for (const kind of intakeKinds) {
      for (const field of fieldsOf[kind]) {
        for (const word of headingWords[kind][field]?.sure ?? []) {
          expect(suggestMapping(kind, [word])[0], `${kind} ${word}`).toMatchObject({ field, confidence: 1 });
        }
        for (const word of headingWords[kind][field]?.likely ?? []) {
          expect(suggestMapping(kind, [word])[0]?.field, `${kind} ${word}`).toBe(field);
        }
      }
    }
  });
});

describe('the heading row', () => {
  it('is found under a title, notes and blank rows', () => {
    const table = [
      ['Cedar Flat pours'],
      [],
      ['as of', '12/1/2026'],
      [''],
      ['Job', 'Yds', 'Date'],
      ['Lot 4', '32', '12/8'],
    ];
    expect(findHeaderRow('pours', table)).toBe(4);
    expect(readHeadings('pours', table)?.mapping.map((one) => one.field)).toEqual([
      'siteName',
      'orderedYd3',
      'wantedOn',
    ]);
  });

  it('is none where no row names columns', () => {
    expect(
      findHeaderRow('pours', [
        ['Lot 4', '32', '12/8'],
        ['Lot 5', '12', '12/9'],
      ]),
    ).toBeNull();
    expect(findHeaderRow('people', [])).toBeNull();
  });

  it('answers any table', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...intakeKinds),
        fc.array(fc.array(fc.string({ unit: 'grapheme' }))),
        (kind, table) => {
          const row = findHeaderRow(kind, table);
          expect(row === null || (row >= 0 && row < table.length)).toBe(true);
          expect(suggestMapping(kind, table[0] ?? [])).toHaveLength(table[0]?.length ?? 0);
        },
      ),
    );
  });
});
