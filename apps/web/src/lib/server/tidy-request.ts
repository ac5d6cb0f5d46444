import type { IncomingMessage, ServerResponse } from 'node:http';

/** No request is larger: a spreadsheet is 10 MB at most. Endpoints have smaller limits of their own. */
export const MAX_REQUEST_BYTES = 10 * 1024 * 1024 + 64 * 1024;

/** Headers of every answer, files included. Pages add their content security policy. */
const securityHeaders: readonly (readonly [string, string])[] = [
  ['X-Content-Type-Options', 'nosniff'],
  ['X-Frame-Options', 'DENY'],
  ['Referrer-Policy', 'same-origin'],
  ['Cross-Origin-Opener-Policy', 'same-origin'],
  ['Permissions-Policy', 'camera=(), microphone=(), geolocation=(), payment=()'],
];

/**
 * Makes a request's claims about its sender true before the app sees it, and sets the headers every answer has.
 * The adapter believes X-Forwarded-For and X-Forwarded-Proto from anyone, so what is not from a proxy of one's
 * own is taken out. Returns true when the request has been answered already.
 */
export function tidyRequest(
  req: IncomingMessage,
  res: ServerResponse,
  options: { trustedProxies: number; isHttps: boolean },
): boolean {
  const address = clientAddress(req, options.trustedProxies);
  for (const name of Object.keys(req.headers)) {
    if (name === 'forwarded' || name.startsWith('x-forwarded-')) delete req.headers[name];
  }
  if (address) req.headers['x-forwarded-for'] = address;
  // The app is told the scheme that people use, whatever the last hop speaks.
  if (options.isHttps) req.headers['x-forwarded-proto'] = 'https';
  for (const [name, value] of securityHeaders) res.setHeader(name, value);
  if (options.isHttps) res.setHeader('Strict-Transport-Security', 'max-age=31536000');

  const length = Number(req.headers['content-length'] ?? 0);
  if (length <= MAX_REQUEST_BYTES) return false;
  const body = {
    type: '/problems/too-large',
    title: 'Too large',
    status: 413,
    code: 'too-large',
    detail: `A request may hold at most ${Math.floor(MAX_REQUEST_BYTES / 1024 / 1024)} MB.`,
  };
  res.writeHead(413, { 'Content-Type': 'application/problem+json', Connection: 'close' });
  res.end(JSON.stringify(body));
  return true;
}

/** The sender's address: the socket's, or what the outermost proxy of one's own has seen. */
function clientAddress(req: IncomingMessage, trustedProxies: number): string | undefined {
  const socket = req.socket.remoteAddress;
  if (trustedProxies === 0) return socket;
  const header = req.headers['x-forwarded-for'];
  const seen = (Array.isArray(header) ? header.join(',') : (header ?? ''))
    .split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
  return seen.at(-trustedProxies) ?? seen[0] ?? socket;
}
