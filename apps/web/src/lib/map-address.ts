/** An address that phones open in whatever map its owner uses. */
export function mapAddress(address: string): string {
  return `https://www.openstreetmap.org/search?query=${encodeURIComponent(address)}`;
}
