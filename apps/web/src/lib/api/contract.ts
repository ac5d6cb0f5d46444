/**
 * What an endpoint takes and gives, who may call it, and where it is. Server, client, access table and
 * /api/openapi.json all read the same contracts.
 */

import type { Role } from '@strikeboard/domain/vocabulary';
import type { z } from 'zod';

/** `open`: anyone; `signed-in`: any person; a list: members of the slug's company with one of the roles. */
export type Access = 'open' | 'signed-in' | readonly Role[];

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH';

/** Names in braces of a path: `{slug}` and `{id}` of `/api/{slug}/visits/{id}`. */
export type ParamsOf<Path extends string> = Path extends `${string}{${infer Name}}${infer Rest}`
  ? { [K in Name]: string } & ParamsOf<Rest>
  : unknown;

export interface Contract<
  Path extends string = string,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Output extends z.ZodType = z.ZodType,
> {
  method: Method;
  path: Path;
  /** One line for the API's description. */
  summary: string;
  access: Access;
  query?: Query;
  /** JSON body; left out: none is read. */
  body?: Body;
  /** The body is a file's bytes, read by the endpoint itself. */
  bytes?: true;
  output: Output;
  /** What is answered: JSON, or a stream of events of which `output` is one. */
  answers?: 'json' | 'events';
  /** A write with an Idempotency-Key, whose repetition gets the first answer again. */
  idempotent?: true;
  /** Largest body, bytes; left out: {@link DEFAULT_LIMIT_BYTES}. */
  limitBytes?: number;
}

export const DEFAULT_LIMIT_BYTES = 1024 * 1024;

/** Infers a contract's types from its parts. */
export function contract<
  const Path extends string,
  Output extends z.ZodType,
  Query extends z.ZodType = z.ZodUndefined,
  Body extends z.ZodType = z.ZodUndefined,
>(parts: Contract<Path, Query, Body, Output>): Contract<Path, Query, Body, Output> {
  return parts;
}

/** The path with its parameters filled in and a query added. */
export function addressOf(
  path: string,
  params: Readonly<Record<string, string>>,
  query: Readonly<Record<string, unknown>> = {},
): string {
  const filled = path.replace(/\{(\w+)\}/g, (_, name: string) => {
    const value = params[name];
    if (value === undefined) throw new Error(`${path} needs ${name}`);
    return encodeURIComponent(value);
  });
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value !== undefined && value !== null) search.set(name, String(value));
  }
  const text = search.toString();
  return text === '' ? filled : `${filled}?${text}`;
}

/** The path's parameters in an address, or null when the address is another one. */
export function matchPath(path: string, pathname: string): Record<string, string> | null {
  const parts = path.split('/');
  const given = pathname.replace(/(?<=.)\/$/, '').split('/');
  if (parts.length !== given.length) return null;
  const params: Record<string, string> = {};
  for (const [index, part] of parts.entries()) {
    const value = given[index] ?? '';
    const name = /^\{(\w+)\}$/.exec(part)?.[1];
    if (name === undefined) {
      if (part !== value) return null;
    } else {
      const decoded = decode(value);
      if (decoded === null || decoded === '') return null;
      params[name] = decoded;
    }
  }
  return params;
}

function decode(text: string): string | null {
  try {
    return decodeURIComponent(text);
  } catch {
    return null;
  }
}
