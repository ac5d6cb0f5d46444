import { Auth, skipCSRFCheck } from '@auth/core';
import { z } from 'zod';
import authConfig from '../../../auth.config.ts';
import { env } from '../../env.ts';
import { sessionCookieName } from './session-cookie.ts';
import { countTry, forgetTries } from './sign-in-limits.ts';

export type SignInResult =
  | { kind: 'ok'; cookies: string[] }
  | { kind: 'wrong' }
  | { kind: 'blank' }
  | { kind: 'too-often'; waitSeconds: number };

const formSchema = z.object({
  email: z.string().trim().min(1).max(254),
  password: z.string().min(1).max(1000),
});

/** Checks a password and starts a session. Unknown accounts, wrong passwords and odd addresses get the same answer. */
export async function signIn(form: FormData, request: Request, address: string): Promise<SignInResult> {
  const parsed = formSchema.safeParse({ email: form.get('email'), password: form.get('password') });
  if (!parsed.success) return { kind: 'blank' };
  const { email, password } = parsed.data;
  const waitSeconds = await countTry(address, email);
  if (waitSeconds > 0) return { kind: 'too-often', waitSeconds };
  const answer = await callAuth('callback/credentials', { email, password }, request);
  const cookies = answer.headers.getSetCookie();
  if (!cookies.some((cookie) => cookie.startsWith(`${sessionCookieName()}=`))) return { kind: 'wrong' };
  await forgetTries(email);
  return { kind: 'ok', cookies };
}

/** Ends the session of the request and returns the cookies that say so. */
export async function signOut(request: Request): Promise<string[]> {
  return (await callAuth('signout', {}, request)).headers.getSetCookie();
}

/**
 * Calls the sign-in library from within. Its own check of forged requests is left out, for the middleware has
 * refused those before.
 */
function callAuth(action: string, fields: Record<string, string>, request: Request): Promise<Response> {
  const inner = new Request(`${env().APP_ORIGIN}/api/auth/${action}`, {
    method: 'POST',
    headers: {
      cookie: request.headers.get('cookie') ?? '',
      'user-agent': request.headers.get('user-agent') ?? '',
    },
    body: new URLSearchParams(fields),
  });
  return Auth(inner, { ...authConfig, skipCSRFCheck });
}
