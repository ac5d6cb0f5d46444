const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/** Addresses that providers call: they carry a signature of their own instead. */
const webhooks = /^\/api\/(sms|webhooks)\//;

/**
 * Whether a request that changes something comes from a page of this site. Browsers say so in Sec-Fetch-Site, older
 * ones in Origin; what says neither is no browser, and carries no one's cookies but its own.
 */
export function isFromHere(request: Request, appOrigin: string): boolean {
  if (safeMethods.has(request.method)) return true;
  if (webhooks.test(new URL(request.url).pathname)) return true;
  const site = request.headers.get('sec-fetch-site');
  if (site !== null) return site === 'same-origin' || site === 'none';
  const origin = request.headers.get('origin');
  return origin === null || origin === appOrigin;
}
