/**
 * The GSM 7-bit default alphabet and its extension table, 3GPP TS 23.038 sections 6.2.1 and 6.2.1.1 (published). A
 * character of the extension table takes two septets.
 */
const BASIC = new Set(
  '@£$¥èéùìòÇ\nØø\rÅåΔ_ΦΓΛΩΠΨΣΘΞÆæßÉ !"#¤%&\'()*+,-./0123456789:;<=>?¡ABCDEFGHIJKLMNOPQRSTUVWXYZÄÖÑÜ§¿abcdefghijklmnopqrstuvwxyzäöñüà',
);
const EXTENDED = new Set('^{}\\[~]|€\f');

/** Septets that the character takes in GSM 7-bit: 1 or 2; null: the alphabet does not have it. */
export function septetsOf(character: string): 1 | 2 | null {
  if (BASIC.has(character)) return 1;
  return EXTENDED.has(character) ? 2 : null;
}

const SPELLED: ReadonlyMap<string, string> = new Map([
  ...[...'‘’‚′`´'].map((quote) => [quote, "'"] as const),
  ...[...'“”„″«»'].map((quote) => [quote, '"'] as const),
  ...[...'‐‑‒–—―−'].map((dash) => [dash, '-'] as const),
  ...[...'•·'].map((dot) => [dot, '-'] as const),
  ['…', '...'],
  ['×', 'x'],
  ['³', '3'],
  ['²', '2'],
  ['¼', ' 1/4'],
  ['½', ' 1/2'],
  ['¾', ' 3/4'],
  ['°', ' deg '],
  ['º', 'o'],
  ['ª', 'a'],
  ['№', 'No.'],
  ['™', ''],
  ['®', ''],
  ['©', ''],
]);

/**
 * The text as near as GSM 7-bit has it: accents that the alphabet lacks are left off (`camión` becomes `camion`; `é` and
 * `ñ` stay), typographic signs are typed, pictures are dropped. Letters of other scripts stay: a readable address is
 * worth more than a short message.
 */
export function toGsm7(text: string): string {
  const spelled = Array.from(text.normalize('NFC'), nearest).join('');
  return spelled
    .replace(/ {2,}/g, ' ')
    .replace(/ ([,.:;])/g, '$1')
    .trim();
}

function nearest(character: string): string {
  if (septetsOf(character) !== null) return character;
  const known = SPELLED.get(character);
  if (known !== undefined) return known;
  if (/\p{Zs}|\t/u.test(character)) return ' ';
  // Pictures with their joiners, variation selectors and skin tones.
  if (/\p{Extended_Pictographic}|\p{Emoji_Modifier}|\p{Cf}|\p{Variation_Selector}|\u20E3/u.test(character))
    return '';
  const bare = character.normalize('NFD').replace(/\p{M}/gu, '');
  return bare !== '' && Array.from(bare).every((letter) => septetsOf(letter) !== null) ? bare : character;
}
