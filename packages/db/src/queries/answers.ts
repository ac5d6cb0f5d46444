import type { Finding } from '@strikeboard/domain/finding';
import type { Interval } from '@strikeboard/domain/interval';
import type { Answer } from '@strikeboard/domain/vocabulary';
import { and, desc, eq, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, NotFound, sqlStateOf } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { audit, offers, shifts, visits } from '../tables/index.ts';
import { lockBoard, recordBoardChange } from './board-change.ts';

/** Yes or no of one person to one visit. */
export interface GivenAnswer {
  visitId: string;
  personId: string;
  answer: Extract<Answer, 'yes' | 'no'>;
  nowMs: number;
  /** The start that the person was shown; null where they answer whatever stands (a text). */
  seenStartMs: number | null;
}

/**
 * `recorded`: kept; with `repeated` it was the same before and nothing changed.
 * `not-free`: the offer was taken but the time is not free any more; the offer has lapsed.
 * `not-asked`: not on the visit, or it is not to be answered: called off, done, or back from firm.
 */
export type AnswerResult =
  | { outcome: 'recorded'; repeated: boolean; during: Interval }
  | { outcome: 'not-free'; finding: Finding }
  | { outcome: 'not-asked' };

type ShiftRow = typeof shifts.$inferSelect;
type OfferRow = typeof offers.$inferSelect;

/**
 * Records a person's answer. A member's yes stands on their shift, their no releases it. A sub's yes to an offer makes
 * the shift, which fails where the time has been taken since, in whatever company; their no declines it. Minds may
 * be changed while the visit stands as it was asked. Each change is one of the board.
 * @throws NotFound when there is no such visit
 * @throws Conflict `changed-since` with the times as they are now, when the person was shown another start
 */
export async function answerVisit(tx: Tx, given: GivenAnswer): Promise<AnswerResult> {
  await lockBoard(tx);
  const [visit] = await tx
    .select({ state: visits.state, during: visits.during })
    .from(visits)
    .where(and(eq(visits.companyId, currentCompany), eq(visits.id, given.visitId)));
  if (!visit) throw new NotFound('visit', given.visitId);
  if (visit.state !== 'firm' || visit.during === null) return { outcome: 'not-asked' };
  const { during } = visit;
  const asked = await readAsked(tx, given);
  if (asked === null) return { outcome: 'not-asked' };
  if (given.seenStartMs !== null && given.seenStartMs !== during.startMs) {
    throw new Conflict('changed-since', { visitId: given.visitId, ...during });
  }
  const result = asked.shift
    ? await answerShift(tx, { given, shift: asked.shift, during })
    : await answerOffer(tx, { given, offer: asked.offer, during });
  if (result.outcome === 'not-asked' || (result.outcome === 'recorded' && result.repeated)) return result;
  await recordAnswer(tx, given, result);
  return result;
}

/** The shift or the offer that an answer is to: the held one, else the newest. */
async function readAsked(
  tx: Tx,
  of: GivenAnswer,
): Promise<{ shift: ShiftRow; offer?: undefined } | { shift?: undefined; offer: OfferRow } | null> {
  const [shift] = await tx
    .select()
    .from(shifts)
    .where(
      and(
        eq(shifts.companyId, currentCompany),
        eq(shifts.visitId, of.visitId),
        eq(shifts.personId, of.personId),
      ),
    )
    .orderBy(sql`${shifts.state} = 'held' desc`, desc(shifts.id))
    .limit(1);
  if (shift?.state === 'held') return { shift };
  const [offer] = await tx
    .select()
    .from(offers)
    .where(
      and(
        eq(offers.companyId, currentCompany),
        eq(offers.visitId, of.visitId),
        eq(offers.personId, of.personId),
      ),
    )
    .orderBy(desc(offers.id))
    .limit(1);
  const isOfferNewer = offer && offer.state !== 'accepted' && (!shift || offer.id > shift.id);
  if (isOfferNewer) return { offer };
  return shift ? { shift } : null;
}

async function answerShift(
  tx: Tx,
  of: { given: GivenAnswer; shift: ShiftRow; during: Interval },
): Promise<AnswerResult> {
  const { given, shift, during } = of;
  // Released without their no: taken off, or moved away.
  if (shift.state === 'released' && shift.answer !== 'no') return { outcome: 'not-asked' };
  if (shift.answer === given.answer) return { outcome: 'recorded', repeated: true, during: shift.during };
  if (shift.state === 'released' && !isSame(shift.during, during)) return { outcome: 'not-asked' };
  const answered = { answer: given.answer, answeredAt: new Date(given.nowMs) };
  const isFree = await holding(tx, given.personId, (inner) =>
    inner
      .update(shifts)
      .set({ ...answered, state: given.answer === 'yes' ? 'held' : 'released' })
      .where(and(eq(shifts.companyId, currentCompany), eq(shifts.id, shift.id))),
  );
  if (isFree) return { outcome: 'recorded', repeated: false, during: shift.during };
  return { outcome: 'not-free', finding: notFreeThen(given, shift.held) };
}

async function answerOffer(
  tx: Tx,
  of: { given: GivenAnswer; offer: OfferRow; during: Interval },
): Promise<AnswerResult> {
  const { given, offer, during } = of;
  const answeredAt = new Date(given.nowMs);
  const setState = (state: OfferRow['state']) =>
    tx
      .update(offers)
      .set({ state, answeredAt })
      .where(and(eq(offers.companyId, currentCompany), eq(offers.id, offer.id)));
  if (offer.state === 'withdrawn' || offer.state === 'accepted') return { outcome: 'not-asked' };
  if (given.answer === 'no') {
    if (offer.state === 'open') await setState('declined');
    return { outcome: 'recorded', repeated: offer.state !== 'open', during: offer.during };
  }
  if (!isSame(offer.during, during)) return { outcome: 'not-asked' };
  const isFree = await holding(tx, given.personId, (inner) =>
    inner.insert(shifts).values({
      companyId: currentCompany,
      id: newId(),
      visitId: offer.visitId,
      personId: offer.personId,
      during: offer.during,
      held: offer.held,
      answer: 'yes',
      answeredAt,
    }),
  );
  if (isFree) {
    await setState('accepted');
    return { outcome: 'recorded', repeated: false, during: offer.during };
  }
  if (offer.state !== 'lapsed') await setState('lapsed');
  return { outcome: 'not-free', finding: notFreeThen(given, offer.held) };
}

/** Tries a write that takes a person's time; false when it is taken, and the transaction goes on. */
async function holding(tx: Tx, personId: string, write: (inner: Tx) => Promise<unknown>): Promise<boolean> {
  // Two inserts that exclude each other would each wait for the other; in turn, one finds the other's.
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`person:${personId}`}, 0))`);
  for (let attempt = 1; ; attempt++) {
    try {
      await tx.transaction(async (inner) => {
        await write(inner);
      });
      return true;
    } catch (error) {
      const state = sqlStateOf(error);
      if (state === '23P01') return false;
      // A drop elsewhere may hold the person without that lock; the one that is ended tries again.
      if (state !== '40P01' || attempt === 3) throw error;
    }
  }
}

/**
 * The time is taken. What takes it may be another company's, which is nobody's business here, so the finding names
 * the time that was asked for and no other.
 */
function notFreeThen(given: GivenAnswer, held: Interval): Finding {
  return {
    code: 'person-overlap',
    severity: 'stop',
    visitId: given.visitId,
    against: [{ kind: 'person', id: given.personId }],
    during: held,
    facts: { takenBy: 'busy', fromMs: held.startMs, untilMs: held.endMs, travelOnly: false, leftOff: true },
    formula: null,
    source: { title: 'Half-open intervals that share time', status: 'arithmetic' },
    clears: [],
  };
}

async function recordAnswer(tx: Tx, given: GivenAnswer, result: AnswerResult): Promise<void> {
  const { visitId, personId } = given;
  await tx.insert(audit).values({
    companyId: currentCompany,
    id: newId(),
    at: new Date(given.nowMs),
    actorPersonId: personId,
    action: 'answer',
    subjectKind: 'visit',
    subjectId: visitId,
    after: { personId, answer: given.answer, outcome: result.outcome },
  });
  await recordBoardChange(tx, { kind: 'answer', actorPersonId: personId, visitIds: [visitId] });
}

function isSame(one: Interval, other: Interval): boolean {
  return one.startMs === other.startMs && one.endMs === other.endMs;
}
