import Credentials from '@auth/core/providers/credentials';
import { createSession, deleteSession, personForSignIn, readSession } from '@strikeboard/db/queries/sign-in';
import { defineConfig } from 'auth-astro';
import { z } from 'zod';
import { env } from './src/env.ts';
import { nowMs } from './src/lib/server/clock.ts';
import { database } from './src/lib/server/database.ts';
import { log } from './src/lib/server/log.ts';
import { passwordFits } from './src/lib/server/password.ts';
import { SESSION_SECONDS, sessionCookieName, usesHttps } from './src/lib/server/session-cookie.ts';

const credentialsSchema = z.object({ email: z.email(), password: z.string().min(1) });

/**
 * Sessions live in the database and end when their row does. The library's "JWT" is only what its cookie carries:
 * `encode` starts a session and gives its token, `decode` looks it up. Only hashes of tokens are stored.
 */
export default defineConfig({
  prefix: '/api/auth',
  secret: env().AUTH_SECRET,
  trustHost: true,
  useSecureCookies: usesHttps(),
  pages: { signIn: '/sign-in', error: '/sign-in', signOut: '/' },
  session: { strategy: 'jwt', maxAge: SESSION_SECONDS },
  cookies: {
    sessionToken: {
      name: sessionCookieName(),
      options: { httpOnly: true, sameSite: 'lax', path: '/', secure: usesHttps() },
    },
  },
  providers: [
    Credentials({
      credentials: { email: {}, password: {} },
      authorize: async (given, request) => {
        const parsed = credentialsSchema.safeParse(given);
        if (!parsed.success) return null;
        const person = await personForSignIn(database(), parsed.data.email);
        const fits = await passwordFits(person?.passwordHash ?? null, parsed.data.password);
        if (!person || !fits) return null;
        return { id: person.personId, name: person.name, userAgent: request.headers.get('user-agent') };
      },
    }),
  ],
  callbacks: {
    jwt: ({ token, user }) => {
      const userAgent = user && 'userAgent' in user ? user.userAgent : undefined;
      return typeof userAgent === 'string' ? { ...token, userAgent } : token;
    },
  },
  jwt: {
    encode: async ({ token }) => {
      // Already a session: reading it must not start another.
      if (typeof token?.sessionToken === 'string') return token.sessionToken;
      if (!token?.sub) throw new Error('A session needs a person.');
      const now = nowMs();
      return createSession(database(), {
        personId: token.sub,
        nowMs: now,
        expiresMs: now + SESSION_SECONDS * 1000,
        userAgent: typeof token.userAgent === 'string' ? token.userAgent : null,
      });
    },
    decode: async ({ token: sessionToken }) => {
      if (!sessionToken) return null;
      const session = await readSession(database(), sessionToken, nowMs());
      return session
        ? { sub: session.personId, name: session.name, email: session.email, sessionToken }
        : null;
    },
  },
  events: {
    signOut: async (ended) => {
      const sessionToken = 'token' in ended ? ended.token?.sessionToken : undefined;
      if (typeof sessionToken === 'string') await deleteSession(database(), sessionToken);
    },
  },
  logger: {
    // A wrong password is no fault; what else goes wrong is named without its data.
    error: (error) => {
      if (error.name !== 'CredentialsSignin') log.error({ name: error.name }, 'sign-in went wrong');
    },
    warn: () => {},
    debug: () => {},
  },
});
