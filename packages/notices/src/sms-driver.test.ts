import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import { type AddressInfo, createServer as createTcpServer } from 'node:net';
import { afterEach, describe, expect, it } from 'vitest';
import { createSmsDriver, resultOf } from './sms-driver.ts';

// Address, form fields, JSON and error codes of the provider's Messages resource: its documentation (published).
const SID = `SM${'1'.repeat(32)}`;
const account = { smsAccountSid: `AC${'0'.repeat(32)}`, smsAuthToken: 'token', smsFrom: '+17205550100' };
const message = {
  to: '+13035550123',
  body: 'Tue Dec 8. Entrada 6:30 & café',
  statusUrl: 'https://board.example.com/api/sms/status?company=1&notice=2',
};

let server: Server | undefined;

afterEach(() => {
  server?.closeAllConnections();
  server?.close();
  server = undefined;
});

type Seen = { url?: string; authorization?: string; form: URLSearchParams };

/** A provider on loopback that answers every request with `answer`. */
async function providerThat(
  answer: (request: IncomingMessage, response: ServerResponse) => void,
): Promise<{ smsBaseUrl: string; seen: Seen[] }> {
  const seen: Seen[] = [];
  const started = createServer((request, response) => {
    const chunks: Buffer[] = [];
    request.on('data', (chunk: Buffer) => chunks.push(chunk));
    request.on('end', () => {
      const form = new URLSearchParams(Buffer.concat(chunks).toString('utf8'));
      seen.push({ url: request.url, authorization: request.headers.authorization, form });
      answer(request, response);
    });
  });
  server = started;
  await new Promise<void>((resolve) => started.listen(0, '127.0.0.1', resolve));
  return { smsBaseUrl: `http://127.0.0.1:${(started.address() as AddressInfo).port}`, seen };
}

function json(status: number, body: unknown) {
  return (_request: IncomingMessage, response: ServerResponse) => {
    response.writeHead(status, { 'content-type': 'application/json' }).end(JSON.stringify(body));
  };
}

describe('sending through the SDK', () => {
  it('hands over number, text and where to report', async () => {
    const { smsBaseUrl, seen } = await providerThat(json(201, { sid: SID, status: 'queued' }));
    const driver = createSmsDriver({ ...account, smsBaseUrl });
    expect(await driver.send(message)).toEqual({ outcome: 'accepted', providerId: SID });
    expect(seen).toHaveLength(1);
    expect(seen[0]?.url).toBe(`/2010-04-01/Accounts/${account.smsAccountSid}/Messages.json`);
    expect(seen[0]?.authorization).toBe(
      `Basic ${Buffer.from(`${account.smsAccountSid}:token`).toString('base64')}`,
    );
    expect(Object.fromEntries(seen[0]?.form ?? [])).toEqual({
      To: '+13035550123',
      From: '+17205550100',
      Body: message.body,
      StatusCallback: message.statusUrl,
    });
  });

  it.each([
    [400, 21211, 'refused'],
    [400, 21610, 'refused'],
    [400, 21614, 'refused'],
    [429, 20429, 'retry'],
    [500, 20500, 'retry'],
    [503, 20503, 'retry'],
    [401, 20003, 'retry'],
  ])('sorts HTTP %i with code %i as %s, and asks once', async (status, code, outcome) => {
    const { smsBaseUrl, seen } = await providerThat(
      json(status, { code, message: 'No +13035550123', status }),
    );
    const result = await createSmsDriver({ ...account, smsBaseUrl }).send(message);
    expect(result).toEqual({ outcome, code: String(code) });
    expect(seen).toHaveLength(1);
  });

  it.each([
    [502, 'unsure'],
    [504, 'unsure'],
    [503, 'retry'],
    [429, 'retry'],
    [403, 'retry'],
  ])('sorts HTTP %i from something on the way as %s', async (status, outcome) => {
    const { smsBaseUrl } = await providerThat((_request, response) => {
      response.writeHead(status, { 'content-type': 'text/html' }).end('<h1>Sorry</h1>');
    });
    const result = await createSmsDriver({ ...account, smsBaseUrl }).send(message);
    expect(result).toEqual({ outcome, code: `http-${status}` });
  });

  it('is unsure when the connection breaks before the answer', async () => {
    const { smsBaseUrl, seen } = await providerThat((request) => request.socket.destroy());
    const result = await createSmsDriver({ ...account, smsBaseUrl }).send(message);
    expect(result).toEqual({ outcome: 'unsure', code: 'ECONNRESET' });
    expect(seen).toHaveLength(1);
  });

  it('is unsure when no answer comes in time', async () => {
    const { smsBaseUrl } = await providerThat(() => {});
    const result = await createSmsDriver({ ...account, smsBaseUrl }, { timeoutMs: 200 }).send(message);
    expect(result).toEqual({ outcome: 'unsure', code: 'ECONNABORTED' });
  });

  it('tries again later when nothing listens', async () => {
    const closed = createTcpServer();
    await new Promise<void>((resolve) => closed.listen(0, '127.0.0.1', resolve));
    const { port } = closed.address() as AddressInfo;
    await new Promise((resolve) => closed.close(resolve));
    const result = await createSmsDriver({ ...account, smsBaseUrl: `http://127.0.0.1:${port}` }).send(
      message,
    );
    expect(result).toEqual({ outcome: 'retry', code: 'ECONNREFUSED' });
  });
});

describe('what the network throws', () => {
  // Codes: Node's documentation of errors and libuv's names (published).
  it.each([
    [{ code: 'ENOTFOUND', cause: { syscall: 'getaddrinfo' } }, 'retry'],
    [{ code: 'EAI_AGAIN', cause: { syscall: 'getaddrinfo' } }, 'retry'],
    [{ code: 'ETIMEDOUT', cause: { syscall: 'connect' } }, 'retry'],
    [
      { code: 'ETIMEDOUT', cause: new AggregateError([{ syscall: 'connect' }, { syscall: 'connect' }]) },
      'retry',
    ],
    [{ code: 'ETIMEDOUT', cause: { syscall: 'read' } }, 'unsure'],
    [{ code: 'ETIMEDOUT', cause: undefined }, 'unsure'],
    [{ code: 'ECONNRESET', cause: { syscall: 'read' } }, 'unsure'],
    [{ code: 'EPIPE', cause: { syscall: 'write' } }, 'unsure'],
    [{ code: 'CERT_HAS_EXPIRED', cause: undefined }, 'retry'],
    [new TypeError('a bug'), 'unsure'],
  ])('%o is %s', (error, outcome) => {
    expect(resultOf(error)).toMatchObject({ outcome });
  });
});
