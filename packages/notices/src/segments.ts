import { InputProblem } from '@strikeboard/domain/problem';
import { septetsOf } from './gsm-7.ts';

/** How a text is sent: its encoding, its length in that encoding's units, and the parts it is split into. */
export interface Segments {
  encoding: 'gsm-7' | 'ucs-2';
  /** Septets in GSM-7, 16-bit units in UCS-2. */
  units: number;
  parts: number;
}

/**
 * Units that one part carries. A single part has 140 octets: 160 septets or 70 16-bit units. Each of several gives 6
 * octets to its header, 3GPP TS 23.040 section 9.2.3.24.1: 134 octets are 153 septets or 67 units.
 */
const LIMITS = {
  'gsm-7': { single: 160, part: 153 },
  'ucs-2': { single: 70, part: 67 },
} as const;

/**
 * Counts the parts of an SMS by 3GPP TS 23.038 and TS 23.040. A character of two units (an extension character, a
 * surrogate pair) is not split between parts.
 * @throws InputProblem for an empty text, which is no message
 */
export function countSegments(text: string): Segments {
  if (text === '') throw new InputProblem('text', text, 'a text of at least one character');
  const characters = Array.from(text);
  const septets = characters.map(septetsOf);
  const encoding = septets.includes(null) ? 'ucs-2' : 'gsm-7';
  const widths = characters.map((character, index) =>
    encoding === 'ucs-2' ? character.length : (septets[index] ?? character.length),
  );
  const units = widths.reduce((sum, width) => sum + width, 0);
  const { single, part } = LIMITS[encoding];
  if (units <= single) return { encoding, units, parts: 1 };
  let parts = 1;
  let used = 0;
  for (const width of widths) {
    if (used + width > part) {
      parts += 1;
      used = 0;
    }
    used += width;
  }
  return { encoding, units, parts };
}
