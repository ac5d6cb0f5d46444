import { createDocument, type ZodOpenApiOperationObject, type ZodOpenApiPathsObject } from 'zod-openapi';
import type { Contract } from './contract.ts';
import { allContracts } from './schemas/all.ts';
import { problemSchema } from './schemas/problem.ts';

/** The API's description in OpenAPI 3.1, made from the contracts and from nothing else. */
export function openApiDocument(): ReturnType<typeof createDocument> {
  const paths: ZodOpenApiPathsObject = {};
  for (const contract of allContracts) {
    paths[contract.path] = {
      ...paths[contract.path],
      [contract.method.toLowerCase()]: operationOf(contract),
    };
  }
  return createDocument({
    openapi: '3.1.0',
    info: {
      title: 'Strikeboard',
      version: '1',
      description:
        'Scheduling of concrete pours. Instants are epoch milliseconds, days are YYYY-MM-DD at the site, yards are yd³. Errors are problem documents (RFC 9457).',
    },
    paths,
    components: {
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'authjs.session-token' } },
    },
  });
}

function operationOf(contract: Contract): ZodOpenApiOperationObject {
  const { access, path, answers = 'json' } = contract;
  const names = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => String(name));
  return {
    summary: contract.summary,
    description: typeof access === 'string' ? `Access: ${access}.` : `Roles: ${access.join(', ')}.`,
    security: access === 'open' ? [] : [{ session: [] }],
    parameters: [
      ...names.map((name) => ({
        name,
        in: 'path' as const,
        required: true,
        schema: { type: 'string' as const },
      })),
      ...(contract.idempotent
        ? [
            {
              name: 'Idempotency-Key',
              in: 'header' as const,
              required: true,
              description: 'New for each write; the same key gets the first answer again.',
              schema: { type: 'string' as const, minLength: 8, maxLength: 128 },
            },
          ]
        : []),
    ],
    ...(contract.query && { requestParams: { query: asObject(contract.query) } }),
    ...(contract.body && {
      requestBody: { required: true, content: { 'application/json': { schema: contract.body } } },
    }),
    ...(contract.bytes && {
      requestBody: {
        required: true,
        content: { 'application/octet-stream': { schema: { type: 'string' as const, format: 'binary' } } },
      },
    }),
    responses: {
      200: {
        description: answers === 'events' ? 'Events; the data of `change` is this.' : 'Done.',
        content: {
          [answers === 'events' ? 'text/event-stream' : 'application/json']: { schema: contract.output },
        },
      },
      default: {
        description: 'A problem document.',
        content: { 'application/problem+json': { schema: problemSchema } },
      },
    },
  };
}

type QueryParams = NonNullable<NonNullable<ZodOpenApiOperationObject['requestParams']>['query']>;

/** Queries are objects by their contracts; their common type cannot say so. */
function asObject(query: NonNullable<Contract['query']>): QueryParams {
  return query as QueryParams;
}
