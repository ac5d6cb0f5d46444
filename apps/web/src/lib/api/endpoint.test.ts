import { Conflict, NotFound, Refused, StaleVersion } from '@strikeboard/db/errors';
import { InputProblem } from '@strikeboard/domain/problem';
import type { APIContext } from 'astro';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { contract } from './contract.ts';
import { problemSchema } from './schemas/problem.ts';

const echo = contract({
  method: 'POST',
  path: '/api/{slug}/visits/{id}/echo',
  summary: 'Says it again',
  access: 'open',
  query: z.object({ times: z.coerce.number('a number').int('a whole number').default(1) }),
  body: z.object({
    plannedMin: z.number('minutes').min(15, 'at least 15 minutes'),
    tags: z.array(z.string('a text')),
  }),
  output: z.object({ plannedMin: z.number() }),
  limitBytes: 1024,
});
const address = 'https://board.example.com/api/cedar-flat/visits/01990000-0000-7000-8000-000000000001/echo';
const good = JSON.stringify({ plannedMin: 60, tags: [] });

let openEndpoint: typeof import('./endpoint.ts').openEndpoint;

beforeAll(async () => {
  vi.stubEnv('DATABASE_URL', 'postgres://nobody@127.0.0.1:1/none');
  vi.stubEnv('APP_ORIGIN', 'https://board.example.com');
  vi.stubEnv('AUTH_SECRET', 'x'.repeat(32));
  vi.stubEnv('LOG_LEVEL', 'silent');
  ({ openEndpoint } = await import('./endpoint.ts'));
});

async function ask(
  init: { body?: BodyInit | null; type?: string; url?: string },
  handle: () => Promise<{ plannedMin: number }> = async () => ({ plannedMin: 60 }),
) {
  const request = new Request(init.url ?? address, {
    method: 'POST',
    headers: { 'content-type': init.type ?? 'application/json' },
    body: init.body ?? good,
    ...(init.body instanceof ReadableStream && { duplex: 'half' }),
  });
  const locals = { person: null, company: null, requestId: 'r-1' };
  // Only what the helper reads of a context.
  const context = {
    request,
    url: new URL(request.url),
    locals,
    routePattern: '/echo',
  } as unknown as APIContext;
  const response = await openEndpoint(echo, handle)(context);
  const json: unknown = await response.json();
  return { status: response.status, type: response.headers.get('content-type'), json };
}

async function problem(...args: Parameters<typeof ask>) {
  const { status, type, json } = await ask(...args);
  expect(type).toBe('application/problem+json');
  const document = problemSchema.parse(json);
  expect(document.status).toBe(status);
  return document;
}

describe('bad input to an endpoint (RFC 9457)', () => {
  it('answers good input with the value', async () => {
    expect(await ask({})).toMatchObject({ status: 200, json: { plannedMin: 60 } });
  });

  it.each([
    ['{"plannedMin": 60,', 400, 'malformed'],
    ['', 400, 'malformed'],
    ['null', 422, 'invalid'],
    ['[]', 422, 'invalid'],
  ])('body %j: %i %s', async (body, status, code) => {
    expect(await problem({ body: new TextEncoder().encode(body) })).toMatchObject({ status, code });
  });

  it('refuses text that is not UTF-8', async () => {
    expect(await problem({ body: new Uint8Array([0x22, 0xff, 0x22]) })).toMatchObject({ status: 400 });
  });

  it('names every wrong field, what was given and what is right', async () => {
    const { errors } = await problem({ body: JSON.stringify({ plannedMin: 5, tags: ['a', 7] }) });
    expect(errors).toEqual([
      { field: 'plannedMin', value: 5, expected: 'at least 15 minutes' },
      { field: 'tags.1', value: 7, expected: 'a text' },
    ]);
  });

  it('says which field is missing', async () => {
    const { errors } = await problem({ body: JSON.stringify({ tags: [] }) });
    expect(errors).toEqual([{ field: 'plannedMin', value: null, expected: 'minutes' }]);
  });

  it('refuses another type of content', async () => {
    expect(await problem({ type: 'text/plain' })).toMatchObject({ status: 415, code: 'wrong-type' });
  });

  it('refuses a body over the limit, also one that does not say its length', async () => {
    const long = JSON.stringify({ plannedMin: 60, tags: ['x'.repeat(2000)] });
    expect(await problem({ body: long })).toMatchObject({ status: 413 });
    const stream = new Blob([long]).stream();
    expect(await problem({ body: stream })).toMatchObject({ status: 413 });
  });

  it('takes something that cannot be an id for an unknown id', async () => {
    expect(await problem({ url: address.replace(/0199\S+(?=\/echo)/, '17') })).toMatchObject({ status: 404 });
  });

  it('refuses a query that is wrong', async () => {
    expect(await problem({ url: `${address}?times=often` })).toMatchObject({
      status: 422,
      errors: [{ field: 'times' }],
    });
  });
});

describe('what a handler throws (RFC 9457)', () => {
  const finding = {
    code: 'short-handed',
    severity: 'stop',
    visitId: 'v',
    against: [],
    during: null,
    facts: {},
    formula: null,
    source: { title: 't', status: 'arithmetic' },
    clears: [],
  } as const;

  it.each([
    [new NotFound('visit', 'v'), 404, 'not-found'],
    [new StaleVersion({ kind: 'visit', id: 'v' }, { version: 3 }, ['crewId']), 409, 'stale-version'],
    [
      new Refused('stops', [{ ...finding, against: [], clears: [] }], [{ crewId: 'c', crewStartMs: 1 }]),
      422,
      'stops',
    ],
    [new Refused('reason-needed', []), 422, 'reason-needed'],
    [new Conflict('key-reused'), 409, 'key-reused'],
    [new Conflict('visit-closed'), 409, 'visit-closed'],
    [new InputProblem('endMs', 1, 'an instant after the start'), 422, 'invalid'],
  ])('%s: %i %s', async (error, status, code) => {
    const document = await problem({}, async () => Promise.reject(error));
    expect(document).toMatchObject({ status, code });
  });

  it('keeps findings and nearest slots', async () => {
    const refused = new Refused(
      'stops',
      [{ ...finding, against: [], clears: [] }],
      [{ crewId: 'c', crewStartMs: 1 }],
    );
    const document = await problem({}, async () => Promise.reject(refused));
    expect(document.findings).toHaveLength(1);
    expect(document.nearest).toEqual([{ crewId: 'c', crewStartMs: 1 }]);
  });

  it('says nothing of a fault but its request id', async () => {
    const fault = new Error("select * from people where email = 'ana@example.com'");
    const document = await problem({}, async () => Promise.reject(fault));
    expect(document).toMatchObject({ status: 500, requestId: 'r-1' });
    expect(JSON.stringify(document)).not.toMatch(/select|example/);
  });
});
