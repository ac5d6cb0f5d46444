import { asPerson, inCompany } from '@strikeboard/db/client';
import { Conflict } from '@strikeboard/db/errors';
import { issueLink, openLink, revokeLinks } from '@strikeboard/db/queries/links';
import { endMember, listMembers } from '@strikeboard/db/queries/set-up';
import {
  createPerson,
  createSession,
  deleteSession,
  endAllSessions,
  membershipBySlug,
  membershipsOf,
  personForSignIn,
  readSession,
  setPassword,
} from '@strikeboard/db/queries/sign-in';
import { people, sessions, shifts } from '@strikeboard/db/tables';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addPerson,
  holdShift,
  makeCompany,
  openTestDatabases,
  placePour,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

const HOUR_MS = 3_600_000;
const NOW_MS = Date.parse('2026-03-06T15:00:00Z');

let db: TestDatabases;
let cedar: TestCompany;
let prairie: TestCompany;

beforeAll(async () => {
  db = await openTestDatabases();
  cedar = await makeCompany(db, { slug: 'cedar-test', name: 'Cedar Test' });
  prairie = await makeCompany(db, { slug: 'prairie-test', name: 'Prairie Test' });
});
afterAll(() => db.close());

describe('looking someone up', () => {
  it('finds a person by e-mail whatever the letter case, and nobody by another', async () => {
    const personId = await createPerson(db.web, {
      name: 'Ana Ruiz',
      email: 'ana.ruiz@example.com',
      passwordHash: 'hash-1',
      language: 'es',
      zone: 'America/Boise',
    });
    expect(await personForSignIn(db.web, 'Ana.Ruiz@Example.com')).toEqual({
      personId,
      name: 'Ana Ruiz',
      passwordHash: 'hash-1',
    });
    expect(await personForSignIn(db.web, 'nobody@example.com')).toBeNull();
    await setPassword(db.web, personId, 'hash-2');
    expect((await personForSignIn(db.web, 'ana.ruiz@example.com'))?.passwordHash).toBe('hash-2');
  });

  it('refuses a second person with an e-mail address', async () => {
    const person = {
      name: 'One',
      email: 'one@example.com',
      passwordHash: null,
      language: 'en',
      zone: 'UTC',
    } as const;
    await createPerson(db.web, person);
    await expect(createPerson(db.web, { ...person, name: 'Two' })).rejects.toThrow(Conflict);
  });

  it('shows no person by a plain read', async () => {
    expect(await db.web.orm.select().from(people)).toEqual([]);
  });
});

describe('sessions', () => {
  it('last until they run out, end one by one or all at once, and keep no token', async () => {
    const personId = await createPerson(db.web, {
      name: 'Sam Session',
      email: 'sam@example.com',
      passwordHash: null,
      language: 'en',
      zone: 'America/Boise',
    });
    const start = () =>
      createSession(db.web, {
        personId,
        nowMs: NOW_MS,
        expiresMs: NOW_MS + HOUR_MS,
        userAgent: 'x'.repeat(999),
      });
    const [first, second, third] = [await start(), await start(), await start()];
    expect(first).toMatch(/^[\w-]{43}$/);
    expect(await readSession(db.web, first, NOW_MS + HOUR_MS - 1)).toEqual({
      personId,
      name: 'Sam Session',
      email: 'sam@example.com',
      language: 'en',
      zone: 'America/Boise',
      expiresMs: NOW_MS + HOUR_MS,
    });
    expect(await readSession(db.web, first, NOW_MS + HOUR_MS)).toBeNull();
    expect(await readSession(db.web, `${first}x`, NOW_MS)).toBeNull();
    const kept = await db.web.orm.select().from(sessions);
    expect(kept.filter((row) => row.personId === personId)).toHaveLength(3);
    expect(kept.map((row) => row.tokenHash)).not.toContain(first);
    await deleteSession(db.web, first);
    expect(await readSession(db.web, first, NOW_MS)).toBeNull();
    expect(await readSession(db.web, second, NOW_MS)).not.toBeNull();
    expect(await endAllSessions(db.web, personId)).toBe(2);
    expect(await readSession(db.web, third, NOW_MS)).toBeNull();
  });
});

describe('belonging to companies', () => {
  it('makes one person of the sub whom two companies add by e-mail', async () => {
    const sub = { role: 'sub', email: 'sub@example.com', phoneE164: '+19705550140' } as const;
    const inCedar = await addPerson(db.web, cedar, { name: 'Sol Sub', ...sub });
    const inPrairie = await addPerson(db.web, prairie, { name: 'S. Sub', ...sub, email: 'SUB@example.com' });
    expect(inPrairie).toBe(inCedar);
    const memberships = await membershipsOf(db.web, inCedar);
    expect(memberships.map(({ slug, role }) => [slug, role])).toEqual([
      ['cedar-test', 'sub'],
      ['prairie-test', 'sub'],
    ]);
    expect(memberships[0]?.rules.tellingHorizonDays).toBe(7);
    const names = await inCompany(db.web, { companyId: prairie.companyId, personId: null }, (tx) =>
      listMembers(tx),
    );
    expect(names.map((one) => one.name)).toContain('S. Sub');
  });

  it('makes one person of the same phone and name, and two of a shared phone', async () => {
    const phoneE164 = '+19705550141';
    const first = await addPerson(db.web, cedar, { name: 'Pat Phone', phoneE164 });
    expect(await addPerson(db.web, prairie, { name: 'pat phone', phoneE164 })).toBe(first);
    expect(await addPerson(db.web, prairie, { name: 'Brother Phone', phoneE164 })).not.toBe(first);
  });

  it('lets no company give an e-mail address, and so a sign-in, to a person whom another knows', async () => {
    const phoneE164 = '+19705550142';
    const known = await addPerson(db.web, cedar, { name: 'Kim Known', phoneE164 });
    expect(await addPerson(db.web, prairie, { name: 'Kim Known', phoneE164, email: 'kim@example.com' })).toBe(
      known,
    );
    expect(await personForSignIn(db.web, 'kim@example.com')).toBeNull();
  });

  it('answers alike for no such company and for one that is not theirs', async () => {
    const personId = await addPerson(db.web, cedar, { name: 'Only Cedar', email: 'only.cedar@example.com' });
    expect((await membershipBySlug(db.web, personId, 'cedar-test'))?.companyId).toBe(cedar.companyId);
    expect(await membershipBySlug(db.web, personId, 'prairie-test')).toBeNull();
    expect(await membershipBySlug(db.web, personId, 'no-such-company')).toBeNull();
  });

  it('refuses to add someone twice, takes back someone who left, and keeps the last owner', async () => {
    const member = { name: 'Back Again', email: 'back@example.com' };
    const personId = await addPerson(db.web, cedar, member);
    await expect(addPerson(db.web, cedar, member)).rejects.toThrow(Conflict);
    const of = { companyId: cedar.companyId, personId: cedar.ownerId };
    await inCompany(db.web, of, (tx) => endMember(tx, { personId, nowMs: NOW_MS }));
    expect(await membershipBySlug(db.web, personId, 'cedar-test')).toBeNull();
    expect(await addPerson(db.web, cedar, member)).toBe(personId);
    expect(await membershipBySlug(db.web, personId, 'cedar-test')).not.toBeNull();
    await expect(
      inCompany(db.web, of, (tx) => endMember(tx, { personId: cedar.ownerId, nowMs: NOW_MS })),
    ).rejects.toThrow(Conflict);
  });
});

describe('what a person sees of others', () => {
  it('is nothing of another person in a company that is not set', async () => {
    const during = { startMs: NOW_MS, endMs: NOW_MS + 4 * HOUR_MS };
    const mine = await addPerson(db.web, cedar, { name: 'Mine', email: 'mine@example.com' });
    const theirs = await addPerson(db.web, prairie, { name: 'Theirs', email: 'theirs@example.com' });
    const { visitId } = await placePour(db.web, cedar, { during });
    const other = await placePour(db.web, prairie, { during });
    await holdShift(db.web, cedar, { visitId, personId: mine, during });
    await holdShift(db.web, prairie, { visitId: other.visitId, personId: theirs, during });
    const seenBy = (personId: string) =>
      asPerson(db.web, personId, async (tx) => (await tx.select().from(shifts)).map((row) => row.personId));
    expect(await seenBy(mine)).toEqual([mine]);
    expect(await seenBy(theirs)).toEqual([theirs]);
    const inCedar = { companyId: cedar.companyId, personId: mine };
    const seen = await inCompany(db.web, inCedar, (tx) => tx.select().from(shifts));
    expect(seen.map((row) => row.personId)).not.toContain(theirs);
  });
});

describe('links', () => {
  it('open one visit to one person until they run out or are taken back', async () => {
    const personId = await addPerson(db.web, cedar, { name: 'Lee Link', phoneE164: '+19705550143' });
    const during = { startMs: NOW_MS, endMs: NOW_MS + HOUR_MS };
    const { visitId } = await placePour(db.web, cedar, { during });
    const of = { companyId: cedar.companyId, personId: null };
    const token = await inCompany(db.worker, of, (tx) =>
      issueLink(tx, { visitId, personId, nowMs: NOW_MS, expiresMs: NOW_MS + HOUR_MS }),
    );
    const opens = { companyId: cedar.companyId, personId, visitId };
    expect(await openLink(db.web, token, NOW_MS)).toEqual(opens);
    expect(await openLink(db.web, token, NOW_MS + HOUR_MS)).toBeNull();
    expect(await openLink(db.web, `${token.slice(0, -1)}_`, NOW_MS)).toBeNull();
    expect(await inCompany(db.web, of, (tx) => revokeLinks(tx, { visitId, personId, nowMs: NOW_MS }))).toBe(
      1,
    );
    expect(await openLink(db.web, token, NOW_MS)).toBeNull();
  });
});
