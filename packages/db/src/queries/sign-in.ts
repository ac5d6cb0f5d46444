import { type CompanyRules, companyRulesSchema } from '@strikeboard/domain/company-rules';
import type { Language, Role } from '@strikeboard/domain/vocabulary';
import { and, asc, eq, isNull, lte, type SQL, sql } from 'drizzle-orm';
import { asPerson, type Database } from '../client.ts';
import { Conflict, constraintOf, guarded, NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { companies, members, people, sessions } from '../tables/index.ts';
import { newToken, tokenHash } from './tokens.ts';

/** What checking a password needs. */
export interface PersonForSignIn {
  personId: string;
  name: string;
  /** Null: has never set one. */
  passwordHash: string | null;
}

/** A person as themselves, whatever companies they belong to. */
export interface SignedInPerson {
  personId: string;
  name: string;
  email: string | null;
  language: Language;
  /** IANA zone in which the person reads times that belong to no site. */
  zone: string;
}

export interface Session extends SignedInPerson {
  expiresMs: number;
}

/** A company that a person belongs to now. */
export interface Membership {
  companyId: string;
  slug: string;
  name: string;
  role: Role;
  /** IANA zone of the office. */
  zone: string;
  rules: CompanyRules;
}

/** The person with this e-mail address (letter case aside), or null. The only way to look someone up by it. */
export async function personForSignIn(db: Database, email: string): Promise<PersonForSignIn | null> {
  const { rows } = await guarded(() =>
    db.orm.execute<{ person_id: string; name: string; password_hash: string | null }>(
      sql`select person_id, name, password_hash from app.person_for_sign_in(${email})`,
    ),
  );
  const [row] = rows;
  return row ? { personId: row.person_id, name: row.name, passwordHash: row.password_hash } : null;
}

/** Starts a session and returns its token, which is not kept. */
export async function createSession(
  db: Database,
  session: { personId: string; nowMs: number; expiresMs: number; userAgent?: string | null },
): Promise<string> {
  const token = newToken();
  await guarded(() =>
    db.orm.insert(sessions).values({
      tokenHash: tokenHash(token),
      personId: session.personId,
      userAgent: session.userAgent?.slice(0, 300) ?? null,
      createdAt: new Date(session.nowMs),
      expiresAt: new Date(session.expiresMs),
    }),
  );
  return token;
}

/** Who holds the session token, or null when it is unknown or has run out. */
export async function readSession(db: Database, token: string, nowMs: number): Promise<Session | null> {
  const { rows } = await guarded(() =>
    db.orm.execute<{
      person_id: string;
      name: string;
      email: string | null;
      language: Language;
      zone: string;
      expires_ms: number;
    }>(
      sql`select person_id, name, email, language, zone, (extract(epoch from expires_at) * 1000)::float8 as expires_ms
        from app.session_person(${tokenHash(token)}, ${new Date(nowMs).toISOString()}::timestamptz)`,
    ),
  );
  const [row] = rows;
  return row
    ? {
        personId: row.person_id,
        name: row.name,
        email: row.email,
        language: row.language,
        zone: row.zone,
        expiresMs: row.expires_ms,
      }
    : null;
}

/** Signs one browser out. Does nothing when the token is unknown. */
export async function deleteSession(db: Database, token: string): Promise<void> {
  await guarded(() => db.orm.delete(sessions).where(eq(sessions.tokenHash, tokenHash(token))));
}

/** Signs a person out everywhere and returns how many sessions ended. */
export async function endAllSessions(db: Database, personId: string): Promise<number> {
  const ended = await guarded(() => db.orm.delete(sessions).where(eq(sessions.personId, personId)));
  return ended.rowCount ?? 0;
}

/** Takes out sessions that have run out and returns how many there were. */
export async function deleteExpiredSessions(db: Database, nowMs: number): Promise<number> {
  const ended = await guarded(() => db.orm.delete(sessions).where(lte(sessions.expiresAt, new Date(nowMs))));
  return ended.rowCount ?? 0;
}

/** The companies that a person belongs to now, by name. */
export function membershipsOf(db: Database, personId: string): Promise<Membership[]> {
  return readMemberships(db, personId);
}

/** The person's seat in the company of this slug, or null: no such company, or not theirs, which look the same. */
export async function membershipBySlug(
  db: Database,
  personId: string,
  slug: string,
): Promise<Membership | null> {
  const [membership] = await readMemberships(db, personId, eq(companies.slug, slug));
  return membership ?? null;
}

/**
 * Adds a person who belongs to no company yet and returns their id.
 * @throws Conflict `email-taken` when the e-mail address is someone's already
 */
export async function createPerson(
  db: Database,
  person: {
    name: string;
    email: string | null;
    passwordHash: string | null;
    language: Language;
    zone: string;
  },
): Promise<string> {
  const id = newId();
  try {
    await asPerson(db, id, (tx) => tx.insert(people).values({ id, ...person }));
  } catch (error) {
    if (constraintOf(error) !== 'people_email_unique') throw error;
    throw new Conflict('email-taken', { email: person.email });
  }
  return id;
}

/**
 * Sets a person's own password, given its argon2id hash.
 * @throws NotFound when there is no such person
 */
export async function setPassword(db: Database, personId: string, passwordHash: string): Promise<void> {
  const changed = await asPerson(db, personId, (tx) =>
    tx.update(people).set({ passwordHash }).where(eq(people.id, personId)),
  );
  if (changed.rowCount !== 1) throw new NotFound('person', personId);
}

async function readMemberships(db: Database, personId: string, only?: SQL): Promise<Membership[]> {
  const rows = await asPerson(db, personId, (tx) =>
    tx
      .select({
        companyId: companies.id,
        slug: companies.slug,
        name: companies.name,
        role: members.role,
        zone: companies.zone,
        rules: companies.rules,
      })
      .from(members)
      .innerJoin(companies, eq(companies.id, members.companyId))
      .where(and(eq(members.personId, personId), isNull(members.endedAt), only))
      .orderBy(asc(companies.name)),
  );
  return rows.map((row) => ({ ...row, rules: companyRulesSchema.parse(row.rules) }));
}
