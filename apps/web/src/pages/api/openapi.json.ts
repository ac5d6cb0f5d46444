import type { APIRoute } from 'astro';
import { openApiDocument } from '../../lib/api/openapi.ts';

let text: string | undefined;

/** The API's description, made from the contracts. */
export const GET: APIRoute = () => {
  text ??= JSON.stringify(openApiDocument());
  return new Response(text, {
    headers: { 'Content-Type': 'application/json', 'Cache-Control': 'public, max-age=300' },
  });
};
