import type { z } from 'zod';
import { DEFAULT_LIMIT_BYTES } from './contract.ts';
import { invalid, ProblemError } from './problems.ts';
import type { FieldError } from './schemas/problem.ts';

/** Over this no more is read; a sender who goes on finds the connection closed. */
const MOST_DISCARDED_BYTES = 12 * 1024 * 1024;

/** The bytes of a body, never more than the limit in memory. @throws ProblemError 413 */
export async function readBytes(request: Request, limitBytes: number): Promise<Uint8Array> {
  const chunks: Uint8Array[] = [];
  let size = 0;
  const reader = request.body?.getReader();
  // A sender may say a small length, or none, and send more. What is too much is read and thrown away, since many
  // senders look for the answer only when they have sent all.
  for (let read = await reader?.read(); read && !read.done; read = await reader?.read()) {
    size += read.value.byteLength;
    if (size <= limitBytes) chunks.push(read.value);
    else chunks.length = 0;
    if (size > MOST_DISCARDED_BYTES) {
      await reader?.cancel();
      break;
    }
  }
  if (size > limitBytes) {
    throw new ProblemError('too-large', `The body may hold at most ${sizeText(limitBytes)}.`);
  }
  return Buffer.concat(chunks);
}

/** The body as JSON. @throws ProblemError 413, 415, 400 */
export async function readJson(request: Request, limitBytes = DEFAULT_LIMIT_BYTES): Promise<unknown> {
  const type = request.headers.get('content-type')?.split(';')[0]?.trim().toLowerCase();
  if (type !== 'application/json') {
    throw new ProblemError('wrong-type', `Send application/json${type ? `, not ${cut(type)}` : ''}.`);
  }
  const bytes = await readBytes(request, limitBytes);
  try {
    return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes));
  } catch (error) {
    const detail = error instanceof SyntaxError ? error.message : 'it is not UTF-8';
    throw new ProblemError('malformed', `The body is not valid JSON: ${cut(detail)}.`);
  }
}

/** `value` as the schema has it. @throws ProblemError 422 that names each field, what was given and what is right */
export function parseWith<S extends z.ZodType>(schema: S, value: unknown): z.output<S> {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  throw invalid(fieldErrors(result.error, value));
}

/** The problems of a parse, by field. */
export function fieldErrors(error: z.ZodError, given: unknown): FieldError[] {
  return error.issues.slice(0, 50).flatMap((issue): FieldError[] => {
    if (issue.code === 'unrecognized_keys') {
      return issue.keys.map((key) => ({
        field: pathText([...issue.path, key]),
        value: null,
        expected: 'no such field',
      }));
    }
    const value = valueAt(given, issue.path);
    return [{ field: pathText(issue.path), value: shown(value), expected: expectedText(issue.message) }];
  });
}

function pathText(path: readonly PropertyKey[]): string {
  return path.map(String).join('.');
}

function valueAt(value: unknown, path: readonly PropertyKey[]): unknown {
  let at = value;
  for (const key of path) {
    if (typeof at !== 'object' || at === null) return undefined;
    at = Reflect.get(at, key);
  }
  return at;
}

function shown(value: unknown): unknown {
  if (value === undefined || value === null) return null;
  if (typeof value === 'string') return cut(value);
  return typeof value === 'object' ? cut(JSON.stringify(value)) : value;
}

/** The library's own messages say "Invalid input: expected …"; ours begin with what is expected. */
function expectedText(message: string): string {
  const own = /expected (.+?)(, received .*)?$/.exec(message)?.[1] ?? message;
  return own.trim();
}

function cut(text: string): string {
  return text.length > 100 ? `${text.slice(0, 100)}…` : text;
}

function sizeText(bytes: number): string {
  return bytes >= 1024 * 1024 ? `${Math.floor(bytes / 1024 / 1024)} MB` : `${Math.floor(bytes / 1024)} kB`;
}
