import type { ToldFacts } from '@strikeboard/domain/told';
import type { Language } from '@strikeboard/domain/vocabulary';
import { and, eq, inArray, or, sql } from 'drizzle-orm';
import { type Database, inCompany, type Tx } from '../client.ts';
import { guarded, NotFound } from '../errors.ts';
import { currentCompany } from '../tables/columns.ts';
import { offers, shifts, silencedNumbers, told, visits } from '../tables/index.ts';
import { answerVisit } from './answers.ts';
import { toldFactsSchema } from './visit-facts.ts';

/** The question that a number was last asked. */
export interface OpenQuestion {
  companyId: string;
  visitId: string;
  personId: string;
  language: Language;
  /** What the person was told and answers to. */
  facts: ToldFacts;
}

/** What the webhook of texts that people send keeps and asks. */
export function inboundStore(db: Database) {
  return {
    /** From now on no company's text goes to the number. */
    async silence(of: { phoneE164: string; nowMs: number }): Promise<void> {
      const row = { phoneE164: of.phoneE164, silencedAt: new Date(of.nowMs) };
      await guarded(() => db.orm.insert(silencedNumbers).values(row).onConflictDoNothing().execute());
    },

    /** Ends a silence. */
    async unsilence(of: { phoneE164: string }): Promise<void> {
      const isIt = eq(silencedNumbers.phoneE164, of.phoneE164);
      await guarded(() => db.orm.delete(silencedNumbers).where(isIt).execute());
    },

    async isSilenced(of: { phoneE164: string }): Promise<boolean> {
      const isIt = eq(silencedNumbers.phoneE164, of.phoneE164);
      const rows = await guarded(() => db.orm.select().from(silencedNumbers).where(isIt).execute());
      return rows.length > 0;
    },

    /** The newest text to the number, in whatever company, that can still be answered; null: there is none. */
    async latestForPhone(of: { phoneE164: string; nowMs: number }): Promise<OpenQuestion | null> {
      const { rows } = await guarded(() =>
        db.orm.execute<{ company_id: string; visit_id: string; person_id: string; language: Language }>(
          sql`select company_id, visit_id, person_id, language from app.texts_to(${of.phoneE164})`,
        ),
      );
      const seen = new Set<string>();
      for (const row of rows) {
        const { company_id: companyId, visit_id: visitId, person_id: personId, language } = row;
        const key = `${companyId} ${visitId} ${personId}`;
        if (seen.has(key)) continue;
        seen.add(key);
        const facts = await inCompany(db, { companyId, personId }, (tx) =>
          readOpenFacts(tx, { visitId, personId, nowMs: of.nowMs }),
        );
        if (facts) return { companyId, visitId, personId, language, facts };
      }
      return null;
    },

    /** Records an answer that came by text, to whatever stands: texts name no time. */
    async answer(of: {
      companyId: string;
      visitId: string;
      personId: string;
      answer: 'yes' | 'no';
      nowMs: number;
    }): Promise<'recorded' | 'not-free' | 'not-asked'> {
      const { companyId, ...given } = of;
      try {
        const { outcome } = await inCompany(db, { companyId, personId: of.personId }, (tx) =>
          answerVisit(tx, { ...given, seenStartMs: null }),
        );
        return outcome;
      } catch (error) {
        if (error instanceof NotFound) return 'not-asked';
        throw error;
      }
    },
  };
}

/** What the person was told of a visit that they are still asked for; null when there is nothing to answer. */
async function readOpenFacts(
  tx: Tx,
  of: { visitId: string; personId: string; nowMs: number },
): Promise<ToldFacts | null> {
  const { visitId, personId } = of;
  const [visit] = await tx
    .select({ state: visits.state, during: visits.during })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, visitId)));
  if (visit?.state !== 'firm' || visit.during === null || visit.during.endMs <= of.nowMs) return null;
  const [shift] = await tx
    .select({ id: shifts.id })
    .from(shifts)
    .where(
      and(
        eq(shifts.companyId, currentCompany),
        eq(shifts.visitId, visitId),
        eq(shifts.personId, personId),
        or(eq(shifts.state, 'held'), eq(shifts.answer, 'no')),
      ),
    )
    .limit(1);
  const [offer] = await tx
    .select({ id: offers.id })
    .from(offers)
    .where(
      and(
        eq(offers.companyId, currentCompany),
        eq(offers.visitId, visitId),
        eq(offers.personId, personId),
        inArray(offers.state, ['open', 'declined']),
      ),
    )
    .limit(1);
  if (!shift && !offer) return null;
  const [row] = await tx
    .select({ facts: told.facts })
    .from(told)
    .where(and(eq(told.companyId, currentCompany), eq(told.visitId, visitId), eq(told.personId, personId)));
  const facts = row ? toldFactsSchema.parse(row.facts) : null;
  return facts === null || facts.calledOff ? null : facts;
}
