import type { BoardIndex } from '@strikeboard/domain/board-index';
import { compareFindings, type Finding } from '@strikeboard/domain/finding';
import { chainOfPlaced } from '@strikeboard/domain/plan';
import type { Snapshot } from '@strikeboard/domain/snapshot';
import { formatClock, formatDay, siteDayOf } from '@strikeboard/domain/zone';
import { useQuery } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { callOffVisit, makeVisitFirm, readVisit, sendNow } from '../../lib/api/schemas/board.ts';
import { ApiProblem, call } from '../../lib/client/api.ts';
import { office } from '../../lib/words/office.en.ts';
import { Badge } from '../ui/Badge.tsx';
import { Button } from '../ui/Button.tsx';
import { showToast } from '../ui/Toasts.tsx';
import { FindingList } from './FindingList.tsx';
import type { FindingNames } from './finding-words.ts';
import { PourForm } from './PourForm.tsx';
import type { useMoves } from './use-moves.ts';

const words = office.panel;
const { answers, finishes, kinds, methods, orderStates, states, untold, yards } = office.terms;
const tabs = ['plan', 'edit', 'people', 'history'] as const;

/** A visit opened beside the board. */
export function Panel({
  slug,
  visitId,
  snapshot,
  index,
  findings,
  names,
  mayMove,
  moves,
  onReload,
  onClose,
  onOpen,
}: {
  slug: string;
  visitId: string;
  snapshot: Snapshot;
  index: BoardIndex;
  findings: readonly Finding[];
  names: FindingNames;
  mayMove: boolean;
  moves: ReturnType<typeof useMoves>;
  onReload: () => Promise<void>;
  onClose: () => void;
  onOpen: (visitId: string) => void;
}) {
  const [tab, setTab] = useState<(typeof tabs)[number]>('plan');
  const heading = useRef<HTMLHeadingElement>(null);
  const visit = index.visits.get(visitId);
  const site = visit && index.sites.get(visit.siteId);
  const pour = visit?.pourId ? index.pours.get(visit.pourId) : undefined;

  useEffect(() => {
    const opener = document.activeElement;
    heading.current?.focus();
    return () => {
      if (opener instanceof HTMLElement && opener.isConnected) opener.focus();
    };
  }, []);

  if (!visit || !site) return null;
  const chain = chainOfPlaced(index, visit);
  const clock = (ms: number) => formatClock(ms, site.zone, 'en');
  const order = snapshot.mixOrders.find(
    (row) => row.visitId === visitId && row.state !== 'called-off' && row.state !== 'refused',
  );
  const booking = snapshot.bookings.find(
    (row) => row.visitId === visitId && row.state !== 'called-off' && row.state !== 'refused',
  );
  const followUps = snapshot.visits.filter(
    (row) => row.causedByVisitId === visitId && row.state !== 'called-off',
  );
  const mix = pour?.mixId ? index.mixes.get(pour.mixId) : undefined;

  const act = async (
    what: Promise<{ revision: number; patch: Parameters<typeof moves.done>[1]['patch'] }>,
    text: string,
  ) => {
    try {
      moves.done(text, await what);
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      showToast(error.problem.detail, { tone: 'stop' });
      await onReload();
    }
  };

  return (
    <aside
      aria-labelledby="panel-title"
      className="fixed inset-0 z-30 flex flex-col border-l border-line-strong bg-sheet md:static md:z-auto md:w-[25rem] md:shrink-0"
      onKeyDown={(event) => {
        if (event.key === 'Escape') onClose();
      }}
    >
      <header className="flex items-start gap-2 border-b border-line px-4 py-3">
        <div className="min-w-0 grow">
          <h2 id="panel-title" ref={heading} tabIndex={-1} className="text-lg outline-none">
            {pour?.name ?? `${kinds[visit.kind]}: ${visit.title}`}
          </h2>
          <p className="text-sm text-ink-soft">
            {site.name} · {site.address}
          </p>
          <div className="mt-1.5 flex flex-wrap gap-1.5">
            <Badge
              tone={visit.state === 'waiting' ? 'waiting' : visit.state === 'firm' ? 'settled' : 'plain'}
            >
              {states[visit.state]}
            </Badge>
            {visit.untold && visit.state !== 'pencilled' && <Badge tone="caution">{untold}</Badge>}
            {pour && (
              <Badge>
                {yards(visit.partYd3 ?? pour.orderedYd3)} · {finishes[pour.finish]} ·{' '}
                {methods[pour.placingMethod]}
              </Badge>
            )}
          </div>
        </div>
        <Button look="quiet" aria-label={words.close} onClick={onClose}>
          <svg
            aria-hidden="true"
            width="16"
            height="16"
            viewBox="0 0 16 16"
            stroke="currentColor"
            strokeWidth="2"
          >
            <path d="M3 3l10 10M13 3L3 13" />
          </svg>
        </Button>
      </header>
      <div role="tablist" aria-label={words.parts} className="flex border-b border-line px-2">
        {tabs
          .filter((name) => name !== 'edit' || (pour && mayMove))
          .map((name) => (
            <button
              key={name}
              type="button"
              role="tab"
              id={`tab-${name}`}
              aria-selected={tab === name}
              aria-controls="panel-body"
              className={`min-h-tap px-3 ${tab === name ? 'border-b-2 border-settled font-semibold' : 'text-ink-soft'}`}
              onClick={() => setTab(name)}
            >
              {words.tabs[name]}
            </button>
          ))}
      </div>
      <div
        id="panel-body"
        role="tabpanel"
        aria-labelledby={`tab-${tab}`}
        className="min-h-0 grow overflow-y-auto px-4 py-3"
      >
        {tab === 'plan' && (
          <div className="flex flex-col gap-4">
            {visit.during && (
              <dl className="grid grid-cols-[auto_1fr] gap-x-4 gap-y-1">
                <Time
                  label={words.day}
                  value={`${formatDay(siteDayOf(visit.during.startMs, site.zone), 'en')} · ${names('crew', visit.crewId ?? '')}`}
                />
                <Time label={words.crewThere} value={clock(visit.during.startMs)} />
                {chain && (
                  <>
                    <Time label={words.firstTruck} value={clock(chain.firstLoadMs)} />
                    <Time label={words.lastLoadOut} value={clock(chain.lastLoadMs)} />
                    <Time
                      label={words.window}
                      value={words.fromTo(clock(chain.window.opensMs), clock(chain.window.closesMs))}
                    />
                    <Time label={words.finishingEnds} value={clock(chain.finishing.endMs)} />
                    {chain.sawWindow && (
                      <Time
                        label={words.sawBetween}
                        value={words.between(clock(chain.sawWindow.startMs), clock(chain.sawWindow.endMs))}
                      />
                    )}
                    <Time
                      label={words.trucks}
                      value={words.loads(
                        chain.loads.length,
                        Math.round(chain.spacingMin),
                        chain.trucksInRotation,
                      )}
                    />
                  </>
                )}
                <Time label={words.washedUp} value={clock(visit.during.endMs)} />
              </dl>
            )}
            {pour && (
              <dl className="grid grid-cols-[auto_1fr] gap-x-4 gap-y-1">
                <Time
                  label={words.mix}
                  value={mix ? `${mix.code} ${mix.name}, ${names('plant', mix.plantId)}` : words.notChosen}
                />
                {order && (
                  <Time
                    label={words.order}
                    value={`${yards(order.orderedYd3)}, ${orderStates[order.state]}`}
                  />
                )}
                {booking && (
                  <Time
                    label={words.pump}
                    value={`${names('equipment', booking.equipmentId)}, ${orderStates[booking.state]}`}
                  />
                )}
                <Time
                  label={words.area}
                  value={pour.areaFt2 > 0 ? words.areaFt2(pour.areaFt2) : words.unknown}
                />
                {pour.notes && <Time label={words.notes} value={pour.notes} />}
                {site.accessNotes && <Time label={words.access} value={site.accessNotes} />}
              </dl>
            )}
            {findings.length > 0 && (
              <section>
                <h3 className="mb-2 font-semibold">{words.checks}</h3>
                <FindingList findings={[...findings].sort(compareFindings)} names={names} zone={site.zone} />
                <p className="mt-2 text-xs text-ink-soft">{words.advice}</p>
              </section>
            )}
            {findings.length === 0 && visit.during && <p className="text-fits">{words.nothingAgainst}</p>}
            {followUps.length > 0 && (
              <section>
                <h3 className="mb-1 font-semibold">{words.followUps}</h3>
                <ul className="flex flex-col gap-1">
                  {followUps.map((row) => (
                    <li key={row.id}>
                      <button type="button" className="underline" onClick={() => onOpen(row.id)}>
                        {kinds[row.kind]}
                      </button>{' '}
                      <span className="text-sm text-ink-soft">
                        {states[row.state]}
                        {row.window &&
                          `, ${words.fromTo(clock(row.window.startMs), clock(row.window.endMs))}`}
                      </span>
                    </li>
                  ))}
                </ul>
              </section>
            )}
            {mayMove && (
              <div className="flex flex-wrap gap-2 border-t border-line pt-3">
                {visit.state === 'pencilled' && (
                  <Button
                    look="main"
                    onClick={() =>
                      void act(
                        call(makeVisitFirm, {
                          params: { slug, id: visitId },
                          body: { baseVersion: visit.version },
                        }),
                        words.firm,
                      )
                    }
                  >
                    {words.makeFirm}
                  </Button>
                )}
                {visit.untold && visit.state !== 'pencilled' && (
                  <Button
                    look="main"
                    onClick={() =>
                      void call(sendNow, { params: { slug, id: visitId } }).then(
                        ({ due }) => showToast(due ? words.onItsWay : words.nothingToTell),
                        (error: unknown) =>
                          showToast(error instanceof Error ? error.message : words.notSent, { tone: 'stop' }),
                      )
                    }
                  >
                    {words.sendNow}
                  </Button>
                )}
                {(visit.state === 'pencilled' || visit.state === 'firm') && (
                  <Button onClick={() => void moves.putBack(visitId)}>{words.backToWaiting}</Button>
                )}
                {visit.state !== 'called-off' && visit.state !== 'done' && (
                  <CallOff
                    onCallOff={(reason) =>
                      act(
                        call(callOffVisit, {
                          params: { slug, id: visitId },
                          body: { baseVersion: visit.version, reason },
                        }),
                        words.calledOff,
                      ).then(onClose)
                    }
                  />
                )}
              </div>
            )}
          </div>
        )}
        {tab === 'edit' && pour && (
          <PourForm
            slug={slug}
            pour={pour}
            visit={visit}
            snapshot={snapshot}
            names={names}
            zone={site.zone}
            onSaved={(change) => moves.done(office.pourForm.saved, change)}
          />
        )}
        {(tab === 'people' || tab === 'history') && (
          <VisitRecord
            slug={slug}
            visitId={visitId}
            revision={snapshot.revision}
            part={tab}
            zone={site.zone}
          />
        )}
      </div>
    </aside>
  );
}

function Time({ label, value }: { label: string; value: string }) {
  return (
    <>
      <dt className="text-sm text-ink-soft">{label}</dt>
      <dd className="font-medium">{value}</dd>
    </>
  );
}

function CallOff({ onCallOff }: { onCallOff: (reason: string) => Promise<void> }) {
  const [asking, setAsking] = useState(false);
  const [reason, setReason] = useState('');
  if (!asking)
    return (
      <Button look="danger" onClick={() => setAsking(true)}>
        {words.callOffAsk}
      </Button>
    );
  return (
    <form
      className="flex w-full gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        if (reason.trim() !== '') void onCallOff(reason.trim());
      }}
    >
      <input
        aria-label={words.callOffReason}
        placeholder={words.callOffWhy}
        required
        maxLength={500}
        className="input"
        value={reason}
        onChange={(event) => setReason(event.target.value)}
      />
      <Button type="submit" look="danger">
        {words.callOff}
      </Button>
    </form>
  );
}

/** Who is on it and what they answered; or what was sent and what has happened. Read when opened and after each change. */
function VisitRecord({
  slug,
  visitId,
  revision,
  part,
  zone,
}: {
  slug: string;
  visitId: string;
  revision: number;
  part: 'people' | 'history';
  zone: string;
}) {
  const { data, error } = useQuery({
    queryKey: ['visit', slug, visitId, revision],
    queryFn: ({ signal }) => call(readVisit, { params: { slug, id: visitId }, signal }),
  });
  if (error) return <p className="text-stop">{error.message}</p>;
  if (!data) return <p>{office.board.loading}</p>;
  if (part === 'people')
    return (
      <ul className="flex flex-col divide-y divide-line">
        {data.people.length === 0 && <li>{words.nobody}</li>}
        {data.people.map((person) => (
          <li key={person.personId} className="flex items-center justify-between gap-2 py-2">
            <span>
              <span className="font-medium">{person.name}</span>{' '}
              <span className="text-sm text-ink-soft">{person.role}</span>
            </span>
            <Badge tone={person.answer === 'yes' ? 'fits' : person.answer === 'no' ? 'stop' : 'plain'}>
              {person.state === 'open'
                ? words.asked
                : person.answer === 'none' && !person.told
                  ? untold
                  : answers[person.answer]}
            </Badge>
          </li>
        ))}
      </ul>
    );
  const when = (ms: number) => `${formatDay(siteDayOf(ms, zone), 'en')}, ${formatClock(ms, zone, 'en')}`;
  return (
    <ol className="flex flex-col gap-2">
      {data.history.length === 0 && <li>{words.nothingYet}</li>}
      {data.history.map((entry) => (
        <li key={entry.id} className="border-l-2 border-line-strong pl-3">
          <p className="text-sm text-ink-soft">
            {when(entry.atMs)} · {entry.actorName ?? office.product}
          </p>
          <p>{entry.action.replaceAll('-', ' ')}</p>
          {entry.reason && <p className="text-sm">“{entry.reason}”</p>}
        </li>
      ))}
    </ol>
  );
}
