import { addDays, instantAt, mondayOf, type SiteDay, siteDayOf } from '@strikeboard/domain/zone';
import { and, asc, eq, gte, isNotNull, lt, type SQL, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { currentCompany } from '../tables/columns.ts';
import { companies, crews, visits } from '../tables/index.ts';

const PAST_WEEKS = 8;
const NEXT_WEEKS = 4;

/** Yards ordered, as exact decimals without trailing zeros ("0", "42.25"). A pour of several visits counts by part. */
export interface YardSum {
  orderedYd3: string;
  pencilledYd3: string;
  firmYd3: string;
  doneYd3: string;
  /** How many visits the yards come from. */
  visitCount: number;
}

export interface YardSheetWeek {
  /** Monday of the week at the company's office. */
  startsOn: SiteDay;
  when: 'past' | 'current' | 'next';
  /** What stands on the board. */
  placed: YardSum;
  /** What waits and is wanted in this week, by the site's day. */
  waitingYd3: string;
  waitingCount: number;
}

export interface YardSheetCrew {
  crewId: string;
  crewName: string;
  /** The crew does not work any more. */
  ended: boolean;
  total: YardSum;
  /** One entry for each week of the sheet, in its order. */
  weeks: YardSum[];
}

export interface YardSheet {
  /** IANA zone whose Mondays begin the weeks: that of the office. */
  zone: string;
  weeks: YardSheetWeek[];
  byCrew: YardSheetCrew[];
  total: YardSum;
}

/**
 * Yards ordered for pours per week and crew: eight weeks back, this one and four ahead. A pour that is
 * called off counts nowhere; one that waits stands apart, by the day it is wanted. A visit belongs to the week
 * in which its crew starts by the office's clock. Needs the company set.
 */
export async function readYardSheet(tx: Tx, at: { nowMs: number }): Promise<YardSheet> {
  const [company] = await tx
    .select({ zone: companies.zone })
    .from(companies)
    .where(eq(companies.id, currentCompany));
  if (!company) throw new Error('The yard sheet is read with a company set.');
  const { zone } = company;
  const thisMonday = mondayOf(siteDayOf(at.nowMs, zone));
  const mondays = Array.from({ length: PAST_WEEKS + 1 + NEXT_WEEKS }, (_, index) =>
    addDays(thisMonday, 7 * (index - PAST_WEEKS)),
  );
  const first = addDays(thisMonday, -7 * PAST_WEEKS);
  const afterLast = addDays(thisMonday, 7 * (NEXT_WEEKS + 1));
  const sums = await readPlaced(tx, { zone, first, afterLast });
  const waiting = await readWaiting(tx, { first, afterLast });
  const crewRows = await tx
    .select({ id: crews.id, name: crews.name, endedAt: crews.endedAt })
    .from(crews)
    .where(eq(crews.companyId, currentCompany))
    .orderBy(asc(crews.sortOrder), asc(crews.name));
  const sumOf = (crewId: string | null, week: SiteDay | null) => sums.get(keyOf(crewId, week)) ?? noYards;
  return {
    zone,
    weeks: mondays.map((startsOn) => ({
      startsOn,
      when: startsOn < thisMonday ? 'past' : startsOn === thisMonday ? 'current' : 'next',
      placed: sumOf(null, startsOn),
      waitingYd3: waiting.get(startsOn)?.yd3 ?? '0',
      waitingCount: waiting.get(startsOn)?.count ?? 0,
    })),
    byCrew: crewRows
      .map((crew) => ({
        crewId: crew.id,
        crewName: crew.name,
        ended: crew.endedAt !== null,
        total: sumOf(crew.id, null),
        weeks: mondays.map((week) => sumOf(crew.id, week)),
      }))
      .filter((crew) => !crew.ended || crew.total.visitCount > 0),
    total: sumOf(null, null),
  };
}

interface Weeks {
  first: SiteDay;
  afterLast: SiteDay;
}

type SumRow = {
  crew_id: string | null;
  week: SiteDay | null;
  ordered_yd3: string;
  pencilled_yd3: string;
  firm_yd3: string;
  done_yd3: string;
  visit_count: number;
};

/** Sums by crew and week, by week, by crew and in all; a null in the key stands for all of them. */
async function readPlaced(tx: Tx, { zone, first, afterLast }: Weeks & { zone: string }) {
  const fromInstant = new Date(instantAt(first, 0, zone)).toISOString();
  const untilInstant = new Date(instantAt(afterLast, 0, zone)).toISOString();
  const { rows } = await tx.execute<SumRow>(sql`
    with placed as (
      select crew_id, state, part_yd3,
        to_char(date_trunc('week', starts_at at time zone ${zone}::text), 'YYYY-MM-DD') as week
      from ${visits}
      where company_id = ${currentCompany} and kind = 'pour' and state in ('pencilled', 'firm', 'done')
        and starts_at >= ${fromInstant}::timestamptz and starts_at < ${untilInstant}::timestamptz
    )
    select crew_id, week, ${yardsWhere(sql`true`)} as ordered_yd3,
      ${yardsWhere(sql`state = 'pencilled'`)} as pencilled_yd3, ${yardsWhere(sql`state = 'firm'`)} as firm_yd3,
      ${yardsWhere(sql`state = 'done'`)} as done_yd3, count(*)::int as visit_count
    from placed group by grouping sets ((crew_id, week), (week), (crew_id), ())`);
  return new Map(rows.map((row) => [keyOf(row.crew_id, row.week), yardSum(row)]));
}

function yardsWhere(condition: SQL): SQL {
  return sql`trim_scale(coalesce(sum(part_yd3) filter (where ${condition}), 0))::text`;
}

function yardSum(row: SumRow): YardSum {
  return {
    orderedYd3: row.ordered_yd3,
    pencilledYd3: row.pencilled_yd3,
    firmYd3: row.firm_yd3,
    doneYd3: row.done_yd3,
    visitCount: row.visit_count,
  };
}

const noYards: YardSum = {
  orderedYd3: '0',
  pencilledYd3: '0',
  firmYd3: '0',
  doneYd3: '0',
  visitCount: 0,
};

async function readWaiting(tx: Tx, { first, afterLast }: Weeks) {
  const week = sql<string>`to_char(date_trunc('week', ${visits.wantedOn}::timestamp), 'YYYY-MM-DD')`;
  const rows = await tx
    .select({
      week,
      yd3: sql<string>`trim_scale(sum(${visits.partYd3}))::text`,
      count: sql<number>`count(*)::int`,
    })
    .from(visits)
    .where(
      and(
        eq(visits.companyId, currentCompany),
        eq(visits.kind, 'pour'),
        eq(visits.state, 'waiting'),
        isNotNull(visits.wantedOn),
        gte(visits.wantedOn, first),
        lt(visits.wantedOn, afterLast),
      ),
    )
    .groupBy(week);
  return new Map(rows.map((row) => [row.week, row]));
}

const keyOf = (crewId: string | null, week: SiteDay | null): string => `${crewId ?? ''}|${week ?? ''}`;
