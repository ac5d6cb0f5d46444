import type { APIRoute } from 'astro';
import { signOut } from '../lib/server/sign-in.ts';

/** Ends the session at once, in the database, and goes to the sign-in page. */
export const POST: APIRoute = async ({ request }) => {
  const answer = new Response(null, { status: 303, headers: { Location: '/sign-in' } });
  for (const cookie of await signOut(request)) answer.headers.append('Set-Cookie', cookie);
  return answer;
};
