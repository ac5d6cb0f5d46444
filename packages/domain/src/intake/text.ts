const PLAIN = /^[ -~]*$/;

/** Without accents and with compatibility forms plain (NFKD). Most cells are ASCII and need no work. */
export function withoutMarks(text: string): string {
  return PLAIN.test(text) ? text : text.normalize('NFKD').replace(/\p{M}+/gu, '');
}

/**
 * Lower case, without accents, with every run of spaces and punctuation as one space. Two texts that a person
 * would call the same fold to the same text, so natural keys and word lists are compared folded.
 */
export function fold(text: string): string {
  return withoutMarks(text)
    .toLowerCase()
    .replace(/['’`´]/g, '')
    .replace(/[^\p{L}\p{N}]+/gu, ' ')
    .trim();
}

const STREET_WORDS: Readonly<Record<string, string>> = {
  street: 'st',
  avenue: 'ave',
  av: 'ave',
  drive: 'dr',
  road: 'rd',
  lane: 'ln',
  court: 'ct',
  circle: 'cir',
  boulevard: 'blvd',
  place: 'pl',
  parkway: 'pkwy',
  highway: 'hwy',
  trail: 'trl',
  north: 'n',
  south: 's',
  east: 'e',
  west: 'w',
  northeast: 'ne',
  northwest: 'nw',
  southeast: 'se',
  southwest: 'sw',
  suite: 'ste',
  apartment: 'apt',
};

/** {@link fold} for addresses: "Street" and "St." fold alike (the usual abbreviations of USPS Publication 28). */
export function foldAddress(text: string): string {
  return fold(text)
    .split(' ')
    .map((word) => STREET_WORDS[word] ?? word)
    .join(' ');
}

const BLANK_WORDS = new Set([
  'na',
  'n a',
  'none',
  'tbd',
  'tba',
  'ninguno',
  'ninguna',
  'pendiente',
  'por definir',
]);

/** Whether a cell says that there is nothing: empty, dashes, "n/a", "TBD". */
export function isBlank(text: string): boolean {
  const folded = fold(text);
  return folded === '' ? !/["〃#]/.test(text) : BLANK_WORDS.has(folded);
}

/** The cell's text on one line, with single spaces and no invisible characters. */
export function tidy(text: string): string {
  return text
    .normalize('NFC')
    .replace(/[\u200b-\u200d\u2060\ufeff\u00ad]/g, '')
    .replace(/[\s\u00a0]+/g, ' ')
    .trim();
}

/**
 * A person's name as it is spoken: "Ruiz, Ana" becomes "Ana Ruiz"; "Ortega, Jr." and names with several commas
 * stay as they are.
 */
export function spokenName(text: string): string {
  const name = tidy(text);
  const parts = name.split(',').map((part) => part.trim());
  const [last, first] = parts;
  if (parts.length !== 2 || !last || !first || /^(jr|sr|ii|iii|iv)\.?$/i.test(first)) return name;
  return `${first} ${last}`;
}

/** Names in one cell: by line, `;`, `/`, `&`, "and", "y", or by comma where nothing else separates them. */
export function nameList(text: string): string[] {
  const strong = text.split(/[\n;/|]+/);
  const pieces = strong.length > 1 ? strong : text.split(/,|&|\s+(?:and|y|e)\s+|\s\+\s/i);
  return pieces.map(spokenName).filter((name) => fold(name) !== '');
}
