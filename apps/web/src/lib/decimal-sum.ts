/** The sum of two decimals given as text, exact to a thousandth, without zeros at its end. */
export function sumOf(a: string, b: string): string {
  const thousandths = thousandthsOf(a) + thousandthsOf(b);
  const text = (thousandths < 0n ? -thousandths : thousandths).toString().padStart(4, '0');
  const decimals = text.slice(-3).replace(/0+$/, '');
  const sign = thousandths < 0n ? '-' : '';
  return `${sign}${text.slice(0, -3)}${decimals === '' ? '' : `.${decimals}`}`;
}

function thousandthsOf(text: string): bigint {
  const match = /^(-?)(\d+)(?:\.(\d{1,3}))?$/.exec(text);
  if (!match) throw new Error(`Not a decimal of at most three places: ${text}`);
  const [, sign, whole, decimals = ''] = match;
  const value = BigInt(`${whole}${decimals.padEnd(3, '0')}`);
  return sign === '-' ? -value : value;
}
