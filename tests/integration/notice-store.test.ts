import { inCompany } from '@strikeboard/db/client';
import { leaveWord } from '@strikeboard/db/queries/board-change';
import { openLink } from '@strikeboard/db/queries/links';
import { inboundStore } from '@strikeboard/db/queries/notice-inbound';
import { listNotices } from '@strikeboard/db/queries/notice-list';
import { noticeStore } from '@strikeboard/db/queries/notice-store';
import { boardChanges, outbox, shifts, told, visits } from '@strikeboard/db/tables';
import type { Interval } from '@strikeboard/domain/interval';
import { instantAt } from '@strikeboard/domain/zone';
import { composeWith } from '@strikeboard/notices/compose';
import type { InboundStore, NoticeStore, Situation } from '@strikeboard/notices/ports';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addPerson,
  holdShift,
  makeCompany,
  makeOffer,
  openTestDatabases,
  placePour,
  SITE_ZONE,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

// Sites in Denver, offices in Chicago, the machine in Tokyo. Rules of the store: common practice, no source.
const DAY = '2026-03-10';
const TUESDAY: Interval = { startMs: instantAt(DAY, 390, SITE_ZONE), endMs: instantAt(DAY, 870, SITE_ZONE) };
const NOW_MS = Date.parse('2026-03-06T15:00:00Z');
const MIN_MS = 60_000;
const compose = composeWith({ quietHours: null });

let db: TestDatabases;
let cedar: TestCompany;
let prairie: TestCompany;
let store: NoticeStore;
let inbound: InboundStore;
let count = 0;

beforeAll(async () => {
  db = await openTestDatabases();
  cedar = await makeCompany(db, { slug: 'cedar-test', name: 'Cedar Test' });
  prairie = await makeCompany(db, { slug: 'prairie-test', name: 'Prairie Test' });
  store = noticeStore(db.worker);
  inbound = inboundStore(db.web);
});
afterAll(() => db.close());

const inside = <T>(company: TestCompany, work: Parameters<typeof inCompany<T>>[2]): Promise<T> =>
  inCompany(db.web, { companyId: company.companyId, personId: null }, work);

/** A pour with one person on it, and word left that it is to be told. */
async function pourToTell(company = cedar, during = TUESDAY) {
  const phoneE164 = `+1970555${String(100 + count++).padStart(4, '0')}`;
  const email = `finisher${count}@example.com`;
  const personId = await addPerson(db.web, company, { name: `Finisher ${count}`, phoneE164, email });
  const { visitId } = await placePour(db.web, company, { during, yd3: '32' });
  await holdShift(db.web, company, { visitId, personId, during });
  await leave(company, visitId, NOW_MS);
  return { companyId: company.companyId, visitId, personId, phoneE164, email };
}

const leave = (company: TestCompany, visitId: string, dueMs: number) =>
  inside(company, (tx) => leaveWord(tx, { visitId, dueMs, createdBy: company.ownerId }));

const move = (company: TestCompany, visitId: string, during: Interval) =>
  inside(company, async (tx) => {
    const row = (await tx.select().from(visits)).find((one) => one.id === visitId);
    if (!row) throw new Error('no visit');
    const { startsAt: _, ...values } = row;
    await tx
      .insert(visits)
      .values(values)
      .onConflictDoUpdate({ target: [visits.companyId, visits.id], set: { during } });
  });

async function jobs(key: string) {
  const { rows } = await db.owner.pool.query<{ task: string; run_at: Date }>(
    'select task_identifier as task, run_at from graphile_worker.jobs where key like $1',
    [`%${key}`],
  );
  return rows.map(({ task, run_at }) => ({ task, runAtMs: run_at.getTime() }));
}

const noticesOf = (company: TestCompany, visitId: string) =>
  inside(company, (tx) => listNotices(tx, { visitId })).then(({ notices }) => notices);

const outboxOf = (company: TestCompany, visitId: string) =>
  inside(company, async (tx) => (await tx.select().from(outbox)).filter((row) => row.visitId === visitId));

describe('composing', () => {
  it('writes notices with their jobs, what was told, and the end of what was to be told, together', async () => {
    const { companyId, visitId, personId, phoneE164, email } = await pourToTell();
    const { noticeIds } = await store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose);
    expect(noticeIds).toHaveLength(2);
    const written = await noticesOf(cedar, visitId);
    expect(written.map(({ channel, toAddress, state }) => [channel, toAddress, state]).toSorted()).toEqual([
      ['email', email, 'queued'],
      ['sms', phoneE164, 'queued'],
    ]);
    // 6:30 in Denver; the truck comes after the company's 45 minutes of set-up (its own setting's default).
    expect(written.find((one) => one.channel === 'sms')?.body).toMatch(
      /^Cedar Test: Tue Mar 10\. Be there 6:30 AM.*, first truck 7:15 AM.*412 Alder Ct.* 32 yd3, broom finish\..*\{link\}$/,
    );
    for (const id of noticeIds)
      expect(await jobs(`send:${id}`)).toEqual([{ task: 'send-notice', runAtMs: NOW_MS }]);
    const known = await inside(cedar, async (tx) =>
      (await tx.select().from(told)).filter((row) => row.visitId === visitId),
    );
    expect(known).toMatchObject([
      { personId, facts: { crewStartMs: TUESDAY.startMs, partYd3: 32, calledOff: false } },
    ]);
    expect(await outboxOf(cedar, visitId)).toMatchObject([{ doneAt: new Date(NOW_MS) }]);
    const changes = await inside(cedar, async (tx) =>
      (await tx.select().from(boardChanges)).filter((row) => row.visitIds.includes(visitId)),
    );
    expect(changes).toMatchObject([
      { kind: 'told', actorPersonId: null, patch: { visits: [{ untold: false }], shifts: [{ told: true }] } },
    ]);
    expect(await store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose)).toEqual({ noticeIds: [] });
  });

  it('waits for the newest change to settle, with a job for when it has', async () => {
    const { companyId, visitId } = await pourToTell();
    await leave(cedar, visitId, NOW_MS + 2 * MIN_MS);
    expect(await store.composeDue({ companyId, visitId, nowMs: NOW_MS + MIN_MS }, compose)).toEqual({
      noticeIds: [],
    });
    expect(await noticesOf(cedar, visitId)).toEqual([]);
    expect(await jobs(`tell:${visitId}`)).toEqual([{ task: 'tell-visit', runAtMs: NOW_MS + 2 * MIN_MS }]);
    const { noticeIds } = await store.composeDue({ companyId, visitId, nowMs: NOW_MS + 2 * MIN_MS }, compose);
    expect(noticeIds).toHaveLength(2);
  });

  it('sends nothing for a move there and back', async () => {
    const { companyId, visitId } = await pourToTell();
    await store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose);
    await move(cedar, visitId, {
      startMs: TUESDAY.startMs + 60 * MIN_MS,
      endMs: TUESDAY.endMs + 60 * MIN_MS,
    });
    await leave(cedar, visitId, NOW_MS + MIN_MS);
    await move(cedar, visitId, TUESDAY);
    await leave(cedar, visitId, NOW_MS + 2 * MIN_MS);
    expect(await store.composeDue({ companyId, visitId, nowMs: NOW_MS + 3 * MIN_MS }, compose)).toEqual({
      noticeIds: [],
    });
    expect((await outboxOf(cedar, visitId)).every((row) => row.doneAt !== null)).toBe(true);
  });

  it('tells a change, takes back what still waits to be sent, and asks anew', async () => {
    const { companyId, visitId, personId } = await pourToTell();
    await store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose);
    await inside(cedar, async (tx) => {
      const [row] = (await tx.select().from(shifts)).filter((one) => one.visitId === visitId);
      if (!row) throw new Error('no shift');
      const { startsAt: _, ...values } = row;
      await tx
        .insert(shifts)
        .values(values)
        .onConflictDoUpdate({ target: [shifts.companyId, shifts.id], set: { answer: 'yes' } });
    });
    await move(cedar, visitId, {
      startMs: TUESDAY.startMs + 60 * MIN_MS,
      endMs: TUESDAY.endMs + 60 * MIN_MS,
    });
    await leave(cedar, visitId, NOW_MS + MIN_MS);
    const { noticeIds } = await store.composeDue({ companyId, visitId, nowMs: NOW_MS + MIN_MS }, compose);
    const written = await noticesOf(cedar, visitId);
    expect(written.filter((one) => noticeIds.includes(one.id)).map((one) => one.state)).toEqual([
      'queued',
      'queued',
    ]);
    expect(written.filter((one) => !noticeIds.includes(one.id))).toMatchObject([
      { state: 'failed', errorCode: 'superseded' },
      { state: 'failed', errorCode: 'superseded' },
    ]);
    const [shift] = await inside(cedar, async (tx) =>
      (await tx.select().from(shifts)).filter((one) => one.personId === personId),
    );
    expect(shift).toMatchObject({ state: 'held', answer: 'none', answeredAt: null });
  });

  it('is done once by two workers at once, and not at all when it fails', async () => {
    const { companyId, visitId } = await pourToTell();
    const failing = store.composeDue({ companyId, visitId, nowMs: NOW_MS }, () => {
      throw new Error('no words');
    });
    await expect(failing).rejects.toThrow('no words');
    expect(await outboxOf(cedar, visitId)).toMatchObject([{ doneAt: null }]);
    const both = await Promise.all(
      [1, 2].map(() => store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose)),
    );
    expect(both.map((one) => one.noticeIds.length).toSorted()).toEqual([0, 2]);
    expect(await noticesOf(cedar, visitId)).toHaveLength(2);
  });

  it('sees who is on the visit, asked, or off it, and who has said no', async () => {
    const { companyId, visitId, personId } = await pourToTell();
    const sub = await addPerson(db.web, cedar, { name: 'Asked Sub', role: 'sub', phoneE164: '+19705550198' });
    await makeOffer(db.web, cedar, { visitId, personId: sub, during: TUESDAY });
    await inbound.silence({ phoneE164: '+19705550198', nowMs: NOW_MS });
    const seen: Situation[] = [];
    const look = async (nowMs: number) => {
      await leave(cedar, visitId, nowMs);
      await store.composeDue({ companyId, visitId, nowMs }, (situation) => {
        seen.push(situation);
        return compose(situation);
      });
      const last = seen.at(-1);
      return new Map(last?.people.map((one) => [one.personId, one]));
    };
    const first = await look(NOW_MS);
    expect(first.get(personId)).toMatchObject({
      relation: 'shift',
      told: null,
      saidNo: false,
      silenced: false,
      zone: 'America/Chicago',
    });
    expect(first.get(sub)).toMatchObject({
      relation: 'offer',
      told: null,
      silenced: true,
      now: { crewStartMs: TUESDAY.startMs },
    });
    expect(await inbound.answer({ companyId, visitId, personId, answer: 'no', nowMs: NOW_MS + MIN_MS })).toBe(
      'recorded',
    );
    const second = await look(NOW_MS + 2 * MIN_MS);
    expect(second.get(personId)).toMatchObject({
      relation: 'off',
      saidNo: true,
      now: null,
      told: { crewStartMs: TUESDAY.startMs },
    });
    await inbound.unsilence({ phoneE164: '+19705550198' });
    expect(await inbound.isSilenced({ phoneE164: '+19705550198' })).toBe(false);
  });
});

describe('sending', () => {
  async function queued() {
    const { companyId, visitId, personId, phoneE164 } = await pourToTell();
    await store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose);
    const [notice] = (await noticesOf(cedar, visitId)).filter((one) => one.channel === 'sms');
    if (!notice) throw new Error('no notice');
    return { companyId, visitId, personId, phoneE164, noticeId: notice.id };
  }

  it('takes a notice once, with a link that opens that visit to that person until two weeks after it', async () => {
    const { companyId, noticeId, visitId, personId, phoneE164 } = await queued();
    const taken = await store.takeForSending({ companyId, noticeId, nowMs: NOW_MS });
    expect(taken).toMatchObject({
      channel: 'sms',
      toAddress: phoneE164,
      attempts: 1,
      silenced: false,
      subject: null,
    });
    const token = taken?.linkToken ?? '';
    expect(await openLink(db.web, token, NOW_MS)).toEqual({ companyId, personId, visitId });
    const fortnight = TUESDAY.endMs + 14 * 24 * 60 * MIN_MS;
    expect(await openLink(db.web, token, fortnight - 1)).not.toBeNull();
    expect(await openLink(db.web, token, fortnight)).toBeNull();
  });

  it('does not send again what was cut off while being sent, but leaves it to a person', async () => {
    const { companyId, noticeId, visitId } = await queued();
    await store.takeForSending({ companyId, noticeId, nowMs: NOW_MS });
    expect(await store.takeForSending({ companyId, noticeId, nowMs: NOW_MS })).toBeNull();
    const find = async () => (await noticesOf(cedar, visitId)).find((one) => one.id === noticeId);
    expect(await find()).toMatchObject({ state: 'unsure', errorCode: 'interrupted', attempts: 1 });
    expect(await store.takeForSending({ companyId, noticeId, nowMs: NOW_MS })).toBeNull();
    expect(await store.takeForSending({ companyId: prairie.companyId, noticeId, nowMs: NOW_MS })).toBeNull();
  });

  it('is taken by one of two workers only', async () => {
    const { companyId, noticeId } = await queued();
    const taken = await Promise.all(
      [1, 2, 3].map(() => store.takeForSending({ companyId, noticeId, nowMs: NOW_MS })),
    );
    expect(taken.filter((one) => one !== null)).toHaveLength(1);
  });

  it('says that a number has said STOP since', async () => {
    const { companyId, noticeId, phoneE164 } = await queued();
    await inbound.silence({ phoneE164, nowMs: NOW_MS });
    await inbound.silence({ phoneE164, nowMs: NOW_MS + 1 });
    expect((await store.takeForSending({ companyId, noticeId, nowMs: NOW_MS }))?.silenced).toBe(true);
    await inbound.unsilence({ phoneE164 });
  });

  it('records progress by the notice or by the provider’s id, with the first times of sent and delivered', async () => {
    const { companyId, noticeId, visitId } = await queued();
    const providerId = 'SM00000000000000000000000000000001';
    const sent = { state: 'sent', providerId, errorCode: null, error: null } as const;
    const delivered = { ...sent, state: 'delivered' } as const;
    expect(await store.changeNotice({ companyId, noticeId, nowMs: NOW_MS }, () => sent)).toEqual(sent);
    const webhook = noticeStore(db.web);
    expect(await webhook.changeNotice({ providerId, nowMs: NOW_MS + 5 }, () => delivered)).toEqual(delivered);
    expect(await webhook.changeNotice({ providerId, nowMs: NOW_MS + 9 }, () => null)).toEqual(delivered);
    expect(await webhook.changeNotice({ providerId: 'SM-unknown', nowMs: NOW_MS }, () => sent)).toBeNull();
    const other = { companyId: prairie.companyId, noticeId, nowMs: NOW_MS };
    expect(await webhook.changeNotice(other, () => sent)).toBeNull();
    const row = (await noticesOf(cedar, visitId)).find((one) => one.id === noticeId);
    expect(row).toMatchObject({ state: 'delivered', sentMs: NOW_MS, deliveredMs: NOW_MS + 5 });
  });
});

describe('texts that people send', () => {
  it('answer the newest question to the number in whatever company, while the visit has not ended', async () => {
    const phoneE164 = '+19705550190';
    const person = { name: 'Two Companies', role: 'sub', phoneE164 } as const;
    const personId = await addPerson(db.web, cedar, person);
    await addPerson(db.web, prairie, person);
    const ask = async (company: TestCompany, during: Interval, nowMs: number) => {
      const { visitId } = await placePour(db.web, company, { during });
      await makeOffer(db.web, company, { visitId, personId, during });
      await leave(company, visitId, nowMs);
      const { companyId } = company;
      const { noticeIds } = await store.composeDue({ companyId, visitId, nowMs }, compose);
      for (const noticeId of noticeIds) await store.takeForSending({ companyId, noticeId, nowMs });
      return { companyId, visitId, personId };
    };
    expect(await inbound.latestForPhone({ phoneE164, nowMs: NOW_MS })).toBeNull();
    const first = await ask(cedar, TUESDAY, NOW_MS);
    const second = await ask(prairie, TUESDAY, NOW_MS + MIN_MS);
    expect(await inbound.latestForPhone({ phoneE164, nowMs: NOW_MS })).toMatchObject({
      ...second,
      language: 'en',
      facts: { companyName: 'Prairie Test', crewStartMs: TUESDAY.startMs },
    });
    expect(await inbound.answer({ ...second, answer: 'yes', nowMs: NOW_MS })).toBe('recorded');
    expect(await inbound.answer({ ...first, answer: 'yes', nowMs: NOW_MS })).toBe('not-free');
    expect(await inbound.latestForPhone({ phoneE164, nowMs: NOW_MS })).toMatchObject(second);
    expect(await inbound.latestForPhone({ phoneE164, nowMs: TUESDAY.endMs })).toBeNull();
    expect(await inbound.latestForPhone({ phoneE164: '+19705550191', nowMs: NOW_MS })).toBeNull();
  });
});

describe('the list of notices', () => {
  it('comes newest first, a page at a time, and has none of another company', async () => {
    const one = await pourToTell(prairie, { startMs: TUESDAY.startMs, endMs: TUESDAY.endMs });
    const { companyId, visitId } = one;
    await store.composeDue({ companyId, visitId, nowMs: NOW_MS }, compose);
    const all = await inside(prairie, (tx) => listNotices(tx, {}));
    expect(all.hasMore).toBe(false);
    expect(all.notices.map((row) => row.id)).toEqual(
      all.notices
        .map((row) => row.id)
        .toSorted()
        .toReversed(),
    );
    const first = await inside(prairie, (tx) => listNotices(tx, { limit: 1 }));
    expect(first).toEqual({ notices: [all.notices[0]], hasMore: true });
    const next = await inside(prairie, (tx) => listNotices(tx, { before: first.notices[0]?.id }));
    expect(next.notices).toEqual(all.notices.slice(1));
    const cedars = await inside(cedar, (tx) => listNotices(tx, { limit: 500 }));
    expect(cedars.notices.map((row) => row.id)).not.toContain(all.notices[0]?.id);
    expect(all.notices[0]).toMatchObject({ visitTitle: 'Garage slab', personName: `Finisher ${count}` });
  });
});
