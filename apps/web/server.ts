/** Serves the production build: `node --import tsx apps/web/server.ts`. */
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import path from 'node:path';
import { pathToFileURL } from 'node:url';
import { ConfigProblem, readNoticesConfig } from '@strikeboard/notices/config';
import { z } from 'zod';
import { EnvironmentProblem, env } from './src/env.ts';
import { closeAll } from './src/lib/server/closing.ts';
import { tidyRequest } from './src/lib/server/tidy-request.ts';

const CLOSE_WITHIN_MS = 8_000;

type Handler = (req: IncomingMessage, res: ServerResponse) => void;
const buildSchema = z.object({ handler: z.custom<Handler>((value) => typeof value === 'function') });

async function loadHandler(): Promise<Handler> {
  process.env.ASTRO_NODE_AUTOSTART = 'disabled';
  const entry = path.join(import.meta.dirname, 'dist/server/entry.mjs');
  return buildSchema.parse(await import(pathToFileURL(entry).href)).handler;
}

async function serve(): Promise<void> {
  const { HOST, PORT, TRUSTED_PROXIES, APP_ORIGIN } = env();
  // Read here too, so that what is missing is said at the start and not at the first drop.
  readNoticesConfig(process.env);
  const handler = await loadHandler();
  const isHttps = APP_ORIGIN.startsWith('https:');
  const server = createServer((req, res) => {
    const refused = tidyRequest(req, res, { trustedProxies: TRUSTED_PROXIES, isHttps });
    if (!refused) handler(req, res);
  });
  server.headersTimeout = 20_000;
  server.requestTimeout = 120_000;
  server.keepAliveTimeout = 65_000;

  let isClosing = false;
  const close = async (): Promise<void> => {
    if (isClosing) return;
    isClosing = true;
    // A request that never ends must not keep the process.
    setTimeout(() => process.exit(1), CLOSE_WITHIN_MS).unref();
    const closed = new Promise<void>((resolve) => server.close(() => resolve()));
    // Streams first: they would hold the server open for ever.
    await closeAll();
    server.closeIdleConnections();
    setTimeout(() => server.closeAllConnections(), 2_000).unref();
    await closed;
    process.exit(0);
  };
  process.on('SIGTERM', () => void close());
  process.on('SIGINT', () => void close());

  server.on('error', (error) => {
    console.error(`The web server cannot listen on ${HOST}:${PORT}: ${error.message}`);
    process.exit(1);
  });
  server.listen(PORT, HOST, () => console.log(`web ready on http://${HOST}:${PORT}`));
}

try {
  await serve();
} catch (error) {
  const isSetting = error instanceof EnvironmentProblem || error instanceof ConfigProblem;
  console.error(isSetting ? error.message : error);
  process.exit(1);
}
