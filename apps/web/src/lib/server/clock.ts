/** The one place of the web app that reads the clock. */
export function nowMs(): number {
  return Date.now();
}
