import type { FieldError, Problem } from './schemas/problem.ts';

/** Every problem code with its status, title and what it means; the pages at /problems/{code} say the same. */
export const problemKinds = {
  malformed: {
    status: 400,
    title: 'Not readable',
    meaning: 'The body is not valid JSON, or a header that the request needs is missing or wrong.',
    remedy: 'Send valid JSON, and the header that the detail names.',
  },
  'not-signed-in': {
    status: 401,
    title: 'Not signed in',
    meaning: 'No session came with the request, or it has ended.',
    remedy: 'Sign in and send the request again.',
  },
  'not-allowed': {
    status: 403,
    title: 'Not allowed',
    meaning: 'Your role in this company does not include this.',
    remedy: 'Ask an owner or a dispatcher of the company.',
  },
  'foreign-origin': {
    status: 403,
    title: 'Sent from elsewhere',
    meaning: 'The request was sent by a page of another site.',
    remedy: 'Use the page of this site.',
  },
  'bad-signature': {
    status: 403,
    title: 'Signature wrong',
    meaning: "The provider's signature does not belong to this request.",
    remedy: "Check that account token and public address are the provider's.",
  },
  'not-found': {
    status: 404,
    title: 'Not found',
    meaning: 'There is no such thing, or it belongs to another company.',
    remedy: 'Go back and choose it again.',
  },
  'method-not-allowed': {
    status: 405,
    title: 'Method not allowed',
    meaning: 'This address does not answer to this method.',
    remedy: 'Use one of the methods in the Allow header.',
  },
  'stale-version': {
    status: 409,
    title: 'Changed since',
    meaning: 'Someone else has changed it since you loaded it. Nothing of your change was kept.',
    remedy: 'Look at what is different now and decide again.',
  },
  conflict: {
    status: 409,
    title: 'Does not go together',
    meaning: 'What is there now does not allow this.',
    remedy: 'The detail says what stands against it.',
  },
  'key-reused': {
    status: 409,
    title: 'Key used before',
    meaning: 'The same Idempotency-Key came with another request.',
    remedy: 'Use a new key for a new request.',
  },
  'too-large': {
    status: 413,
    title: 'Too large',
    meaning: 'The body is larger than this endpoint takes.',
    remedy: 'Send less at once.',
  },
  'wrong-type': {
    status: 415,
    title: 'Wrong type of content',
    meaning: 'The body is of a type that this endpoint does not read.',
    remedy: 'Send application/json, or the type that the detail names.',
  },
  invalid: {
    status: 422,
    title: 'Some of it is not right',
    meaning: 'Fields are missing or have values that cannot be.',
    remedy: 'Each field in `errors` says what was expected.',
  },
  stops: {
    status: 422,
    title: 'Cannot stand there',
    meaning: 'At least one check says that it cannot be.',
    remedy: 'Choose another place: `nearest` names some that fit.',
  },
  'reason-needed': {
    status: 422,
    title: 'Needs a reason',
    meaning: 'It can stand there, with cautions that someone has to accept.',
    remedy: 'Send a reason for each caution in `findings`.',
  },
  'too-often': {
    status: 429,
    title: 'Too often',
    meaning: 'Too many tries in a short time.',
    remedy: 'Wait as long as the Retry-After header says.',
  },
  unexpected: {
    status: 500,
    title: 'Something went wrong here',
    meaning: 'A fault on our side. Nothing was kept.',
    remedy: 'Try again. If it stays, name the request id to whoever runs this installation.',
  },
} as const;

export type ProblemCode = keyof typeof problemKinds;

type Extra = Omit<Partial<Problem>, 'type' | 'title' | 'status' | 'code' | 'detail'>;

/** Makes a problem document. */
export function problemOf(code: ProblemCode, detail: string, extra: Extra = {}): Problem {
  const { status, title } = problemKinds[code];
  return { type: `/problems/${code}`, title, status, detail, code, ...extra };
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
