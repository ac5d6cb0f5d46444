import { problemWords } from '../words/office-problems.en.ts';
import type { FieldError, Problem } from './schemas/problem.ts';

/** Every problem code with its status; its words are the catalogue's, which the pages at /problems/{code} show. */
export const problemStatuses = {
  malformed: 400,
  'not-signed-in': 401,
  'not-allowed': 403,
  'foreign-origin': 403,
  'bad-signature': 403,
  'not-found': 404,
  'method-not-allowed': 405,
  'stale-version': 409,
  conflict: 409,
  'key-reused': 409,
  'too-large': 413,
  'wrong-type': 415,
  invalid: 422,
  stops: 422,
  'reason-needed': 422,
  'too-often': 429,
  unexpected: 500,
} as const;

export type ProblemCode = keyof typeof problemStatuses;

/** Whether a text is the code of a problem. */
export function isProblemCode(text: string): text is ProblemCode {
  return Object.hasOwn(problemStatuses, text);
}

type Extra = Omit<Partial<Problem>, 'type' | 'title' | 'status' | 'code' | 'detail'>;

/** Makes a problem document. */
export function problemOf(code: ProblemCode, detail: string, extra: Extra = {}): Problem {
  const { title } = problemWords[code];
  return { type: `/problems/${code}`, title, status: problemStatuses[code], detail, code, ...extra };
}

/** Thrown by an endpoint to answer with a problem. */
export class ProblemError extends Error {
  readonly problem: Problem;
  readonly headers: Record<string, string>;

  constructor(code: ProblemCode, detail: string, extra: Extra = {}, headers: Record<string, string> = {}) {
    super(detail);
    this.name = 'ProblemError';
    this.problem = problemOf(code, detail, extra);
    this.headers = headers;
  }
}

/** Fields of a request that are wrong, as a problem. */
export function invalid(errors: FieldError[]): ProblemError {
  const detail = errors
    .slice(0, 3)
    .map(({ field, expected }) => `${field === '' ? 'The body' : field}: expected ${expected}`)
    .join('; ');
  return new ProblemError('invalid', `${detail}.`, { errors });
}

export function problemResponse(problem: Problem, headers: Record<string, string> = {}): Response {
  return new Response(JSON.stringify(problem), {
    status: problem.status,
    headers: { 'Content-Type': 'application/problem+json', 'Cache-Control': 'no-store', ...headers },
  });
}
