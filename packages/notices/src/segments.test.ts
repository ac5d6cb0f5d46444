import { InputProblem } from '@strikeboard/domain/problem';
import { describe, expect, it } from 'vitest';
import { toGsm7 } from './gsm-7.ts';
import { countSegments } from './segments.ts';

const WORKER = '👷';

describe('parts of a text', () => {
  // 160 and 153 septets, 70 and 67 units: 3GPP TS 23.038 and TS 23.040 (published). Extension characters take two
  // septets: TS 23.038 section 6.2.1.1 (published).
  it.each([
    ['160 a', 'a'.repeat(160), 'gsm-7', 160, 1],
    ['161 a', 'a'.repeat(161), 'gsm-7', 161, 2],
    ['306 a', 'a'.repeat(306), 'gsm-7', 306, 2],
    ['307 a', 'a'.repeat(307), 'gsm-7', 307, 3],
    ['459 a', 'a'.repeat(459), 'gsm-7', 459, 3],
    ['460 a', 'a'.repeat(460), 'gsm-7', 460, 4],
    ['80 euro', '€'.repeat(80), 'gsm-7', 160, 1],
    ['81 euro', '€'.repeat(81), 'gsm-7', 162, 2],
    ['158 a and a bracket', `${'a'.repeat(158)}[`, 'gsm-7', 160, 1],
    ['159 a and a bracket', `${'a'.repeat(159)}[`, 'gsm-7', 161, 2],
    ['a pair that would straddle two parts', `${'a'.repeat(152)}€${'a'.repeat(152)}`, 'gsm-7', 306, 3],
    ['a picture among letters', `Pour at 7 ${WORKER}`, 'ucs-2', 12, 1],
    ['35 pictures', WORKER.repeat(35), 'ucs-2', 70, 1],
    ['36 pictures', WORKER.repeat(36), 'ucs-2', 72, 2],
    ['one glyph of seven units', '👷🏽‍♀️', 'ucs-2', 7, 1],
    ['yards with a superscript', '9.5 yd³', 'ucs-2', 7, 1],
    ['yards with a digit', '9.5 yd3', 'gsm-7', 7, 1],
    ['a curly apostrophe', 'Don’t pour', 'ucs-2', 10, 1],
    ['a straight apostrophe', "Don't pour", 'gsm-7', 10, 1],
    ['n with tilde', 'mañana', 'gsm-7', 6, 1],
    ['a with acute', 'mañana a las 7, está listo', 'ucs-2', 26, 1],
  ])('%s', (_name, text, encoding, units, parts) => {
    expect(countSegments(text)).toEqual({ encoding, units, parts });
  });

  it('has the whole alphabet, and no more', () => {
    const inGsm7 = '@£$¥èéùìòÇ\nØø\rÅåΔ_ΦΓΛΩΠΨΣΘΞÆæßÉ¤ÄÖÑÜ§¿¡äöñüà';
    expect(countSegments(inGsm7)).toEqual({ encoding: 'gsm-7', units: [...inGsm7].length, parts: 1 });
    expect(countSegments('^{}\\[~]|€\f')).toEqual({ encoding: 'gsm-7', units: 20, parts: 1 });
    for (const outside of '°³½×’“–`\t\u00A0çáíóú👷') {
      expect(countSegments(outside).encoding, outside).toBe('ucs-2');
    }
  });

  it('refuses an empty text', () => {
    expect(() => countSegments('')).toThrow(InputProblem);
  });
});

describe('spelling in GSM 7-bit', () => {
  // What the alphabet has: 3GPP TS 23.038 section 6.2.1 (published). How to spell the rest: common practice, no source.
  it.each([
    ['camión a las 7, está listo', 'camion a las 7, esta listo'],
    ['mañana café über', 'mañana café über'],
    ['Conteste SÍ — “ahí”', 'Conteste SI - "ahi"'],
    ['9½ yd³ at 72°F', '9 1/2 yd3 at 72 deg F'],
    ['O’Brien’s 12′ × 8″', "O'Brien's 12' x 8\""],
    [`Cedar Flat ${WORKER} Concrete 👷🏽‍♀️`, 'Cedar Flat Concrete'],
    ['No\u00A0break\tand\u2009thin', 'No break and thin'],
    ['cafe\u0301 n\u0303', 'café ñ'],
    ['コンクリート', 'コンクリート'],
  ])('%s', (text, spelled) => {
    expect(toGsm7(text)).toBe(spelled);
  });
});
