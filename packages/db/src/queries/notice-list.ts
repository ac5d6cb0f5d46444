import type { Channel, NoticeState } from '@strikeboard/domain/vocabulary';
import { and, desc, eq, lt } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { currentCompany } from '../tables/columns.ts';
import { members, notices, visits } from '../tables/index.ts';

/** A notice as its page lists it. */
export interface ListedNotice {
  id: string;
  visitId: string;
  visitTitle: string;
  personId: string;
  personName: string;
  channel: Channel;
  toAddress: string;
  subject: string | null;
  /** The words as composed; where the link went it says `{link}`, since tokens are not kept. */
  body: string;
  state: NoticeState;
  errorCode: string | null;
  error: string | null;
  attempts: number;
  queuedMs: number;
  sentMs: number | null;
  deliveredMs: number | null;
}

const PAGE = 50;

/** Notices, newest first, a page at a time: those before the one named. */
export async function listNotices(
  tx: Tx,
  which: { before?: string; state?: NoticeState; visitId?: string; limit?: number },
): Promise<{ notices: ListedNotice[]; hasMore: boolean }> {
  const limit = which.limit ?? PAGE;
  const rows = await tx
    .select({ notice: notices, visitTitle: visits.title, personName: members.name })
    .from(notices)
    .innerJoin(visits, and(eq(visits.companyId, notices.companyId), eq(visits.id, notices.visitId)))
    .innerJoin(members, and(eq(members.companyId, notices.companyId), eq(members.personId, notices.personId)))
    .where(
      and(
        eq(notices.companyId, currentCompany),
        which.before === undefined ? undefined : lt(notices.id, which.before),
        which.state === undefined ? undefined : eq(notices.state, which.state),
        which.visitId === undefined ? undefined : eq(notices.visitId, which.visitId),
      ),
    )
    // Keys sort by the time they were made.
    .orderBy(desc(notices.id))
    .limit(limit + 1);
  const listed = rows.slice(0, limit).map(({ notice, visitTitle, personName }): ListedNotice => {
    const { id, visitId, personId, channel, toAddress, subject, body, state, errorCode, error } = notice;
    return {
      ...{ id, visitId, visitTitle, personId, personName, channel, toAddress, subject, body },
      ...{ state, errorCode, error, attempts: notice.attempts },
      queuedMs: notice.queuedAt.getTime(),
      sentMs: notice.sentAt?.getTime() ?? null,
      deliveredMs: notice.deliveredAt?.getTime() ?? null,
    };
  });
  return { notices: listed, hasMore: rows.length > limit };
}
