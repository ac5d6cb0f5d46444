import type { z } from 'zod';
import { addressOf, type Contract, type ParamsOf } from '../api/contract.ts';
import { type Problem, problemSchema } from '../api/schemas/problem.ts';

/** The server refused, or could not be reached (`code` is then `unreachable`, status 0). */
export class ApiProblem extends Error {
  readonly problem: Problem;

  constructor(problem: Problem) {
    super(problem.detail);
    this.name = 'ApiProblem';
    this.problem = problem;
  }

  /** What was expected of a field, or null when nothing is wrong with it. */
  expected(field: string): string | null {
    return this.problem.errors?.find((error) => error.field === field)?.expected ?? null;
  }
}

type Given<Key extends string, S> = S extends z.ZodUndefined
  ? { [K in Key]?: undefined }
  : S extends z.ZodType
    ? { [K in Key]: z.input<S> }
    : { [K in Key]?: undefined };

/** What a call needs, by its contract: parameters of the path, query, body. */
export type CallInput<C> =
  C extends Contract<infer Path, infer Query, infer Body, z.ZodType>
    ? { params: ParamsOf<Path> } & Given<'query', Query> &
        Given<'body', Body> & {
          signal?: AbortSignal;
          /** The same key sends the same write again without doing it twice; left out: a new one. */
          key?: string;
          /** A file's bytes, for contracts with `bytes`. */
          bytes?: Blob;
        }
    : never;

/** A new Idempotency-Key. Works on plain-http addresses too, where crypto.randomUUID is missing. */
export function newKey(): string {
  return Array.from(crypto.getRandomValues(new Uint8Array(16)), (byte) =>
    byte.toString(16).padStart(2, '0'),
  ).join('');
}

/**
 * Calls an endpoint by its contract and returns its checked answer.
 * @throws ApiProblem with the server's problem document
 */
export async function call<
  Path extends string,
  Q extends z.ZodType,
  B extends z.ZodType,
  O extends z.ZodType,
>(contract: Contract<Path, Q, B, O>, input: CallInput<Contract<Path, Q, B, O>>): Promise<z.output<O>> {
  const { params, query, body, signal, key, bytes } = input;
  const headers: Record<string, string> = { Accept: 'application/json' };
  if (contract.idempotent) headers['Idempotency-Key'] = key ?? newKey();
  if (contract.body) headers['Content-Type'] = 'application/json';
  if (contract.bytes) headers['Content-Type'] = 'application/octet-stream';
  const response = await fetch(addressOf(contract.path, toRecord(params), toRecord(query)), {
    method: contract.method,
    headers,
    body: contract.bytes ? (bytes ?? null) : contract.body ? JSON.stringify(body) : null,
    signal: signal ?? null,
  }).catch((error: unknown) => {
    if (signal?.aborted) throw error;
    throw new ApiProblem(unreachable());
  });
  if (!response.ok) throw new ApiProblem(await readProblem(response));
  return contract.output.parse(await response.json());
}

function toRecord(value: unknown): Record<string, string> {
  if (typeof value !== 'object' || value === null) return {};
  return Object.fromEntries(
    Object.entries(value).flatMap(([name, inner]) => (inner === undefined ? [] : [[name, String(inner)]])),
  );
}

async function readProblem(response: Response): Promise<Problem> {
  const parsed = problemSchema.safeParse(await response.json().catch(() => null));
  if (parsed.success) return parsed.data;
  return {
    type: '/problems/unexpected',
    title: 'No answer that can be read',
    status: response.status,
    detail: `The server answered ${response.status} without saying why.`,
    code: 'unexpected',
  };
}

function unreachable(): Problem {
  return {
    type: '/problems/unreachable',
    title: 'No connection',
    status: 0,
    detail: 'The server cannot be reached. Nothing was changed; try again when you are connected.',
    code: 'unreachable',
  };
}
