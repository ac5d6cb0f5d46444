import { calledOffFacts, type ToldFacts } from '@strikeboard/domain/told';
import type { Language, VisitState } from '@strikeboard/domain/vocabulary';
import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { currentCompany } from '../tables/columns.ts';
import { members, offers, people, shifts, silencedNumbers, told } from '../tables/index.ts';
import { readVisitFacts, toldFactsSchema } from './visit-facts.ts';

/** One person whom a change of a visit may concern. */
export interface PersonSituation {
  personId: string;
  name: string;
  phoneE164: string | null;
  email: string | null;
  /** The number has said STOP. */
  silenced: boolean;
  language: Language;
  /** IANA zone that the person lives in. */
  zone: string;
  /** Holds a shift, has an open offer, or neither. */
  relation: 'shift' | 'offer' | 'off';
  /** What they were last told of this visit; null: nothing. */
  told: ToldFacts | null;
  /** They have said no since they were last told. */
  saidNo: boolean;
  /** The plan as it concerns them; null for `off`. */
  now: ToldFacts | null;
}

/** Everything that composing needs to know of one visit. */
export interface Situation {
  companyId: string;
  visitId: string;
  visitState: VisitState;
  units: 'us' | 'metric';
  nowMs: number;
  people: PersonSituation[];
}

/**
 * Reads whom a visit concerns (everyone with a held shift, an open offer, or told of it before), what they know of it
 * and what is now. While it waits or is pencilled nobody is on it.
 */
export async function readSituation(
  tx: Tx,
  of: { companyId: string; visitId: string; nowMs: number },
): Promise<Situation> {
  const { companyId, visitId, nowMs } = of;
  const { visit, units, facts } = await readVisitFacts(tx, visitId);
  const shiftRows = await tx
    .select()
    .from(shifts)
    .where(and(eq(shifts.companyId, currentCompany), eq(shifts.visitId, visitId)));
  const offerRows = await tx
    .select()
    .from(offers)
    .where(and(eq(offers.companyId, currentCompany), eq(offers.visitId, visitId)));
  const toldRows = await tx
    .select()
    .from(told)
    .where(and(eq(told.companyId, currentCompany), eq(told.visitId, visitId)));

  const isOn = visit.state !== 'waiting' && visit.state !== 'pencilled';
  const held = new Set(shiftRows.filter((row) => row.state === 'held').map((row) => row.personId));
  const asked = new Set(offerRows.filter((row) => row.state === 'open').map((row) => row.personId));
  const toldTo = new Map(toldRows.map((row) => [row.personId, row]));
  const saidNoSince = (personId: string): boolean => {
    const since = toldTo.get(personId)?.toldAt;
    const isLater = (at: Date | null) => at !== null && since !== undefined && at >= since;
    return (
      shiftRows.some((row) => row.personId === personId && row.answer === 'no' && isLater(row.answeredAt)) ||
      offerRows.some(
        (row) => row.personId === personId && row.state === 'declined' && isLater(row.answeredAt),
      )
    );
  };

  const contacts = await readContacts(tx, [...new Set([...held, ...asked, ...toldTo.keys()])]);
  return {
    companyId,
    visitId,
    visitState: visit.state,
    units,
    nowMs,
    people: contacts.map((contact): PersonSituation => {
      const { personId } = contact;
      const relation = !isOn ? 'off' : held.has(personId) ? 'shift' : asked.has(personId) ? 'offer' : 'off';
      const row = toldTo.get(personId);
      const toldFacts = row ? toldFactsSchema.parse(row.facts) : null;
      const now = visit.state === 'called-off' ? toldFacts && calledOffFacts(toldFacts) : facts;
      return {
        ...contact,
        relation,
        told: toldFacts,
        saidNo: saidNoSince(personId),
        now: relation === 'off' && visit.state !== 'called-off' ? null : now,
      };
    }),
  };
}

async function readContacts(tx: Tx, personIds: string[]) {
  if (personIds.length === 0) return [];
  return tx
    .select({
      personId: members.personId,
      name: members.name,
      phoneE164: members.phoneE164,
      email: members.email,
      language: members.language,
      zone: people.zone,
      silenced: sql<boolean>`${silencedNumbers.phoneE164} is not null`,
    })
    .from(members)
    .innerJoin(people, eq(people.id, members.personId))
    .leftJoin(silencedNumbers, eq(silencedNumbers.phoneE164, members.phoneE164))
    .where(and(eq(members.companyId, currentCompany), inArray(members.personId, personIds)))
    .orderBy(members.name, members.personId);
}
