import {
  DndContext,
  type DragEndEvent,
  type DragMoveEvent,
  DragOverlay,
  KeyboardSensor,
  MouseSensor,
  TouchSensor,
  useSensor,
  useSensors,
} from '@dnd-kit/core';
import { indexSnapshot } from '@strikeboard/domain/board-index';
import { check } from '@strikeboard/domain/check';
import type { Finding } from '@strikeboard/domain/finding';
import { chainOfPlaced } from '@strikeboard/domain/plan';
import type { Visit } from '@strikeboard/domain/snapshot';
import { addDays, formatDay, mondayOf, type SiteDay, siteDayOf } from '@strikeboard/domain/zone';
import { QueryClientProvider } from '@tanstack/react-query';
import { useCallback, useEffect, useMemo, useRef, useState } from 'react';
import { queryClient } from '../../lib/client/query-client.ts';
import { office } from '../../lib/words/office.en.ts';
import { Button } from '../ui/Button.tsx';
import { showToast, Toasts } from '../ui/Toasts.tsx';
import { answersOf } from './board-data.ts';
import { DayHeads } from './DayHeads.tsx';
import { DropDialog } from './DropDialog.tsx';
import { findingWords, namesOf } from './finding-words.ts';
import { type BoardGeometry, coordinatesFor, type Spot, slotUnder } from './keyboard.ts';
import { Lane, layLane, ROW_HEIGHT_PX } from './Lane.tsx';
import { NewPour } from './NewPour.tsx';
import { Panel } from './Panel.tsx';
import { instantOfSlot, type Scale, xOf, xOfSlot } from './scale.ts';
import { useBoard } from './use-board.ts';
import { usePreview, useShades } from './use-held.ts';
import { useMoves, whenText } from './use-moves.ts';
import { CardFace, type CardProps } from './VisitCard.tsx';
import { hangWaiting, WaitingStrip } from './WaitingStrip.tsx';

export interface BoardProps {
  slug: string;
  zone: string;
  /** May move cards; others only look. */
  mayMove: boolean;
  /** First day shown and how many. */
  from: SiteDay;
  days: number;
  dayFromMin: number;
  dayUntilMin: number;
}

const words = office.board;
const { severities } = office.terms;
const dayChoices = [1, 3, 7, 14] as const;
const MINUTE_MS = 60_000;
const PHONE_PX = 640;
const noFindings: readonly Finding[] = [];

/** The dispatcher's board. */
export function Board(props: BoardProps) {
  return (
    <QueryClientProvider client={queryClient()}>
      <BoardScreen {...props} />
    </QueryClientProvider>
  );
}

function useNow(): number {
  const [nowMs, setNowMs] = useState(() => Date.now());
  useEffect(() => {
    const timer = setInterval(() => setNowMs(Date.now()), MINUTE_MS);
    return () => clearInterval(timer);
  }, []);
  return nowMs;
}

function useWidth() {
  const ref = useRef<HTMLDivElement>(null);
  const [widthPx, setWidthPx] = useState(0);
  useEffect(() => {
    if (!ref.current) return;
    const observer = new ResizeObserver(([entry]) => setWidthPx(entry?.contentRect.width ?? 0));
    observer.observe(ref.current);
    return () => observer.disconnect();
  }, []);
  return { ref, widthPx };
}

function BoardScreen({ slug, zone, mayMove, dayFromMin, dayUntilMin, ...start }: BoardProps) {
  // A phone shows one day unless the address asks for more.
  const [phone] = useState(
    () => window.innerWidth < PHONE_PX && !new URLSearchParams(window.location.search).has('days'),
  );
  const [from, setFrom] = useState(() => (phone ? siteDayOf(Date.now(), zone) : start.from));
  const [days, setDays] = useState(phone ? 1 : start.days);
  const [heldId, setHeldId] = useState<string | null>(null);
  const [spot, setSpot] = useState<Spot>(null);
  const [openId, setOpenId] = useState<string | null>(null);
  const [creating, setCreating] = useState(false);
  const [said, setSaid] = useState('');
  const nowMs = useNow();
  const { ref: scroller, widthPx } = useWidth();
  const lanes = useRef<HTMLDivElement>(null);
  const today = siteDayOf(nowMs, zone);

  const { snapshot, error, loading, stream, apply, show, reload } = useBoard(slug, from, days);
  const index = useMemo(() => (snapshot ? indexSnapshot(snapshot) : null), [snapshot]);
  const findings = useMemo(
    () => (index ? check(index, nowMs) : new Map<string, Finding[]>()),
    [index, nowMs],
  );
  const moves = useMoves({ slug, snapshot, index, apply, show, reload, say: setSaid });
  const names = useMemo(() => namesOf(snapshot), [snapshot]);

  useEffect(() => {
    const url = new URL(window.location.href);
    url.searchParams.set('from', from);
    url.searchParams.set('days', String(days));
    window.history.replaceState(null, '', url);
  }, [from, days]);

  const headWidthPx = widthPx > 0 && widthPx < PHONE_PX ? 96 : 168;
  const scale: Scale = useMemo(
    () => ({
      from,
      days,
      dayWidthPx: Math.max(Math.floor((widthPx - headWidthPx - 2) / days), days === 1 ? 520 : 176),
      dayFromMin,
      dayUntilMin,
      stepMin: days === 1 ? 15 : 30,
    }),
    [from, days, widthPx, headWidthPx, dayFromMin, dayUntilMin],
  );
  const boardWidthPx = scale.days * scale.dayWidthPx;
  const crews = useMemo(
    () =>
      [...(snapshot?.crews ?? [])].sort((a, b) => a.sortOrder - b.sortOrder || a.name.localeCompare(b.name)),
    [snapshot],
  );

  const shades = useShades(index, heldId, scale);
  const preview = usePreview(index, heldId, spot);

  const siteOf = useCallback((visit: Visit) => index?.sites.get(visit.siteId), [index]);
  const cardOf = useCallback(
    (visit: Visit, cardWidthPx: number | null = null): CardProps | null => {
      const site = siteOf(visit);
      if (!index || !snapshot || !site) return null;
      return {
        visit,
        site,
        pour: (visit.pourId !== null && index.pours.get(visit.pourId)) || null,
        chain: chainOfPlaced(index, visit),
        findings: findings.get(visit.id) ?? noFindings,
        answers: answersOf(snapshot, visit.id),
        widthPx: cardWidthPx,
        xOfMs: (ms) => xOf(ms, site.zone, scale),
        selected: visit.id === openId,
      };
    },
    [index, snapshot, findings, scale, openId, siteOf],
  );

  const laid = useMemo(
    () =>
      crews.map((crew) => {
        const cards = (snapshot?.visits ?? []).flatMap((visit) => {
          const site = siteOf(visit);
          if (visit.crewId !== crew.id || !visit.during || !site || visit.state === 'called-off') return [];
          const leftPx = xOf(visit.during.startMs, site.zone, scale);
          const rightPx = xOf(visit.during.endMs, site.zone, scale);
          return rightPx <= 0 || leftPx >= boardWidthPx ? [] : [{ visit, leftPx, rightPx }];
        });
        const members = (snapshot?.memberships ?? []).filter(
          (row) => row.crewId === crew.id && row.during.startMs <= nowMs && nowMs < row.during.endMs,
        );
        const foreman = crew.foremanId === null ? null : index?.people.get(crew.foremanId)?.name;
        return {
          crew,
          ...layLane(cards),
          people: [words.people(members.length), foreman].filter((part) => part != null).join(' · '),
        };
      }),
    [crews, snapshot, index, siteOf, scale, boardWidthPx, nowMs],
  );
  const waiting = useMemo(
    () => (snapshot ? hangWaiting(snapshot, from, days, today) : null),
    [snapshot, from, days, today],
  );

  // What the drag needs to know as it goes, without making the sensors anew at each step.
  const geometry = useRef<BoardGeometry | null>(null);
  const heldHeightPx = ROW_HEIGHT_PX;
  geometry.current = {
    scale,
    crewIds: crews.map((crew) => crew.id),
    spot,
    firstSlot: {
      day: firstDayFor(heldId, snapshot?.visits, from, days, today),
      minute: Math.max(dayFromMin, 360),
    },
    get leftPx() {
      return (lanes.current?.getBoundingClientRect().left ?? 0) + headWidthPx;
    },
    laneMiddlePx: (crewId) => middleOf(lanes.current?.querySelector(`[data-lane="${crewId}"]`)),
    get waitingMiddlePx() {
      return middleOf(lanes.current?.querySelector('[data-waiting-strip]'));
    },
    heightPx: heldHeightPx,
  };
  const keyboardCoordinates = useMemo(() => coordinatesFor(() => geometry.current), []);
  const sensors = useSensors(
    useSensor(MouseSensor, { activationConstraint: { distance: 5 } }),
    useSensor(TouchSensor, { activationConstraint: { delay: 250, tolerance: 8 } }),
    useSensor(KeyboardSensor, {
      coordinateGetter: keyboardCoordinates,
      keyboardCodes: { start: ['Space'], cancel: ['Escape'], end: ['Space', 'Enter'] },
      scrollBehavior: 'auto',
    }),
  );

  const spotUnder = (event: DragMoveEvent | DragEndEvent): Spot => {
    const rect = event.active.rect.current.translated;
    const root = lanes.current;
    if (!rect || !root) return null;
    const middle = rect.top + Math.min(rect.height, heldHeightPx) / 2;
    const strip = root.querySelector('[data-waiting-strip]')?.getBoundingClientRect();
    if (strip && middle >= strip.top) return null;
    for (const lane of root.querySelectorAll<HTMLElement>('[data-lane]')) {
      const { top, bottom, left } = lane.getBoundingClientRect();
      const crewId = lane.dataset.lane;
      if (crewId !== undefined && middle >= top && middle < bottom)
        return { crewId, slot: slotUnder(rect.left, left, scale) };
    }
    return null;
  };

  const onDragStart = (visitId: string) => {
    const visit = snapshot?.visits.find((row) => row.id === visitId);
    const site = visit && siteOf(visit);
    setHeldId(visitId);
    setSpot(
      visit?.crewId && visit.during && site
        ? { crewId: visit.crewId, slot: slotUnder(xOf(visit.during.startMs, site.zone, scale), 0, scale) }
        : null,
    );
    setSaid(words.pickedUp(moves.titleOf(visitId)));
  };
  const onDragMove = (event: DragMoveEvent) => {
    const next = spotUnder(event);
    setSpot((last) => (sameSpot(last, next) ? last : next));
  };
  const onDragEnd = (event: DragEndEvent) => {
    const visitId = String(event.active.id);
    const next = spotUnder(event);
    setHeldId(null);
    setSpot(null);
    const visit = index?.visits.get(visitId);
    if (!visit) return;
    if (next === null) {
      if (visit.state !== 'waiting') void moves.putBack(visitId);
      else setSaid(words.cancelled(moves.titleOf(visitId)));
      return;
    }
    const crewStartMs = instantOfSlot(next.slot, siteOf(visit)?.zone ?? zone);
    if (visit.crewId === next.crewId && visit.during?.startMs === crewStartMs) {
      setSaid(words.cancelled(moves.titleOf(visitId)));
      return;
    }
    void moves.place({ visitId, crewId: next.crewId, crewStartMs });
  };

  const held = heldId === null ? undefined : snapshot?.visits.find((visit) => visit.id === heldId);
  const heldState = held?.state;

  // Spoken as the card goes over a lane and a slot.
  useEffect(() => {
    if (heldId === null) return;
    if (preview === null) {
      if (heldState !== 'waiting') setSaid(words.overWaiting);
      return;
    }
    const crew = index?.crews.get(preview.crewId)?.name ?? '';
    const verdict =
      preview.verdict === 0 ? words.fits : severities[preview.verdict === 2 ? 'stop' : 'caution'];
    const first = preview.findings.find((finding) => finding.severity !== 'note');
    setSaid(
      words.over(
        crew,
        whenText(preview.crewStartMs, preview.zone),
        first ? `${verdict}: ${findingWords(first, names, preview.zone).what}` : verdict,
      ),
    );
  }, [heldId, heldState, preview, index, names]);

  const heldWidthPx = preview
    ? xOf(preview.change.visit.during.endMs, preview.zone, scale) -
      xOf(preview.change.visit.during.startMs, preview.zone, scale)
    : null;

  if (error && !snapshot) {
    return (
      <div role="alert" className="m-6 flex flex-col items-start gap-3">
        <p>
          {words.failed} {error.message}
        </p>
        <Button onClick={() => void reload()}>{words.retry}</Button>
      </div>
    );
  }

  return (
    <div className="flex min-h-0 grow flex-col">
      <div className="no-print flex flex-wrap items-center gap-2 border-b border-line bg-paper px-2 py-1.5">
        <Button onClick={() => setFrom(addDays(from, -days))} aria-label={words.earlier}>
          <span aria-hidden="true">‹</span>
        </Button>
        <Button onClick={() => setFrom(days === 7 || days === 14 ? mondayOf(today) : today)}>
          {words.today}
        </Button>
        <Button onClick={() => setFrom(addDays(from, days))} aria-label={words.later}>
          <span aria-hidden="true">›</span>
        </Button>
        <h1 className="min-w-0 text-lg whitespace-nowrap">
          {formatDay(from, 'en')}
          {days > 1 && ` ${words.until(formatDay(addDays(from, days - 1), 'en'))}`}
        </h1>
        <label className="flex items-center gap-1.5 text-sm">
          <span className="sr-only">{words.daysShown}</span>
          <select
            className="input w-auto!"
            value={days}
            onChange={(event) => setDays(Number(event.target.value))}
          >
            {dayChoices.map((choice) => (
              <option key={choice} value={choice}>
                {words.dayCount(choice)}
              </option>
            ))}
          </select>
        </label>
        <p role="status" className="text-sm text-ink-soft">
          {stream === 'broken' ? (
            <span className="font-medium text-stop">{words.lost}</span>
          ) : stream === 'live' ? (
            words.live
          ) : (
            ''
          )}
          {loading && ` ${words.loading}`}
        </p>
        {mayMove && (
          <div className="ml-auto flex gap-2">
            <Button
              disabled={moves.lastRevision === null}
              onClick={() => moves.lastRevision !== null && void moves.undo(moves.lastRevision)}
            >
              {words.undo}
            </Button>
            <Button look="main" onClick={() => setCreating(true)}>
              {words.newPour}
            </Button>
          </div>
        )}
      </div>
      <p aria-live="assertive" className="sr-only" data-testid="spoken">
        {said}
      </p>
      <div className="flex min-h-0 grow">
        <div ref={scroller} className="min-h-0 min-w-0 grow overflow-auto">
          <DndContext
            sensors={sensors}
            onDragStart={(event) => onDragStart(String(event.active.id))}
            onDragMove={onDragMove}
            onDragEnd={onDragEnd}
            onDragCancel={() => {
              if (heldId !== null) setSaid(words.cancelled(moves.titleOf(heldId)));
              setHeldId(null);
              setSpot(null);
            }}
            // The board says itself what is going on; dnd-kit's own sentences would speak over it.
            accessibility={{
              announcements: {
                onDragStart: silent,
                onDragMove: silent,
                onDragOver: silent,
                onDragEnd: silent,
                onDragCancel: silent,
              },
              screenReaderInstructions: { draggable: words.handleHint },
            }}
          >
            <div
              ref={lanes}
              className="relative flex min-h-full flex-col"
              style={{ width: headWidthPx + boardWidthPx }}
            >
              <section aria-label={words.label} aria-busy={!snapshot} className="grow">
                <DayHeads scale={scale} headWidthPx={headWidthPx} today={today} />
                {!snapshot && <p className="sticky left-0 p-6">{words.loading}</p>}
                {laid.map(({ crew, cards, rows, people }) => (
                  <Lane
                    key={crew.id}
                    crew={crew}
                    people={people}
                    cards={cards}
                    rows={rows}
                    shades={shades.get(crew.id) ?? noShades}
                    target={
                      preview && preview.crewId === crew.id && spot
                        ? {
                            leftPx: xOfSlot(spot.slot, scale),
                            widthPx: heldWidthPx ?? 40,
                            verdict: preview.verdict,
                            label: `${whenText(preview.crewStartMs, preview.zone)} · ${
                              preview.verdict === 0
                                ? words.fits
                                : severities[preview.verdict === 2 ? 'stop' : 'caution']
                            }`,
                          }
                        : null
                    }
                    headWidthPx={headWidthPx}
                    boardWidthPx={boardWidthPx}
                    dayWidthPx={scale.dayWidthPx}
                    nowPx={nowWithin(xOf(nowMs, zone, scale), boardWidthPx)}
                    cardOf={cardOf}
                    mayMove={mayMove}
                    onOpen={setOpenId}
                  />
                ))}
                {snapshot && crews.length === 0 && (
                  <p className="p-6">
                    {words.noCrews.none} <a href={`/${slug}/import`}>{words.noCrews.bringIn}</a>{' '}
                    {words.noCrews.or} <a href={`/${slug}/set-up`}>{words.noCrews.setUp}</a>.
                  </p>
                )}
              </section>
              {waiting && (
                <WaitingStrip
                  waiting={waiting}
                  from={from}
                  days={days}
                  dayWidthPx={scale.dayWidthPx}
                  headWidthPx={headWidthPx}
                  today={today}
                  held={heldId !== null && spot === null}
                  cardOf={cardOf}
                  mayMove={mayMove}
                  onOpen={setOpenId}
                />
              )}
            </div>
            <DragOverlay dropAnimation={null}>
              {held && <HeldCard card={cardOf(held, heldWidthPx)} widthPx={heldWidthPx} />}
            </DragOverlay>
          </DndContext>
        </div>
        {openId !== null && snapshot && index && (
          <Panel
            key={openId}
            slug={slug}
            visitId={openId}
            snapshot={snapshot}
            index={index}
            findings={findings.get(openId) ?? noFindings}
            names={names}
            mayMove={mayMove}
            moves={moves}
            onReload={reload}
            onClose={() => setOpenId(null)}
            onOpen={setOpenId}
          />
        )}
      </div>
      <DropDialog
        refusal={moves.refusal}
        names={names}
        onClose={() => {
          if (moves.refusal) setSaid(words.cancelled(moves.refusal.title));
          moves.closeRefusal();
        }}
        onPlace={(visitId, crewId, crewStartMs) => void moves.place({ visitId, crewId, crewStartMs })}
      />
      {snapshot && (
        <NewPour
          open={creating}
          slug={slug}
          snapshot={snapshot}
          onClose={() => setCreating(false)}
          onMade={(change) => {
            apply(change.patch);
            setCreating(false);
            showToast(words.made);
          }}
        />
      )}
      <Toasts />
    </div>
  );
}

function HeldCard({ card, widthPx }: { card: CardProps | null; widthPx: number | null }) {
  if (!card) return null;
  return (
    <div
      className="rotate-1 opacity-90 shadow-lift"
      style={{ width: widthPx ?? 150, height: ROW_HEIGHT_PX - 4 }}
    >
      <CardFace {...card} />
    </div>
  );
}

const noShades: readonly never[] = [];
const silent = () => undefined;

function middleOf(element: Element | null | undefined): number {
  const rect = element?.getBoundingClientRect();
  return rect ? rect.top + rect.height / 2 : 0;
}

function nowWithin(px: number, boardWidthPx: number): number | null {
  return px >= 0 && px < boardWidthPx ? px : null;
}

function sameSpot(a: Spot, b: Spot): boolean {
  if (a === null || b === null) return a === b;
  return a.crewId === b.crewId && a.slot.day === b.slot.day && a.slot.minute === b.slot.minute;
}

/** The day a card goes to first from the strip: the one it is wanted for where that is shown, else today or the first. */
function firstDayFor(
  heldId: string | null,
  visits: readonly Visit[] | undefined,
  from: SiteDay,
  days: number,
  today: SiteDay,
): SiteDay {
  const wantedOn = visits?.find((visit) => visit.id === heldId)?.wantedOn;
  const shown = (day: SiteDay) => day >= from && day <= addDays(from, days - 1);
  if (wantedOn != null && wantedOn >= today && shown(wantedOn)) return wantedOn;
  return shown(today) ? today : from;
}
