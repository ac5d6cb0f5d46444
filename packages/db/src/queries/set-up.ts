import { type CompanyRules, companyRulesSchema } from '@strikeboard/domain/company-rules';
import type { Finish, Language, Role } from '@strikeboard/domain/vocabulary';
import { and, asc, eq, gt, gte, isNull, or, sql } from 'drizzle-orm';
import { type Database, inCompany, type Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { companies, crewMemberships, crews, members, shifts } from '../tables/index.ts';
import { peopleForContacts } from './contacts.ts';
import { revokeLinks } from './links.ts';

/** The current company as its set-up page shows it. */
export interface CompanySetUp {
  name: string;
  slug: string;
  zone: string;
  rules: CompanyRules;
}

/** A member as the set-up page shows them. */
export interface Member {
  personId: string;
  role: Role;
  name: string;
  phoneE164: string | null;
  email: string | null;
  language: Language;
  /** Finishes the person can do; empty means any. */
  skills: string[];
  /** When they left; null while they belong. */
  endedMs: number | null;
}

/** What a company says of someone whom it adds. */
export interface NewMember {
  name: string;
  role: Role;
  phoneE164: string | null;
  email: string | null;
  language: Language;
  skills: readonly Finish[];
  /** The row of an import that this member came from, to find them again. */
  naturalKey?: string | null;
}

/**
 * Makes a company and its first owner, on the owner's connection.
 * @throws Conflict `slug-taken` when another company has the slug
 */
export async function createCompany(
  ownerDb: Database,
  company: {
    slug: string;
    name: string;
    /** IANA zone of the office. */
    zone: string;
    /** Only what differs from the defaults. */
    rules?: Partial<CompanyRules>;
    owner: { name: string; email: string; phoneE164: string | null; language: Language };
  },
): Promise<{ companyId: string; ownerId: string }> {
  const companyId = newId();
  const { slug, name, zone, rules = {}, owner } = company;
  companyRulesSchema.parse(rules);
  try {
    return await inCompany(ownerDb, { companyId, personId: null }, async (tx) => {
      await tx.insert(companies).values({ id: companyId, slug, name, zone, rules });
      const ownerId = await addMember(tx, { ...owner, role: 'owner', skills: [] });
      return { companyId, ownerId };
    });
  } catch (error) {
    if (constraintOf(error) !== 'companies_slug_unique') throw error;
    throw new Conflict('slug-taken', { slug });
  }
}

/** The company that is set. */
export async function readCompany(tx: Tx): Promise<CompanySetUp> {
  const [row] = await tx
    .select({ name: companies.name, slug: companies.slug, zone: companies.zone, rules: companies.rules })
    .from(companies)
    .where(eq(companies.id, currentCompany));
  if (!row) throw new Error('No company is set.');
  return { ...row, rules: companyRulesSchema.parse(row.rules) };
}

/** Everyone who belongs to the company, by name; with `ended` those who have left too. */
export async function listMembers(tx: Tx, which: { ended: boolean } = { ended: false }): Promise<Member[]> {
  const rows = await tx
    .select()
    .from(members)
    .where(and(eq(members.companyId, currentCompany), which.ended ? undefined : isNull(members.endedAt)))
    .orderBy(asc(members.name));
  return rows.map(({ personId, role, name, phoneE164, email, language, skills, endedAt }) => ({
    personId,
    role,
    name,
    phoneE164,
    email,
    language,
    skills,
    endedMs: endedAt?.getTime() ?? null,
  }));
}

/**
 * Adds a member and returns their id. Someone known by the same e-mail, or by the same phone and name, in whatever
 * company, is the same person; one who had left comes back with what is said here.
 * @throws Conflict `already-member` when they belong to this company already
 */
export async function addMember(tx: Tx, member: NewMember): Promise<string> {
  const { zone } = await readCompany(tx);
  const [personId] = await peopleForContacts(tx, [{ ...member, zone }]);
  if (personId === undefined) throw new Error('A contact has no person.');
  const { naturalKey = null, ...said } = member;
  const row = { ...said, skills: [...said.skills], naturalKey };
  const added = await tx
    .insert(members)
    .values({ companyId: currentCompany, personId, ...row })
    .onConflictDoUpdate({
      target: [members.companyId, members.personId],
      set: { ...row, endedAt: null },
      setWhere: sql`${members.endedAt} is not null`,
    });
  if (added.rowCount !== 1) throw new Conflict('already-member', { personId });
  return personId;
}

/**
 * Changes what the company knows of a member; fields left out stay. The person's own sign-in is not touched.
 * @throws NotFound when they do not belong to the company
 * @throws Conflict `last-owner` when nobody would be left as owner
 */
export async function editMember(
  tx: Tx,
  edit: { personId: string; fields: Partial<Omit<NewMember, 'naturalKey'>> },
): Promise<void> {
  const { skills, ...fields } = edit.fields;
  if (fields.role !== undefined && fields.role !== 'owner') await requireOtherOwner(tx, edit.personId);
  const changed = await tx
    .update(members)
    // Drizzle leaves out undefined fields but refuses to set nothing at all.
    .set({ ...fields, skills: skills === undefined ? sql`${members.skills}` : [...skills] })
    .where(isCurrentMember(edit.personId));
  if (changed.rowCount !== 1) throw new NotFound('person', edit.personId);
}

/**
 * Ends a person's belonging to the company, their places in crews and their links. What they still hold from then on
 * is returned, for the visits need someone else.
 * @throws NotFound when they do not belong to the company
 * @throws Conflict `last-owner` when nobody would be left as owner
 */
export async function endMember(
  tx: Tx,
  end: { personId: string; nowMs: number },
): Promise<{ heldVisitIds: string[] }> {
  const { personId, nowMs } = end;
  const now = new Date(nowMs);
  await requireOtherOwner(tx, personId);
  const ended = await tx.update(members).set({ endedAt: now }).where(isCurrentMember(personId));
  if (ended.rowCount !== 1) throw new NotFound('person', personId);
  await endPlacesInCrews(tx, { personId, at: now });
  await tx
    .update(crews)
    .set({ foremanId: null })
    .where(and(eq(crews.companyId, currentCompany), eq(crews.foremanId, personId)));
  await revokeLinks(tx, { personId, nowMs });
  const held = await tx
    .select({ visitId: shifts.visitId })
    .from(shifts)
    .where(
      and(
        eq(shifts.companyId, currentCompany),
        eq(shifts.personId, personId),
        eq(shifts.state, 'held'),
        gt(shifts.startsAt, now),
      ),
    )
    .orderBy(asc(shifts.startsAt));
  return { heldVisitIds: held.map((row) => row.visitId) };
}

/** Ends a person's, or a crew's, places in crews; one that has not begun by then is taken back. */
export async function endPlacesInCrews(
  tx: Tx,
  end: { personId: string; at: Date } | { crewId: string; at: Date },
): Promise<void> {
  const isTheirs = and(
    eq(crewMemberships.companyId, currentCompany),
    'personId' in end ? eq(crewMemberships.personId, end.personId) : eq(crewMemberships.crewId, end.crewId),
  );
  await tx.delete(crewMemberships).where(and(isTheirs, gte(crewMemberships.startsAt, end.at)));
  await tx
    .update(crewMemberships)
    .set({ endsAt: end.at })
    .where(and(isTheirs, or(isNull(crewMemberships.endsAt), gt(crewMemberships.endsAt, end.at))));
}

function isCurrentMember(personId: string) {
  return and(eq(members.companyId, currentCompany), eq(members.personId, personId), isNull(members.endedAt));
}

async function requireOtherOwner(tx: Tx, personId: string): Promise<void> {
  const owners = await tx
    .select({ personId: members.personId })
    .from(members)
    .where(and(eq(members.companyId, currentCompany), eq(members.role, 'owner'), isNull(members.endedAt)))
    // Two owners who end each other at the same moment wait here, and the second finds itself the last.
    .for('update');
  if (owners.length === 1 && owners[0]?.personId === personId) {
    throw new Conflict('last-owner', { personId });
  }
}
