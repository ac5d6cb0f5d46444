import { type Parsed, parsed, refused } from './reason.ts';

export interface Coordinates {
  readonly latDeg: number;
  readonly lonDeg: number;
}

const DECIMAL_DEGREES = /^([NSEWO])? ?([+-]?)(\d{1,3}(?:\.\d{1,15})?) ?°? ?([NSEWO])?$/i;

/** Latitude in decimal degrees, -90 to 90: `40.5853`, `40.5853 N`, `40.5853°`. */
export function parseLatitude(text: string): Parsed<number> {
  const value = degrees(text, /[NS]/i, 'S');
  return value === null || Math.abs(value) > 90 ? refused({ code: 'latitude' }) : parsed(value);
}

/**
 * Longitude in decimal degrees, -180 to 180: `-105.0844`, `105.0844 W`. In the US all longitudes are negative but
 * for the outermost Aleutians, so a bare 60 to 180 is refused with the signed one rather than put in China.
 */
export function parseLongitude(text: string, country: string): Parsed<number> {
  const value = degrees(text, /[EWO]/i, 'W');
  if (value === null || Math.abs(value) > 180) return refused({ code: 'longitude' });
  if (country === 'US' && value > 60 && !/e$/i.test(text.trim())) {
    return refused({ code: 'longitude-sign', suggested: String(-value) });
  }
  return parsed(value);
}

/** Both in one cell, latitude first: `40.5853, -105.0844`. */
export function parseCoordinates(text: string, country: string): Parsed<Coordinates> {
  const plain = text.trim().replace(/^\((.*)\)$/, '$1');
  const parts = plain.split(/ ?[,;/] ?| +(?=[-+\d])/).filter((part) => part !== '');
  if (parts.length !== 2) return refused({ code: 'coordinates' });
  const latitude = parseLatitude(parts[0] ?? '');
  const longitude = parseLongitude(parts[1] ?? '', country);
  if (!latitude.ok) return refused({ code: 'coordinates' });
  if (!longitude.ok)
    return longitude.expected.code === 'longitude-sign' ? longitude : refused({ code: 'coordinates' });
  if (latitude.value === 0 && longitude.value === 0) return refused({ code: 'coordinates' });
  return parsed({ latDeg: latitude.value, lonDeg: longitude.value });
}

function degrees(text: string, letters: RegExp, negative: 'S' | 'W'): number | null {
  const match = DECIMAL_DEGREES.exec(text.trim());
  const letter = (match?.[1] ?? match?.[4] ?? '').toUpperCase();
  if (!match || (match[1] !== undefined && match[4] !== undefined)) return null;
  if (letter !== '' && (!letters.test(letter) || match[2] !== '')) return null;
  const size = Number(match[3]);
  // "O" is oeste, west in Spanish.
  const isNegative = match[2] === '-' || letter === negative || (negative === 'W' && letter === 'O');
  return isNegative && size !== 0 ? -size : size;
}
