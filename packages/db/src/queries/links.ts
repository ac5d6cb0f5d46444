import { and, eq, gt, isNull, sql } from 'drizzle-orm';
import type { Database, Tx } from '../client.ts';
import { guarded } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { links } from '../tables/index.ts';
import { newToken, tokenHash } from './tokens.ts';

/** What a link opens: one visit, to one person, in one company. */
export interface OpenedLink {
  companyId: string;
  personId: string;
  visitId: string;
}

/** What the token opens, or null when it is unknown, taken back or has run out, which all look the same. */
export async function openLink(db: Database, token: string, nowMs: number): Promise<OpenedLink | null> {
  const { rows } = await guarded(() =>
    db.orm.execute<{ company_id: string; person_id: string; visit_id: string }>(
      sql`select company_id, person_id, visit_id
        from app.open_link(${tokenHash(token)}, ${new Date(nowMs).toISOString()}::timestamptz)`,
    ),
  );
  const [row] = rows;
  return row ? { companyId: row.company_id, personId: row.person_id, visitId: row.visit_id } : null;
}

/** Makes a link and returns its token, which is not kept. Links made earlier stay open. Needs the company set. */
export async function issueLink(
  tx: Tx,
  link: { visitId: string; personId: string; nowMs: number; expiresMs: number },
): Promise<string> {
  const token = newToken();
  await tx.insert(links).values({
    companyId: currentCompany,
    id: newId(),
    tokenHash: tokenHash(token),
    visitId: link.visitId,
    personId: link.personId,
    createdAt: new Date(link.nowMs),
    expiresAt: new Date(link.expiresMs),
  });
  return token;
}

/** Takes back the open links of a visit, of a person, or of one person on one visit; returns how many. */
export async function revokeLinks(
  tx: Tx,
  of: { visitId: string; personId?: string; nowMs: number } | { personId: string; nowMs: number },
): Promise<number> {
  const now = new Date(of.nowMs);
  const revoked = await tx
    .update(links)
    .set({ revokedAt: now })
    .where(
      and(
        eq(links.companyId, currentCompany),
        'visitId' in of ? eq(links.visitId, of.visitId) : undefined,
        of.personId === undefined ? undefined : eq(links.personId, of.personId),
        isNull(links.revokedAt),
        gt(links.expiresAt, now),
      ),
    );
  return revoked.rowCount ?? 0;
}
