import { createHash } from 'node:crypto';
import { type Database, inCompany, type Tx } from '@strikeboard/db/client';
import { oncePerKey } from '@strikeboard/db/idempotency';
import { InputProblem } from '@strikeboard/domain/problem';
import type { APIContext, APIRoute } from 'astro';
import { z } from 'zod';
import type { Company, SignedIn } from '../locals.ts';
import { nowMs } from '../server/clock.ts';
import { database } from '../server/database.ts';
import { describeError } from '../server/describe-error.ts';
import { log } from '../server/log.ts';
import { type Contract, matchPath, type ParamsOf } from './contract.ts';
import { problemOfDatabase } from './database-problems.ts';
import { invalid, ProblemError, problemOf, problemResponse } from './problems.ts';
import { fieldErrors, parseWith, readJson } from './read-body.ts';

/** What every handler is given. */
export interface Given<Path extends string, Q extends z.ZodType, B extends z.ZodType> {
  params: ParamsOf<Path>;
  query: z.output<Q>;
  body: z.output<B>;
  nowMs: number;
  context: APIContext;
  db: Database;
}

type Answer<O extends z.ZodType> = z.input<O> | Response;

/** An endpoint that anyone may call, or one that checks its caller by itself. */
export function openEndpoint<P extends string, Q extends z.ZodType, B extends z.ZodType, O extends z.ZodType>(
  contract: Contract<P, Q, B, O>,
  handle: (given: Given<P, Q, B>) => Promise<Answer<O>>,
): APIRoute {
  return (context) =>
    answer(context, async () => {
      const given = await readInput(contract, context);
      return respond(await handle({ ...given, context, db: database(), nowMs: nowMs() }));
    });
}

/** An endpoint of the person who is signed in, whatever the company. */
export function personEndpoint<
  P extends string,
  Q extends z.ZodType,
  B extends z.ZodType,
  O extends z.ZodType,
>(
  contract: Contract<P, Q, B, O>,
  handle: (given: Given<P, Q, B> & { person: SignedIn }) => Promise<Answer<O>>,
): APIRoute {
  return openEndpoint(contract, async (given) => {
    const { person } = given.context.locals;
    if (!person) throw new ProblemError('not-signed-in', 'Sign in first.');
    return handle({ ...given, person });
  });
}

/** An endpoint of the slug's company that opens its transactions by itself. */
export function memberEndpoint<
  P extends string,
  Q extends z.ZodType,
  B extends z.ZodType,
  O extends z.ZodType,
>(
  contract: Contract<P, Q, B, O>,
  handle: (given: Given<P, Q, B> & { person: SignedIn; company: Company }) => Promise<Answer<O>>,
): APIRoute {
  return personEndpoint(contract, async (given) => {
    const { company } = given.context.locals;
    if (!company) throw new ProblemError('not-found', 'There is nothing at this address for you.');
    return handle({ ...given, company });
  });
}

/**
 * An endpoint of the slug's company. The handler runs in one transaction with company and person set; with
 * `idempotent` the first answer is kept in it, and given again to the same key.
 */
export function companyEndpoint<
  P extends string,
  Q extends z.ZodType,
  B extends z.ZodType,
  O extends z.ZodType,
>(
  contract: Contract<P, Q, B, O>,
  handle: (given: Given<P, Q, B> & { person: SignedIn; company: Company; tx: Tx }) => Promise<Answer<O>>,
): APIRoute {
  return memberEndpoint(contract, async (given) => {
    const of = { companyId: given.company.id, personId: given.person.id };
    if (!contract.idempotent) return inCompany(given.db, of, (tx) => handle({ ...given, tx }));
    const key = readKey(given.context.request);
    const requestHash = hashOf(contract, given.params, given.body);
    const kept = await inCompany(given.db, of, (tx) =>
      oncePerKey(tx, { key, personId: given.person.id, requestHash, nowMs: given.nowMs }, async () => {
        const body = await handle({ ...given, tx });
        if (body instanceof Response) throw new Error('An idempotent endpoint answers with JSON.');
        return { status: 200, body };
      }),
    );
    return Response.json(kept.body, { status: kept.status });
  });
}

async function readInput<P extends string, Q extends z.ZodType, B extends z.ZodType>(
  contract: Contract<P, Q, B>,
  { request, url }: APIContext,
): Promise<{ params: ParamsOf<P>; query: z.output<Q>; body: z.output<B> }> {
  const params = readParams(contract.path, url.pathname);
  const query = contract.query ? parseWith(contract.query, readQuery(url)) : undefined;
  const body = contract.body
    ? parseWith(contract.body, await readJson(request, contract.limitBytes))
    : undefined;
  // Parts that the contract does not name are typed as undefined, which is what they are here.
  return { params, query: query as z.output<Q>, body: body as z.output<B> };
}

const paramSchemas: Readonly<Record<string, z.ZodType>> = {
  id: z.uuid(),
  revision: z.string().regex(/^\d{1,15}$/),
};

/** Something in the path that cannot be an id is an unknown id. */
function readParams<P extends string>(path: P, pathname: string): ParamsOf<P> {
  const params = matchPath(path, pathname);
  const wrong = Object.entries(params ?? {}).some(
    ([name, value]) => paramSchemas[name]?.safeParse(value).success === false,
  );
  if (!params || wrong) throw new ProblemError('not-found', 'There is nothing at this address for you.');
  return params as ParamsOf<P>;
}

function readQuery(url: URL): Record<string, string> {
  return Object.fromEntries(url.searchParams);
}

const keySchema = z
  .string('a key of 8 to 128 letters, new for each write')
  .regex(/^[\x21-\x7e]{8,128}$/, 'a key of 8 to 128 letters, new for each write');

function readKey(request: Request): string {
  const given = request.headers.get('idempotency-key') ?? undefined;
  const parsed = keySchema.safeParse(given);
  if (parsed.success) return parsed.data;
  const errors = fieldErrors(parsed.error, given).map((error) => ({ ...error, field: 'Idempotency-Key' }));
  throw new ProblemError('malformed', 'The header Idempotency-Key is missing or wrong.', { errors });
}

/** Tells two requests with the same key apart. */
function hashOf(contract: Contract, params: unknown, body: unknown): string {
  const request = JSON.stringify([contract.method, contract.path, params, body ?? null]);
  return createHash('sha256').update(request).digest('hex');
}

function respond(answered: unknown): Response {
  return answered instanceof Response ? answered : Response.json(answered ?? null);
}

/** Runs an endpoint; what it throws becomes a problem document. */
export async function answer(context: APIContext, run: () => Promise<Response>): Promise<Response> {
  try {
    return await run();
  } catch (error) {
    if (error instanceof ProblemError) return problemResponse(error.problem, error.headers);
    if (error instanceof InputProblem) {
      const { field, value, expected } = error;
      return problemResponse(
        invalid([{ field, value: typeof value === 'object' ? null : value, expected }]).problem,
      );
    }
    const known = problemOfDatabase(error);
    if (known) return problemResponse(known);
    const { requestId } = context.locals;
    log.error({ requestId, route: context.routePattern, error: describeError(error) }, 'unexpected');
    return problemResponse(problemOf('unexpected', 'A fault on our side. Nothing was kept.', { requestId }));
  }
}
