import type { Snapshot, Visit } from '@strikeboard/domain/snapshot';
import { addDays, daysBetween, type SiteDay } from '@strikeboard/domain/zone';
import { office } from '../../lib/words/office.en.ts';
import type { CardProps } from './VisitCard.tsx';
import { VisitCard } from './VisitCard.tsx';

const words = office.board;

/** Where each waiting visit hangs: under its day, or at the left end. */
export interface Waiting {
  undated: Visit[];
  byDay: Map<SiteDay, Visit[]>;
  /** Wanted on days before or after those shown. */
  later: number;
}

/**
 * Sorts the waiting visits under the days shown. What is overdue stays under today; where today is not shown, it
 * stands at the left end, so that it is never out of sight.
 */
export function hangWaiting(
  snapshot: Pick<Snapshot, 'visits' | 'pours'>,
  from: SiteDay,
  days: number,
  today: SiteDay,
): Waiting {
  const willCall = new Set(snapshot.pours.filter((pour) => pour.willCall).map((pour) => pour.id));
  const until = addDays(from, days - 1);
  const result: Waiting = { undated: [], byDay: new Map(), later: 0 };
  const sorted = snapshot.visits
    .filter((visit) => visit.state === 'waiting')
    .sort((a, b) => (a.wantedOn ?? '').localeCompare(b.wantedOn ?? '') || a.title.localeCompare(b.title));
  for (const visit of sorted) {
    const { wantedOn } = visit;
    if (wantedOn === null || (visit.pourId !== null && willCall.has(visit.pourId))) {
      result.undated.push(visit);
      continue;
    }
    const day = wantedOn < today ? today : wantedOn;
    if (day >= from && day <= until) result.byDay.set(day, [...(result.byDay.get(day) ?? []), visit]);
    else if (wantedOn < today) result.undated.push(visit);
    else result.later += 1;
  }
  return result;
}

export function WaitingStrip({
  waiting,
  from,
  days,
  dayWidthPx,
  headWidthPx,
  today,
  held,
  cardOf,
  mayMove,
  onOpen,
}: {
  waiting: Waiting;
  from: SiteDay;
  days: number;
  dayWidthPx: number;
  headWidthPx: number;
  today: SiteDay;
  /** A card is held over the strip. */
  held: boolean;
  cardOf: (visit: Visit) => CardProps | null;
  mayMove: boolean;
  onOpen: (visitId: string) => void;
}) {
  const list = (visits: Visit[]) => (
    <ul className="flex flex-col gap-1">
      {visits.map((visit) => (
        <li key={visit.id} className="h-13 w-full">
          <VisitCard
            card={cardOf(visit)}
            overdue={visit.wantedOn !== null && visit.wantedOn < today}
            mayMove={mayMove}
            onOpen={onOpen}
          />
        </li>
      ))}
    </ul>
  );
  const columns = Array.from({ length: days }, (_, column) => addDays(from, column));
  const count =
    waiting.undated.length + [...waiting.byDay.values()].reduce((sum, visits) => sum + visits.length, 0);
  return (
    <section
      aria-label={words.waitingLabel}
      data-waiting-strip
      className={`sticky bottom-0 z-20 flex max-h-[38dvh] overflow-y-auto border-t-2 border-lumber-line ${
        held ? 'bg-lumber-wash' : 'bg-concrete'
      }`}
      style={{ width: headWidthPx + days * dayWidthPx }}
    >
      <div
        className="sticky left-0 z-10 shrink-0 self-stretch border-r border-line-strong bg-lumber-wash p-1.5"
        style={{ width: headWidthPx }}
      >
        <h2 className="mb-1 flex flex-wrap items-baseline gap-x-2 text-sm">
          {words.waiting} <span className="font-normal">{count}</span>
          {waiting.later > 0 && (
            <span className="text-xs font-normal text-ink-soft">{words.onOtherDays(waiting.later)}</span>
          )}
        </h2>
        {waiting.undated.length > 0 && (
          <>
            <h3 className="text-xs font-medium text-ink-soft">{words.noDate}</h3>
            {list(waiting.undated)}
          </>
        )}
      </div>
      {columns.map((day) => (
        <div
          key={day}
          className={`shrink-0 border-r border-line p-1 ${daysBetween(today, day) === 0 ? 'bg-lumber-wash/50' : ''}`}
          style={{ width: dayWidthPx }}
        >
          {list(waiting.byDay.get(day) ?? [])}
        </div>
      ))}
    </section>
  );
}
