import {
  createServer,
  type IncomingMessage,
  type RequestListener,
  type Server,
  type ServerResponse,
} from 'node:http';
import type { z } from 'zod';

const BODY_LIMIT_BYTES = 256_000;

/** What a request asked for cannot be done; `status` is the HTTP status of the answer. */
export class RequestError extends Error {
  override readonly name = 'RequestError';
  readonly status: number;

  constructor(status: number, message: string) {
    super(message);
    this.status = status;
  }
}

export function pathOf(request: IncomingMessage): URL {
  return new URL(request.url ?? '/', 'http://127.0.0.1');
}

/** @throws RequestError 413 above 256 kB */
export async function readBody(request: IncomingMessage): Promise<string> {
  const parts: Buffer[] = [];
  let bytes = 0;
  for await (const part of request) {
    bytes += part.length;
    if (bytes > BODY_LIMIT_BYTES) throw new RequestError(413, `the body is over ${BODY_LIMIT_BYTES} bytes`);
    parts.push(part);
  }
  return Buffer.concat(parts).toString('utf8');
}

/** @throws RequestError 400 naming the field and what would be right */
export async function readJson<T>(request: IncomingMessage, schema: z.ZodType<T>): Promise<T> {
  const text = await readBody(request);
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    throw new RequestError(400, 'the body is no JSON');
  }
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const problems = result.error.issues.map((issue) => `${issue.path.join('.') || 'body'}: ${issue.message}`);
  throw new RequestError(400, problems.join('; '));
}

export function sendJson(response: ServerResponse, status: number, value: unknown): void {
  response.writeHead(status, {
    'content-type': 'application/json; charset=utf-8',
    'cache-control': 'no-store',
  });
  response.end(`${JSON.stringify(value)}\n`);
}

/** Listens on loopback only. Port 0 takes a free one. */
export async function listen(
  listener: RequestListener,
  port: number,
): Promise<{ server: Server; url: string; close(): Promise<void> }> {
  const server = createServer(listener);
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen({ port, host: '127.0.0.1' }, resolve);
  });
  const address = server.address();
  if (address === null || typeof address === 'string') throw new Error('the server has no port');
  return {
    server,
    url: `http://127.0.0.1:${address.port}`,
    close: () =>
      new Promise<void>((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}
