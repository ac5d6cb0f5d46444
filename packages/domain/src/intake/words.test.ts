import { describe, expect, it } from 'vitest';
import { parseEmail, parseLanguage, parsePhone, parseYesNo, parseZone } from './contacts.ts';
import { parseCoordinates, parseLatitude, parseLongitude } from './coordinates.ts';
import { type Parsed, plainReasonCodes } from './reason.ts';
import { fold, foldAddress, isBlank, nameList, spokenName } from './text.ts';
import { parseCement, parseFinish, parsePlacingMethod, parseRole, parseSkills } from './trade-words.ts';
import { columnLetter, problemSentence, reasonSentence } from './words.ts';

const shown = <T>(result: Parsed<T>): T | string =>
  result.ok ? result.value : `no: ${result.expected.code}`;
const warned = <T>(result: Parsed<T>): string[] =>
  result.ok ? (result.warnings ?? []).map((one) => one.code) : [];

describe('phones', () => {
  // E.164 (ITU-T): plus sign, country code, up to 15 digits. 555-0100 to 0199 are kept free for fiction.
  it.each([
    ['(970) 555-0123', '+19705550123'],
    ['970.555.0123', '+19705550123'],
    ['970 555 0123', '+19705550123'],
    ['1-970-555-0123', '+19705550123'],
    ['+1 970 555 0123', '+19705550123'],
    ['9705550123.0', '+19705550123'],
    ['970‑555‑0123', '+19705550123'],
    ['+52 55 1234 5678', '+525512345678'],
    ['970-555-0123 x12', '+19705550123'],
    ['555-0123', 'no: phone-area-code'],
    ['970-555-0123 / 970-555-0124', 'no: phone-only-one'],
    ['9.70555E+09', 'no: phone'],
    ['123 456 7890', 'no: phone'],
    ['call the office', 'no: phone'],
  ])('%s is %s', (given, right) => {
    expect(shown(parsePhone(given, 'US'))).toBe(right);
  });

  it('says that an extension was left out', () => {
    expect(warned(parsePhone('970-555-0123 x12', 'US'))).toEqual(['left-out']);
  });
});

describe('words', () => {
  // RFC 5321 lengths: local part at most 64, whole address at most 254 octets.
  it.each([
    ['Ana.Ruiz@Example.com', 'ana.ruiz@example.com'],
    [' mailto:ana@example.com', 'ana@example.com'],
    ['Ana Ruiz <ana@example.com>', 'ana@example.com'],
    ['ana@example', 'no: email'],
    ['ana @example.com', 'no: email'],
    ['ana@example.com; luis@example.com', 'no: email'],
    [`${'a'.repeat(65)}@example.com`, 'no: email'],
    ['.ana@example.com', 'no: email'],
  ])('the e-mail %s is %s', (given, right) => {
    expect(shown(parseEmail(given))).toBe(right);
  });

  it.each([
    ['Yes', true],
    ['sí', true],
    ['SI', true],
    ['x', true],
    ['✓', true],
    ['no', false],
    ['N', false],
    ['maybe', 'no: yes-no'],
  ])('%s is %s', (given, right) => {
    expect(shown(parseYesNo(given))).toBe(right);
  });

  it.each([
    ['Spanish', 'es'],
    ['Español', 'es'],
    ['ENG', 'en'],
    ['inglés', 'en'],
    ['bilingual', null],
    ['French', 'no: language'],
  ])('the language %s is %s', (given, right) => {
    expect(shown(parseLanguage(given))).toBe(right);
  });

  // What the trade calls things: common practice, no source.
  it.each([
    [parseRole, 'Crew Lead', 'foreman'],
    [parseRole, 'capataz', 'foreman'],
    [parseRole, 'Dueño', 'owner'],
    [parseRole, 'Laborer', 'finisher'],
    [parseRole, '1099', 'sub'],
    [parseRole, 'Sub-contractor', 'sub'],
    [parseRole, 'pilot', 'no: role'],
    [parseFinish, 'Broom finish', 'broom'],
    [parseFinish, 'LT BROOM', 'broom'],
    [parseFinish, 'exp. agg.', 'exposed'],
    [parseFinish, 'Hard-trowel', 'hard-trowel'],
    [parseFinish, 'smooth', 'trowel'],
    [parseFinish, 'Stamped - ashlar slate', 'stamped'],
    [parseFinish, 'broom w/ picture frame', 'broom'],
    [parseFinish, 'acabado escobillado', 'broom'],
    [parseFinish, 'broom, stamped', 'no: finish'],
    [parseFinish, 'broom/trowel', 'no: finish'],
    [parseFinish, 'salt', 'no: finish'],
    [parsePlacingMethod, 'off the truck', 'chute'],
    [parsePlacingMethod, 'Line Pump', 'line-pump'],
    [parsePlacingMethod, '38m boom', 'boom-pump'],
    [parsePlacingMethod, 'bomba pluma', 'boom-pump'],
    [parsePlacingMethod, 'wheelbarrow', 'buggy'],
    [parsePlacingMethod, 'pump', 'no: which-pump'],
    [parsePlacingMethod, 'helicopter', 'no: placing-method'],
    [parseCement, 'Type I', 'type-i'],
    [parseCement, 'type 3', 'type-iii'],
    [parseCement, 'Type I/II', 'type-i'],
    [parseCement, 'IL(10)', 'type-i'],
    [parseCement, 'Type V', 'no: cement'],
  ])('%o reads %s as %s', (parse, given, right) => {
    expect(shown<string>(parse(given))).toBe(right);
  });

  it('keeps what was said beyond the word as a warning', () => {
    expect(parseFinish('Stamped - ashlar slate')).toMatchObject({
      warnings: [{ code: 'left-out', text: 'ashlar slate' }],
    });
    expect(warned(parseCement('Type I/II'))).toEqual(['read-as']);
  });

  it('reads lists of finishes', () => {
    expect(shown(parseSkills('broom, stamped & exposed agg'))).toEqual(['broom', 'stamped', 'exposed']);
    expect(shown(parseSkills('all'))).toEqual([]);
    expect(shown(parseSkills('broom, juggling'))).toBe('no: finish');
  });

  // IANA time zone database; Phoenix and Boise are mountain time by name.
  it.each([
    ['America/Denver', 'America/Chicago', 'America/Denver', []],
    ['Mountain', 'America/Chicago', 'America/Denver', ['read-as']],
    ['MST', 'America/Denver', 'America/Denver', []],
    ['MST', 'America/Phoenix', 'America/Phoenix', []],
    ['Mountain Time', 'America/Boise', 'America/Boise', []],
    ['central time', 'America/Denver', 'America/Chicago', ['read-as']],
    ['Mars/Olympus', 'America/Denver', 'no: time-zone', []],
  ])('the zone %s at a company in %s is %s', (given, company, right, warnings) => {
    expect(shown(parseZone(given, company))).toBe(right);
    expect(warned(parseZone(given, company))).toEqual(warnings);
  });

  it('reads coordinates and refuses the wrong half of the world', () => {
    expect(shown(parseLatitude('40.5853 N'))).toBe(40.5853);
    expect(shown(parseLatitude('91'))).toBe('no: latitude');
    expect(shown(parseLongitude('105.0844 W', 'US'))).toBe(-105.0844);
    expect(parseLongitude('105.0844', 'US')).toEqual({
      ok: false,
      expected: { code: 'longitude-sign', suggested: '-105.0844' },
    });
    expect(shown(parseCoordinates('40.5853, -105.0844', 'US'))).toEqual({
      latDeg: 40.5853,
      lonDeg: -105.0844,
    });
    expect(shown(parseCoordinates('0, 0', 'US'))).toBe('no: coordinates');
    expect(shown(parseCoordinates('40.5853', 'US'))).toBe('no: coordinates');
  });
});

describe('text', () => {
  it('folds what a person would call the same', () => {
    expect(fold('  CASTAÑEDA,  José ')).toBe(fold('Castaneda Jose'));
    expect(fold("O'Neil")).toBe(fold('ONeil'));
    expect(foldAddress('1410 North Larkbunting Street')).toBe(foldAddress('1410 N. Larkbunting St'));
  });

  it('knows blanks and names', () => {
    expect(['', ' ', '-', 'n/a', 'TBD', '?'].map(isBlank)).toEqual([true, true, true, true, true, true]);
    expect(['0', 'x', '"', '#REF!', '4'].map(isBlank)).toEqual([false, false, false, false, false]);
    expect(spokenName('Ruiz, Ana')).toBe('Ana Ruiz');
    expect(spokenName('Luis Ortega, Jr.')).toBe('Luis Ortega, Jr.');
    expect(nameList('Ana Ruiz, Luis Ortega & Bo Lind')).toEqual(['Ana Ruiz', 'Luis Ortega', 'Bo Lind']);
    expect(nameList('Ruiz, Ana; Ortega, Luis')).toEqual(['Ana Ruiz', 'Luis Ortega']);
    expect(nameList('Ana Ruiz y Luis Ortega')).toEqual(['Ana Ruiz', 'Luis Ortega']);
  });
});

describe('sentences', () => {
  it('exist in both languages and differ', () => {
    for (const code of plainReasonCodes) {
      const [english, spanish] = [reasonSentence({ code }, 'en'), reasonSentence({ code }, 'es')];
      expect(english).toMatch(/\S.*\.$/);
      expect(spanish).toMatch(/\S.*\.$/);
      expect(spanish).not.toBe(english);
    }
  });

  it('carry the facts', () => {
    const problem = {
      line: 7,
      column: 27,
      field: 'thicknessIn',
      value: '400',
      expected: { code: 'out-of-range', min: 1, max: 48, unit: 'in' },
      severity: 'error',
    } as const;
    expect(problemSentence(problem, 'en')).toBe('Expected 1 to 48 in.');
    expect(problemSentence(problem, 'es')).toBe('Se esperaba de 1 a 48 in.');
    expect(columnLetter(problem.column)).toBe('AB');
    expect(columnLetter(0)).toBe('A');
  });
});
