import { randomUUID } from 'node:crypto';
import { membershipBySlug, readSession } from '@strikeboard/db/queries/sign-in';
import type { APIContext, MiddlewareNext } from 'astro';
import { env } from './env.ts';
import { type Found, findAccess } from './lib/access.ts';
import { problemOf, problemResponse } from './lib/api/problems.ts';
import { nowMs } from './lib/server/clock.ts';
import { database } from './lib/server/database.ts';
import { describeError } from './lib/server/describe-error.ts';
import { log } from './lib/server/log.ts';
import { isFromHere } from './lib/server/origin.ts';
import { sessionCookieName } from './lib/server/session-cookie.ts';

/** Who is asking, of which company, and whether they may; then the page's or endpoint's own answer. */
export async function onRequest(context: APIContext, next: MiddlewareNext): Promise<Response> {
  const { locals, url, request } = context;
  locals.requestId ??= randomUUID();
  locals.person ??= null;
  locals.company ??= null;
  const startedMs = performance.now();
  const answer = (await refuse(context, next)) ?? (await answered(context, next));
  const { method } = request;
  const tookMs = Math.round(performance.now() - startedMs);
  // Tokens stand in the paths of links.
  const path = url.pathname.replace(/^(\/l|\/api\/links)\/.*/, '$1/…');
  log.debug({ requestId: locals.requestId, method, path, status: answer.status, tookMs }, 'answered');
  return withHeaders(answer, locals.requestId);
}

async function answered(context: APIContext, next: MiddlewareNext): Promise<Response> {
  try {
    return await next();
  } catch (error) {
    const { requestId } = context.locals;
    // A database error's message holds the statement and its values; only kind and place are kept.
    log.error({ requestId, path: context.routePattern, error: describeError(error) }, 'unexpected');
    if (isApi(context.url.pathname)) return unexpected(requestId);
    return page(next, '/500');
  }
}

/** A refusal, or null when the request may go on. */
async function refuse(context: APIContext, next: MiddlewareNext): Promise<Response | null> {
  const { url, request, locals } = context;
  if (!isFromHere(request, env().APP_ORIGIN)) {
    return problemResponse(problemOf('foreign-origin', 'The request was sent by a page of another site.'));
  }
  const found = findAccess(url.pathname, request.method);
  if (found.kind === 'none') return notFound(context, next);
  if (found.kind === 'method') return wrongMethod(found);
  if (found.access === 'open') return null;
  locals.person ??= await readPerson(context);
  if (locals.person === null) return signInFirst(context);
  if (found.access === 'signed-in') return null;
  const slug = found.slug ?? '';
  const membership = await membershipBySlug(database(), locals.person.id, slug);
  if (!membership) return notFound(context, next);
  const { companyId, ...company } = membership;
  locals.company = { id: companyId, ...company };
  return found.access.includes(company.role) ? null : notAllowed(context, next);
}

async function readPerson(context: APIContext): Promise<App.Locals['person']> {
  const token = context.cookies.get(sessionCookieName())?.value;
  if (!token) return null;
  const session = await readSession(database(), token, nowMs());
  if (!session) return null;
  const { personId, name, email, language, zone } = session;
  return { id: personId, name, email, language, zone };
}

function signInFirst(context: APIContext): Response {
  const { url, request } = context;
  if (isApi(url.pathname)) {
    return problemResponse(problemOf('not-signed-in', 'Sign in first.'));
  }
  const back = request.method === 'GET' ? `?to=${encodeURIComponent(url.pathname + url.search)}` : '';
  return context.redirect(`/sign-in${back}`);
}

async function notFound(context: APIContext, next: MiddlewareNext): Promise<Response> {
  if (isApi(context.url.pathname)) {
    return problemResponse(problemOf('not-found', 'There is nothing at this address for you.'));
  }
  return page(next, '/404');
}

async function notAllowed(context: APIContext, next: MiddlewareNext): Promise<Response> {
  const role = context.locals.company?.role ?? 'none';
  if (isApi(context.url.pathname)) {
    return problemResponse(
      problemOf('not-allowed', `Your role in this company (${role}) does not include this.`),
    );
  }
  return page(next, '/403');
}

function wrongMethod(found: Extract<Found, { kind: 'method' }>): Response {
  const allow = [...new Set(found.allowed)].join(', ');
  return problemResponse(problemOf('method-not-allowed', `This address answers to ${allow}.`), {
    Allow: allow,
  });
}

function unexpected(requestId: string): Response {
  return problemResponse(problemOf('unexpected', 'A fault on our side. Nothing was kept.', { requestId }));
}

/** An error page in place of the one that was asked for, at the same address. */
async function page(next: MiddlewareNext, path: '/403' | '/404' | '/500'): Promise<Response> {
  const answer = await next(path);
  return new Response(answer.body, { status: Number(path.slice(1)), headers: answer.headers });
}

function isApi(pathname: string): boolean {
  return pathname.startsWith('/api/');
}

/** A copy, since the headers of some answers (redirects of the sign-in library) cannot be changed. */
function withHeaders(answer: Response, requestId: string): Response {
  const copy = new Response(answer.body, answer);
  const { headers } = copy;
  headers.set('X-Request-Id', requestId);
  if (!headers.has('Cache-Control')) headers.set('Cache-Control', 'no-store');
  const policy = headers.get('content-security-policy');
  // Astro's own policy has no word for style attributes, which charts and the board set on their elements.
  if (policy)
    headers.set(
      'content-security-policy',
      `${policy.replace(/;?\s*$/, ';')} style-src-attr 'unsafe-inline';`,
    );
  return copy;
}
