import { type Interval, makeInterval, overlaps } from '@strikeboard/domain/interval';
import type { Answer, OfferState, VisitKind } from '@strikeboard/domain/vocabulary';
import { and, desc, eq, gte, inArray, isNull, lt, or, sql } from 'drizzle-orm';
import { asPerson, type Database, inCompany, type Tx } from '../client.ts';
import { NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { crews, offers, personBusy, shifts, sites, visits } from '../tables/index.ts';
import { type Membership, membershipsOf } from './sign-in.ts';

/** A shift or an offer of one person, with what they need to know of the visit. Pencilled visits are told to nobody. */
export interface CalendarEntry {
  kind: 'shift' | 'offer';
  companyId: string;
  companySlug: string;
  companyName: string;
  visitId: string;
  visitVersion: number;
  visitKind: VisitKind;
  visitState: 'firm' | 'done';
  title: string;
  crewName: string | null;
  siteName: string;
  address: string;
  /** IANA zone of the site, in which the times are read. */
  zone: string;
  during: Interval;
  /** `held`: time is taken. `declined`: the person said no. The others are the states of an offer. */
  state: 'held' | 'declined' | Extract<OfferState, 'open' | 'lapsed'>;
  answer: Answer;
}

/** Time that the person has marked as taken. */
export interface BusyMark {
  id: string;
  during: Interval;
  /** Marked by day; the times are the midnights of the person's own zone. */
  wholeDays: boolean;
  note: string | null;
}

export interface MyCalendar {
  /** By start. */
  entries: CalendarEntry[];
  /** By start. */
  busy: BusyMark[];
}

/** Longest stretch of one shift, for the search by start. */
const LONGEST_SHIFT_MS = 48 * 3_600_000;

/** A person's shifts, offers and marks in every company they belong to, as far as they touch the range. */
export async function readMyCalendar(
  db: Database,
  my: { personId: string; range: Interval },
): Promise<MyCalendar> {
  const range = makeInterval(my.range.startMs, my.range.endMs);
  const entries: CalendarEntry[] = [];
  for (const membership of await membershipsOf(db, my.personId)) {
    const of = { companyId: membership.companyId, personId: my.personId };
    entries.push(
      ...(await inCompany(db, of, (tx) => readEntries(tx, { membership, personId: my.personId, range }))),
    );
  }
  const busy = await asPerson(db, my.personId, (tx) => readBusy(tx, { personId: my.personId, range }));
  return { entries: entries.toSorted((a, b) => a.during.startMs - b.during.startMs), busy };
}

/**
 * Marks time as taken. A mark over shifts that are held is kept, for the person knows best; those shifts are
 * returned so that they can be told to say no to them.
 * @throws InputProblem `endMs` when the end is not after the start
 */
export async function markBusy(
  db: Database,
  mark: { personId: string; startMs: number; endMs: number; wholeDays: boolean; note: string | null },
): Promise<{ id: string; heldShifts: CalendarEntry[] }> {
  const during = makeInterval(mark.startMs, mark.endMs);
  const id = newId();
  const { personId, wholeDays, note } = mark;
  await asPerson(db, personId, (tx) =>
    tx.insert(personBusy).values({ id, personId, during, wholeDays, note }),
  );
  const { entries } = await readMyCalendar(db, { personId, range: during });
  return { id, heldShifts: entries.filter((entry) => entry.state === 'held') };
}

/**
 * Makes marked time free again; done twice it stays so.
 * @throws NotFound when the person has no such mark
 */
export async function endBusy(
  db: Database,
  mark: { personId: string; id: string; nowMs: number },
): Promise<void> {
  await asPerson(db, mark.personId, async (tx) => {
    const isTheirs = and(eq(personBusy.id, mark.id), eq(personBusy.personId, mark.personId));
    const [found] = await tx.select({ endedAt: personBusy.endedAt }).from(personBusy).where(isTheirs);
    if (!found) throw new NotFound('busy-mark', mark.id);
    await tx
      .update(personBusy)
      .set({ endedAt: new Date(mark.nowMs) })
      .where(and(isTheirs, isNull(personBusy.endedAt)));
  });
}

async function readBusy(tx: Tx, of: { personId: string; range: Interval }): Promise<BusyMark[]> {
  return tx
    .select({
      id: personBusy.id,
      during: personBusy.during,
      wholeDays: personBusy.wholeDays,
      note: personBusy.note,
    })
    .from(personBusy)
    .where(
      and(
        eq(personBusy.personId, of.personId),
        isNull(personBusy.endedAt),
        sql`${personBusy.during} && ${sql.param(of.range, personBusy.during)}`,
      ),
    )
    .orderBy(sql`lower(${personBusy.during})`);
}

interface EntriesOf {
  membership: Membership;
  personId: string;
  range: Interval;
}

async function readEntries(tx: Tx, of: EntriesOf): Promise<CalendarEntry[]> {
  const held = await readShifts(tx, of);
  const heldVisits = new Set(held.filter((entry) => entry.state === 'held').map((entry) => entry.visitId));
  const shown = held.filter((entry) => entry.state === 'held' || !heldVisits.has(entry.visitId));
  const shownVisits = new Set(shown.map((entry) => entry.visitId));
  const asked = await readOffers(tx, of);
  return firstOfEachVisit([...shown, ...asked.filter((entry) => !shownVisits.has(entry.visitId))]);
}

async function readShifts(tx: Tx, of: EntriesOf): Promise<CalendarEntry[]> {
  const rows = await tx
    .select({ ...visitFields, during: shifts.during, state: shifts.state, answer: shifts.answer })
    .from(shifts)
    .innerJoin(visits, and(eq(visits.companyId, shifts.companyId), eq(visits.id, shifts.visitId)))
    .innerJoin(sites, and(eq(sites.companyId, visits.companyId), eq(sites.id, visits.siteId)))
    .leftJoin(crews, and(eq(crews.companyId, visits.companyId), eq(crews.id, visits.crewId)))
    .where(
      and(
        eq(shifts.companyId, currentCompany),
        eq(shifts.personId, of.personId),
        startsNear(shifts.startsAt, of.range),
        or(eq(shifts.state, 'held'), eq(shifts.answer, 'no')),
        inArray(visits.state, ['firm', 'done']),
      ),
    )
    .orderBy(desc(shifts.id));
  return rows
    .filter((row) => overlaps(row.during, of.range))
    .map((row) => ({
      ...entryOf(row, of.membership),
      kind: 'shift',
      state: row.state === 'held' ? 'held' : 'declined',
      answer: row.answer,
    }));
}

async function readOffers(tx: Tx, of: EntriesOf): Promise<CalendarEntry[]> {
  const rows = await tx
    .select({ ...visitFields, during: offers.during, state: offers.state })
    .from(offers)
    .innerJoin(visits, and(eq(visits.companyId, offers.companyId), eq(visits.id, offers.visitId)))
    .innerJoin(sites, and(eq(sites.companyId, visits.companyId), eq(sites.id, visits.siteId)))
    .leftJoin(crews, and(eq(crews.companyId, visits.companyId), eq(crews.id, visits.crewId)))
    .where(
      and(
        eq(offers.companyId, currentCompany),
        eq(offers.personId, of.personId),
        startsNear(offers.startsAt, of.range),
        inArray(offers.state, ['open', 'declined', 'lapsed']),
        inArray(visits.state, ['firm', 'done']),
      ),
    )
    .orderBy(desc(offers.id));
  return rows
    .filter((row) => overlaps(row.during, of.range))
    .flatMap((row) => {
      if (row.state !== 'open' && row.state !== 'declined' && row.state !== 'lapsed') return [];
      const answer = row.state === 'declined' ? 'no' : 'none';
      return [{ ...entryOf(row, of.membership), kind: 'offer', state: row.state, answer }];
    });
}

const visitFields = {
  visitId: visits.id,
  visitVersion: visits.version,
  visitKind: visits.kind,
  visitState: visits.state,
  title: visits.title,
  crewName: crews.name,
  siteName: sites.name,
  address: sites.address,
  zone: sites.zone,
};

interface VisitRow {
  visitId: string;
  visitVersion: number;
  visitKind: VisitKind;
  visitState: string;
  title: string;
  crewName: string | null;
  siteName: string;
  address: string;
  zone: string;
  during: Interval;
}

function entryOf(row: VisitRow, membership: Membership): Omit<CalendarEntry, 'kind' | 'state' | 'answer'> {
  const { visitId, visitVersion, visitKind, title, crewName, siteName, address, zone, during } = row;
  return {
    companyId: membership.companyId,
    companySlug: membership.slug,
    companyName: membership.name,
    visitId,
    visitVersion,
    visitKind,
    visitState: row.visitState === 'done' ? 'done' : 'firm',
    title,
    crewName,
    siteName,
    address,
    zone,
    during,
  };
}

/** Whatever touches the range starts in it or not long before; starts are what can be searched by index. */
function startsNear(startsAt: typeof shifts.startsAt | typeof offers.startsAt, range: Interval) {
  return and(gte(startsAt, new Date(range.startMs - LONGEST_SHIFT_MS)), lt(startsAt, new Date(range.endMs)));
}

/** Of several rows on one visit the newest counts, which stands first. */
function firstOfEachVisit(entries: CalendarEntry[]): CalendarEntry[] {
  return [...new Map(entries.toReversed().map((entry) => [entry.visitId, entry])).values()];
}
