import type { PersonRecord } from '@strikeboard/domain/intake/records';
import { fold } from '@strikeboard/domain/intake/text';
import { dayInterval, siteDayOf } from '@strikeboard/domain/zone';
import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { crewMemberships, crews, members } from '../tables/index.ts';
import { peopleForContacts } from './contacts.ts';
import {
  grouped,
  type ImportContext,
  type ImportCounts,
  type ImportForecast,
  inChunks,
  onlyOne,
  type ReferenceProblem,
} from './import-plan.ts';

export type MemberRow = typeof members.$inferSelect;
export type CrewRow = typeof crews.$inferSelect;

/** Who is where now, as far as an import of people or crews asks. */
export interface Roster {
  members: readonly MemberRow[];
  crewsByKey: ReadonlyMap<string, CrewRow>;
  /** Crew of each person who is on one, or is to be. */
  crewOf: ReadonlyMap<string, string>;
  /** When each person who has been on a crew last left one. */
  leftMs: ReadonlyMap<string, number>;
}

/** What becomes of one record. */
interface PersonStep {
  record: PersonRecord;
  /** Null: to be added. */
  member: MemberRow | null;
  /** Blanks of the member that the record fills. */
  fill: Partial<MemberRow>;
  /** Key of the crew that the person is put on; null: none, or on one already. */
  joins: string | null;
  /** Fills the blank of that crew's foreman. */
  leads: boolean;
}

interface PeoplePlan {
  steps: PersonStep[];
  /** Names of crews to be made, by key. */
  newCrews: ReadonlyMap<string, string>;
  problems: ReferenceProblem[];
}

/** The company's people and crews, those who left included, for they are not to be added twice. */
export async function readRoster(tx: Tx, nowMs: number): Promise<Roster> {
  const memberRows = await tx.select().from(members).where(eq(members.companyId, currentCompany));
  const crewRows = await tx.select().from(crews).where(eq(crews.companyId, currentCompany));
  const places = await tx
    .select({
      personId: crewMemberships.personId,
      crewId: crewMemberships.crewId,
      endsAt: crewMemberships.endsAt,
    })
    .from(crewMemberships)
    .where(eq(crewMemberships.companyId, currentCompany));
  const crewOf = new Map<string, string>();
  const leftMs = new Map<string, number>();
  for (const { personId, crewId, endsAt } of places) {
    if (endsAt === null || endsAt.getTime() > nowMs) crewOf.set(personId, crewId);
    else leftMs.set(personId, Math.max(endsAt.getTime(), leftMs.get(personId) ?? 0));
  }
  return {
    members: memberRows,
    crewsByKey: new Map(crewRows.map((crew) => [crew.naturalKey, crew])),
    crewOf,
    leftMs,
  };
}

/** What accepting these people would do. */
export async function forecastPeople(
  tx: Tx,
  records: readonly PersonRecord[],
  context: ImportContext,
): Promise<ImportForecast> {
  const { steps, problems } = planPeople(records, await readRoster(tx, context.nowMs));
  const created = steps.filter((step) => step.member === null).length;
  const updated = steps.filter((step) => step.member !== null && changes(step)).length;
  return { created, updated, unchanged: steps.length - created - updated, problems };
}

/** Adds and fills people, makes the crews they name and puts them on those. */
export async function acceptPeople(
  tx: Tx,
  records: readonly PersonRecord[],
  context: ImportContext,
): Promise<ImportCounts> {
  const roster = await readRoster(tx, context.nowMs);
  const plan = planPeople(records, roster);
  const toAdd = plan.steps.filter((step) => step.member === null);
  const ids = await peopleForContacts(
    tx,
    toAdd.map(({ record }) => ({ ...contactOf(record), zone: context.zone })),
  );
  // Someone whom the company knows without an e-mail address may turn out to be the one who signs in with it.
  const known = new Set(roster.members.map((member) => member.personId));
  const personOf = new Map<PersonStep, string>();
  const added: PersonStep[] = [];
  for (const [index, step] of toAdd.entries()) {
    const personId = ids[index];
    if (personId === undefined) throw new Error('A contact has no person.');
    personOf.set(step, personId);
    if (!known.has(personId)) added.push(step);
    known.add(personId);
  }
  await inChunks(added, (chunk) =>
    tx.insert(members).values(
      chunk.map((step) => ({
        companyId: currentCompany,
        personId: personOf.get(step) ?? '',
        role: step.record.role,
        ...contactOf(step.record),
        skills: [...step.record.skills],
        naturalKey: step.record.naturalKey,
      })),
    ),
  );
  for (const step of plan.steps) {
    if (step.member === null || Object.keys(step.fill).length === 0) continue;
    await tx.update(members).set(step.fill).where(isMember(step.member.personId));
  }
  await placeOnCrews(tx, { plan, roster, context, personOf });
  const updated = plan.steps.filter((step) => step.member !== null && changes(step)).length;
  return { created: added.length, updated, unchanged: plan.steps.length - added.length - updated };
}

/** Puts each record to the member it speaks of, or to none. */
function planPeople(records: readonly PersonRecord[], roster: Roster): PeoplePlan {
  const finds = memberFinder(roster.members);
  const problems: ReferenceProblem[] = [];
  const newCrews = new Map<string, string>();
  const ledCrews = new Set<string>();
  const steps = records.map((record): PersonStep => {
    const member = finds(record);
    const problem = (field: string, value: string, code: ReferenceProblem['code']) =>
      problems.push({ line: record.line, field, value, code, severity: 'warning' });
    if (member?.endedAt) {
      problem('name', record.name, 'person-left');
      return { record, member, fill: {}, joins: null, leads: false };
    }
    const fill = member === null ? {} : blanksFilled(member, record);
    const key = record.crewName === null ? null : fold(record.crewName);
    const isPlaced = member !== null && roster.crewOf.has(member.personId);
    const crew = key === null ? undefined : roster.crewsByKey.get(key);
    if (key === null || crew?.endedAt) {
      if (crew) problem('crewName', record.crewName ?? '', 'crew-ended');
      return { record, member, fill, joins: null, leads: false };
    }
    if (!crew && !newCrews.has(key)) {
      newCrews.set(key, record.crewName ?? '');
      problem('crewName', record.crewName ?? '', 'crew-created');
    }
    const leads = record.role === 'foreman' && (crew?.foremanId ?? null) === null && !ledCrews.has(key);
    if (leads) ledCrews.add(key);
    return { record, member, fill, joins: isPlaced ? null : key, leads };
  });
  return { steps, newCrews, problems };
}

/**
 * Finds the member that a record speaks of: same row imported before, same e-mail, same phone and name where one of
 * the two has no e-mail, or the only one of that name for a record with neither.
 */
function memberFinder(rows: readonly MemberRow[]): (record: PersonRecord) => MemberRow | null {
  const byKey = grouped(rows, (row) => row.naturalKey);
  const byEmail = grouped(rows, (row) => row.email?.toLowerCase() ?? null);
  const byPhone = grouped(rows, (row) => row.phoneE164);
  const byName = grouped(rows, (row) => fold(row.name));
  return (record) => {
    const sameRow = byKey.get(record.naturalKey)?.[0];
    const sameEmail = record.email === null ? undefined : byEmail.get(record.email.toLowerCase())?.[0];
    if (sameRow ?? sameEmail) return sameRow ?? sameEmail ?? null;
    const samePhone = record.phoneE164 === null ? [] : (byPhone.get(record.phoneE164) ?? []);
    const samePhoneAndName = samePhone.filter(
      (row) => fold(row.name) === fold(record.name) && (row.email === null || record.email === null),
    );
    if (samePhoneAndName[0]) return samePhoneAndName[0];
    const isOnlyName = record.email === null && record.phoneE164 === null;
    return isOnlyName ? onlyOne(byName.get(fold(record.name)) ?? []) : null;
  };
}

function blanksFilled(member: MemberRow, record: PersonRecord): Partial<MemberRow> {
  const fill: Partial<MemberRow> = {};
  if (member.phoneE164 === null && record.phoneE164 !== null) fill.phoneE164 = record.phoneE164;
  if (member.email === null && record.email !== null) fill.email = record.email;
  if (member.skills.length === 0 && record.skills.length > 0) fill.skills = [...record.skills];
  return fill;
}

function changes(step: PersonStep): boolean {
  return Object.keys(step.fill).length > 0 || step.joins !== null || step.leads;
}

function contactOf(record: PersonRecord) {
  const { name, email, phoneE164, language } = record;
  return { name, email, phoneE164, language: language ?? ('en' as const) };
}

async function placeOnCrews(
  tx: Tx,
  of: {
    plan: PeoplePlan;
    roster: Roster;
    context: ImportContext;
    personOf: ReadonlyMap<PersonStep, string>;
  },
): Promise<void> {
  const { plan, roster, context, personOf } = of;
  const made = await makeCrews(tx, plan.newCrews);
  const crewIdOf = (key: string): string => made.get(key) ?? roster.crewsByKey.get(key)?.id ?? '';
  const placed = new Set<string>();
  const joining: { personId: string; crewId: string }[] = [];
  for (const step of plan.steps) {
    const personId = step.member?.personId ?? personOf.get(step) ?? '';
    if (step.joins === null || placed.has(personId) || roster.crewOf.has(personId)) continue;
    placed.add(personId);
    joining.push({ personId, crewId: crewIdOf(step.joins) });
  }
  await joinCrews(tx, joining, { roster, context });
  for (const step of plan.steps) {
    if (!step.leads || step.record.crewName === null) continue;
    const personId = step.member?.personId ?? personOf.get(step) ?? '';
    await setForeman(tx, { crewId: crewIdOf(fold(step.record.crewName)), personId });
  }
}

/** Makes crews at the foot of the board; their ids by key. */
export async function makeCrews(
  tx: Tx,
  namesByKey: ReadonlyMap<string, string>,
): Promise<ReadonlyMap<string, string>> {
  const [last] = await tx
    .select({ sortOrder: sql<number>`coalesce(max(${crews.sortOrder}), 0)` })
    .from(crews)
    .where(eq(crews.companyId, currentCompany));
  const rows = [...namesByKey].map(([naturalKey, name], index) => ({
    companyId: currentCompany,
    id: newId(),
    name,
    naturalKey,
    sortOrder: (last?.sortOrder ?? 0) + 1 + index,
  }));
  await inChunks(rows, (chunk) => tx.insert(crews).values(chunk));
  return new Map(rows.map((row) => [row.naturalKey, row.id]));
}

/**
 * Puts people on crews from the beginning of the office's day, so that today's visits have them; not before they left
 * their last crew.
 */
export async function joinCrews(
  tx: Tx,
  joining: readonly { personId: string; crewId: string }[],
  { roster, context }: { roster: Roster; context: ImportContext },
): Promise<void> {
  const { startMs } = dayInterval(siteDayOf(context.nowMs, context.zone), context.zone);
  await inChunks(joining, (chunk) =>
    tx.insert(crewMemberships).values(
      chunk.map((one) => ({
        companyId: currentCompany,
        id: newId(),
        ...one,
        startsAt: new Date(Math.max(startMs, roster.leftMs.get(one.personId) ?? 0)),
      })),
    ),
  );
}

/** Fills the blank of a crew's foreman. */
export async function setForeman(tx: Tx, of: { crewId: string; personId: string }): Promise<void> {
  await tx
    .update(crews)
    .set({ foremanId: of.personId })
    .where(and(eq(crews.companyId, currentCompany), eq(crews.id, of.crewId), isNull(crews.foremanId)));
}

function isMember(personId: string) {
  return and(eq(members.companyId, currentCompany), eq(members.personId, personId));
}
