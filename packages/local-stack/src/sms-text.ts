/**
 * How a text is counted, from 3GPP TS 23.038 (the alphabet) and TS 23.040 (a part of a longer text
 * loses six octets to its header): published.
 */
const GSM_7 = new Set(
  '@£$¥èéùìòÇ\nØø\rÅåΔ_ΦΓΛΩΠΨΣΘΞÆæßÉ !"#¤%&\'()*+,-./0123456789:;<=>?¡ABCDEFGHIJKLMNOPQRSTUVWXYZÄÖÑÜ§¿abcdefghijklmnopqrstuvwxyzäöñüà',
);
const GSM_7_EXTENDED = new Set('^{}\\[~]|€\f');

/** Parts the text is sent in: 160 septets or 70 UTF-16 units in one, 153 or 67 in each of several. */
export function countSegments(text: string): number {
  const characters = [...text];
  const isGsm7 = characters.every((character) => GSM_7.has(character) || GSM_7_EXTENDED.has(character));
  const widths = characters.map((character) =>
    isGsm7 ? (GSM_7_EXTENDED.has(character) ? 2 : 1) : character.length,
  );
  const [single, part] = isGsm7 ? [160, 153] : [70, 67];
  const total = widths.reduce((sum, width) => sum + width, 0);
  if (total <= single) return 1;
  // A character two units wide is not split between parts.
  let parts = 1;
  let used = 0;
  for (const width of widths) {
    if (used + width > part) {
      parts += 1;
      used = 0;
    }
    used += width;
  }
  return parts;
}

/** The texts in a webhook's answer, which is TwiML: each <Message>, or the <Body> inside it. */
export function repliesInTwiml(twiml: string): string[] {
  return [...twiml.matchAll(/<Message\b[^>]*>([\s\S]*?)<\/Message>/g)]
    .map(([, inner = '']) => /<Body\b[^>]*>([\s\S]*?)<\/Body>/.exec(inner)?.[1] ?? inner)
    .map((xml) => decodeXml(xml.replace(/<[^>]*>/g, '')).trim())
    .filter((text) => text !== '');
}

function decodeXml(text: string): string {
  const named: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: "'" };
  return text.replace(/&(#x[0-9a-f]+|#\d+|\w+);/gi, (whole, name: string) => {
    if (/^#x/i.test(name)) return String.fromCodePoint(Number.parseInt(name.slice(2), 16));
    if (name.startsWith('#')) return String.fromCodePoint(Number(name.slice(1)));
    return named[name] ?? whole;
  });
}
