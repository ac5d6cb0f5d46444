import { createServer, request } from 'node:http';
import { describe, expect, it } from 'vitest';
import { MAX_REQUEST_BYTES, tidyRequest } from './tidy-request.ts';

/** What the app would see of one request, and the answer's status. */
async function ask(headers: Record<string, string>, trustedProxies: number) {
  let seen: NodeJS.Dict<string | string[]> = {};
  const server = createServer((req, res) => {
    if (tidyRequest(req, res, { trustedProxies, isHttps: false })) return;
    seen = req.headers;
    res.end('ok');
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.address();
  const port = typeof address === 'object' && address ? address.port : 0;
  const status = await new Promise<number>((resolve, reject) => {
    const sent = request({ port, host: '127.0.0.1', method: 'POST', headers }, (res) => {
      res.resume();
      resolve(res.statusCode ?? 0);
    });
    sent.on('error', reject);
    if (Number(headers['content-length'] ?? 0) <= 16) sent.end();
    else sent.flushHeaders();
  });
  server.closeAllConnections();
  server.close();
  return { status, seen };
}

describe('tidyRequest (common practice, no source)', () => {
  it('does not believe a sender about where it sits', async () => {
    const { seen } = await ask({ 'x-forwarded-for': '203.0.113.9', 'x-forwarded-proto': 'https' }, 0);
    expect(seen['x-forwarded-for']).toBe('127.0.0.1');
    expect(seen['x-forwarded-proto']).toBeUndefined();
  });

  it('believes only as many entries as there are proxies of its own', async () => {
    const { seen } = await ask({ 'x-forwarded-for': '198.51.100.1, 203.0.113.9' }, 1);
    expect(seen['x-forwarded-for']).toBe('203.0.113.9');
  });

  it('refuses a body over the limit before reading it', async () => {
    expect((await ask({ 'content-length': String(MAX_REQUEST_BYTES + 1) }, 0)).status).toBe(413);
  });
});
