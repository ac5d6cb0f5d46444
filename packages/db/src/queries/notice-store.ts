import type { ToldFacts } from '@strikeboard/domain/told';
import type { Channel, Language, NoticeState } from '@strikeboard/domain/vocabulary';
import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import { type Database, inCompany, type Tx } from '../client.ts';
import { guarded } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { notices, outbox, shifts, silencedNumbers, told, visits } from '../tables/index.ts';
import { lockBoard, recordBoardChange } from './board-change.ts';
import { addJob } from './jobs.ts';
import { issueLink } from './links.ts';
import { readSituation, type Situation } from './notice-situation.ts';

/** A message to be written. `{link}` in its body stands for a link that is made at sending. */
export interface ComposedNotice {
  personId: string;
  channel: Channel;
  language: Language;
  toAddress: string;
  subject: string | null;
  body: string;
  /** Not to be sent before this instant. */
  sendAtMs: number;
}

/** What composing makes of a situation. */
export interface Composed {
  notices: ComposedNotice[];
  /** With `asksAnew` the answer to what they were told before does not count any more. */
  told: { personId: string; facts: ToldFacts; asksAnew: boolean }[];
}

/** A notice taken for sending. */
export interface NoticeToSend {
  companyId: string;
  noticeId: string;
  channel: Channel;
  language: Language;
  toAddress: string;
  subject: string | null;
  body: string;
  silenced: boolean;
  /** From 1. */
  attempts: number;
  /** Null where the body has no place for a link. */
  linkToken: string | null;
}

export interface NoticeKey {
  companyId: string;
  noticeId: string;
}

/** The columns of a notice that sending and delivery reports change. */
export interface NoticeProgress {
  state: NoticeState;
  providerId: string | null;
  errorCode: string | null;
  error: string | null;
}

const LINK_PLACE = '{link}';
/** A link opens this long after the visit's end, so that its page can still be looked up; common practice, no source. */
const LINK_DAYS = 14;
const DAY_MS = 86_400_000;

/** What the tasks of telling and sending, and the webhook of delivery reports, keep and ask. */
export function noticeStore(db: Database) {
  return {
    /**
     * Composes for one visit what has settled, in one transaction: notices with their jobs, what people now know, and
     * the end of what was left to tell. What is not due yet gets a job for when it is. Of older notices to the same
     * person by the same channel those still queued are not sent any more.
     */
    composeDue(
      of: { companyId: string; visitId: string; nowMs: number },
      compose: (situation: Situation) => Composed,
    ): Promise<{ noticeIds: string[] }> {
      return inCompany(db, { companyId: of.companyId, personId: null }, async (tx) => {
        await lockBoard(tx);
        const pending = await tx
          .select({ id: outbox.id, dueAt: outbox.dueAt })
          .from(outbox)
          .where(
            and(eq(outbox.companyId, currentCompany), eq(outbox.visitId, of.visitId), isNull(outbox.doneAt)),
          )
          .for('update');
        if (pending.length === 0) return { noticeIds: [] };
        const dueMs = Math.max(...pending.map((row) => row.dueAt.getTime()));
        if (dueMs > of.nowMs) {
          const { visitId } = of;
          await addJob(tx, {
            task: 'tell-visit',
            payload: { visitId },
            key: `tell:${visitId}`,
            runAtMs: dueMs,
          });
          return { noticeIds: [] };
        }
        const noticeIds = await writeComposed(tx, of, compose(await readSituation(tx, of)));
        const rowIds = pending.map((row) => row.id);
        await tx
          .update(outbox)
          .set({ doneAt: new Date(of.nowMs) })
          .where(and(eq(outbox.companyId, currentCompany), inArray(outbox.id, rowIds)));
        await recordBoardChange(tx, { kind: 'told', actorPersonId: null, visitIds: [of.visitId] });
        return { noticeIds };
      });
    },

    /**
     * Takes a queued notice for sending; null when it is not to be sent. One that was being sent when its task died
     * may have gone out, so it becomes `unsure` and is left to a person.
     */
    takeForSending(of: NoticeKey & { nowMs: number }): Promise<NoticeToSend | null> {
      return inCompany(db, { companyId: of.companyId, personId: null }, async (tx) => {
        const [row] = await tx.select().from(notices).where(isNotice(of.noticeId)).for('update');
        if (row?.state === 'sending') {
          await tx
            .update(notices)
            .set({ state: 'unsure', errorCode: 'interrupted' })
            .where(isNotice(of.noticeId));
        }
        if (row?.state !== 'queued') return null;
        const attempts = row.attempts + 1;
        await tx.update(notices).set({ state: 'sending', attempts }).where(isNotice(of.noticeId));
        const { channel, language, toAddress, subject, body } = row;
        const linkToken = body.includes(LINK_PLACE) ? await makeLink(tx, { ...row, nowMs: of.nowMs }) : null;
        const silenced = channel === 'sms' && (await isSilenced(tx, toAddress));
        const { companyId, noticeId } = of;
        return {
          ...{ companyId, noticeId, channel, language, toAddress, subject, body },
          ...{ silenced, attempts, linkToken },
        };
      });
    },

    /**
     * Writes what `decide` makes of a notice's progress, which is held meanwhile; null from `decide` leaves it. Returns
     * the progress as it then is; null: no such notice.
     */
    async changeNotice(
      which: (NoticeKey | { providerId: string }) & { nowMs: number },
      decide: (current: NoticeProgress) => NoticeProgress | null,
    ): Promise<NoticeProgress | null> {
      const key = 'noticeId' in which ? which : await noticeOfProvider(db, which.providerId);
      if (key === null) return null;
      return inCompany(db, { companyId: key.companyId, personId: null }, async (tx) => {
        const [row] = await tx.select().from(notices).where(isNotice(key.noticeId)).for('update');
        if (!row) return null;
        const { state, providerId, errorCode, error } = row;
        const current = { state, providerId, errorCode, error };
        const next = decide(current);
        if (next === null) return current;
        const now = new Date(which.nowMs);
        const isSent = next.state === 'sent' || next.state === 'delivered';
        await tx
          .update(notices)
          .set({
            ...next,
            sentAt: row.sentAt ?? (isSent ? now : null),
            deliveredAt: row.deliveredAt ?? (next.state === 'delivered' ? now : null),
          })
          .where(isNotice(key.noticeId));
        return next;
      });
    },
  };
}

async function writeComposed(
  tx: Tx,
  of: { visitId: string; nowMs: number },
  composed: Composed,
): Promise<string[]> {
  const { visitId } = of;
  const now = new Date(of.nowMs);
  for (const { personId, channel } of composed.notices) {
    await tx
      .update(notices)
      .set({ state: 'failed', errorCode: 'superseded' })
      .where(
        and(
          eq(notices.companyId, currentCompany),
          eq(notices.visitId, visitId),
          eq(notices.personId, personId),
          eq(notices.channel, channel),
          eq(notices.state, 'queued'),
        ),
      );
  }
  const noticeIds: string[] = [];
  for (const { sendAtMs, ...notice } of composed.notices) {
    const id = newId();
    await tx.insert(notices).values({ companyId: currentCompany, id, visitId, ...notice, queuedAt: now });
    await addJob(tx, {
      task: 'send-notice',
      payload: { noticeId: id },
      key: `send:${id}`,
      runAtMs: sendAtMs,
    });
    noticeIds.push(id);
  }
  for (const { personId, facts, asksAnew } of composed.told) {
    const row = { facts: { ...facts }, toldAt: now };
    await tx
      .insert(told)
      .values({ companyId: currentCompany, visitId, personId, ...row })
      .onConflictDoUpdate({ target: [told.companyId, told.visitId, told.personId], set: row });
    if (!asksAnew) continue;
    await tx
      .update(shifts)
      .set({ answer: 'none', answeredAt: null })
      .where(
        and(
          eq(shifts.companyId, currentCompany),
          eq(shifts.visitId, visitId),
          eq(shifts.personId, personId),
          eq(shifts.state, 'held'),
        ),
      );
  }
  return noticeIds;
}

async function makeLink(tx: Tx, of: { visitId: string; personId: string; nowMs: number }): Promise<string> {
  const [visit] = await tx
    .select({ during: visits.during })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, of.visitId)));
  const endMs = Math.max(of.nowMs, visit?.during?.endMs ?? 0);
  const { visitId, personId, nowMs } = of;
  return issueLink(tx, { visitId, personId, nowMs, expiresMs: endMs + LINK_DAYS * DAY_MS });
}

async function isSilenced(tx: Tx, phoneE164: string): Promise<boolean> {
  const rows = await tx
    .select({ phoneE164: silencedNumbers.phoneE164 })
    .from(silencedNumbers)
    .where(eq(silencedNumbers.phoneE164, phoneE164));
  return rows.length > 0;
}

async function noticeOfProvider(db: Database, providerId: string): Promise<NoticeKey | null> {
  const { rows } = await guarded(() =>
    db.orm.execute<{ company_id: string; notice_id: string }>(
      sql`select company_id, notice_id from app.notice_of_provider(${providerId})`,
    ),
  );
  const [row] = rows;
  return row ? { companyId: row.company_id, noticeId: row.notice_id } : null;
}

function isNotice(noticeId: string) {
  return and(eq(notices.companyId, currentCompany), eq(notices.id, noticeId));
}
