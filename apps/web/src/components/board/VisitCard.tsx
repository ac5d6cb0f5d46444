import { useDraggable } from '@dnd-kit/core';
import type { Chain } from '@strikeboard/domain/chain';
import type { Finding, Severity } from '@strikeboard/domain/finding';
import type { Pour, Site, Visit } from '@strikeboard/domain/snapshot';
import { formatClock } from '@strikeboard/domain/zone';
import { memo } from 'react';
import { office } from '../../lib/words/office.en.ts';
import { SeverityMark } from '../ui/SeverityMark.tsx';
import { ChainStrip } from './ChainStrip.tsx';

const words = office.card;
const { countOf, finishes, kinds, methods, states, yards, untold } = office.terms;

export interface CardProps {
  visit: Visit;
  site: Site;
  pour: Pour | null;
  chain: Chain | null;
  findings: readonly Finding[];
  answers: { yes: number; asked: number };
  /** Width on the board, pixels; null in the waiting strip, where cards share one width. */
  widthPx: number | null;
  xOfMs?: (ms: number) => number;
  overdue?: boolean;
  selected?: boolean;
}

function worstCounts(findings: readonly Finding[]): { severity: Severity; count: number } | null {
  for (const severity of ['stop', 'caution', 'note'] as const) {
    const count = findings.filter((finding) => finding.severity === severity).length;
    if (count > 0) return { severity, count };
  }
  return null;
}

/** What a card says, without its shell: memoised, since the shell is drawn again at every pointer move. */
export const CardFace = memo(function CardFace({
  visit,
  site,
  pour,
  chain,
  findings,
  answers,
  widthPx,
  xOfMs,
  overdue = false,
  selected = false,
}: CardProps) {
  const worst = worstCounts(findings);
  const waiting = visit.state === 'waiting';
  const tone = waiting
    ? 'bg-lumber-wash border-lumber-line'
    : visit.state === 'pencilled'
      ? 'bg-sheet border-line-strong border-dashed'
      : visit.state === 'done'
        ? 'bg-concrete border-line-strong'
        : 'bg-sheet border-settled';
  const start = visit.during && formatClock(visit.during.startMs, site.zone, 'en');
  const narrow = widthPx !== null && widthPx < 112;
  return (
    <div
      className={`relative h-full overflow-hidden rounded-card border-2 text-left text-[0.75rem] leading-[1.15] ${tone} ${
        selected ? 'ring-2 ring-focus' : ''
      } ${worst?.severity === 'stop' ? 'border-stop!' : ''}`}
    >
      {pour && <div className={`absolute inset-0 finish-${pour.finish} opacity-50`} aria-hidden="true" />}
      <div className="relative flex h-full flex-col gap-px px-1 pb-0.5">
        {chain && xOfMs && widthPx !== null && (
          <div className="-mx-1">
            <ChainStrip chain={chain} xOfMs={xOfMs} widthPx={widthPx} />
          </div>
        )}
        <div className="flex items-baseline gap-1 font-semibold whitespace-nowrap">
          {start && <span className="shrink-0">{words.startsAt(start)}</span>}
          <span className="truncate">{pour ? site.name : kinds[visit.kind]}</span>
        </div>
        {pour ? (
          <div className="truncate">
            {yards(visit.partYd3 ?? pour.orderedYd3)} {finishes[pour.finish]}
            {!narrow && <span className="text-ink-soft"> · {methods[pour.placingMethod]}</span>}
          </div>
        ) : (
          <div className="truncate">{site.name}</div>
        )}
        <div className="mt-auto flex items-center gap-1.5 whitespace-nowrap">
          {worst && (
            <SeverityMark
              severity={worst.severity}
              word={countOf(worst.severity, worst.count)}
              hideWord={narrow}
            />
          )}
          {overdue && <span className="font-medium text-stop">{words.overdue}</span>}
          {pour?.willCall && <span className="font-medium">{words.willCall}</span>}
          {visit.state === 'pencilled' && <span className="text-ink-soft">{states.pencilled}</span>}
          {!waiting && answers.asked > 0 && !narrow && (
            <span className={answers.yes === answers.asked ? 'text-fits' : 'text-ink-soft'}>
              {words.yesOf(answers.yes, answers.asked)}
            </span>
          )}
          {visit.untold && visit.state === 'firm' && (
            <span className="size-2 shrink-0 rounded-full border-2 border-caution" title={untold}>
              <span className="sr-only">{untold}</span>
            </span>
          )}
        </div>
      </div>
    </div>
  );
});

/** Everything a card says, in one sentence for those who hear it. */
export function cardLabel({ visit, site, pour, findings, answers }: CardProps): string {
  const parts = [
    pour ? `${pour.name}, ${site.name}` : `${kinds[visit.kind]}, ${site.name}`,
    states[visit.state],
    visit.during
      ? words.fromTo(
          formatClock(visit.during.startMs, site.zone, 'en'),
          formatClock(visit.during.endMs, site.zone, 'en'),
        )
      : null,
    pour ? `${yards(visit.partYd3 ?? pour.orderedYd3)}, ${finishes[pour.finish]}` : null,
    ...(['stop', 'caution'] as const).map((severity) => {
      const count = findings.filter((finding) => finding.severity === severity).length;
      return count > 0 ? countOf(severity, count) : null;
    }),
    answers.asked > 0 ? words.saidYesOf(answers.yes, answers.asked) : null,
  ];
  return parts.filter((part) => part !== null).join(', ');
}

/** A card that can be picked up by pointer, touch or keyboard, and opened. Draws nothing for a card that is not known yet. */
export function VisitCard({
  card,
  overdue = false,
  onOpen,
  mayMove,
}: {
  card: CardProps | null;
  overdue?: boolean;
  onOpen: (visitId: string) => void;
  mayMove: boolean;
}) {
  const stays = !mayMove || !card || card.visit.state === 'done';
  const { attributes, listeners, setNodeRef, isDragging } = useDraggable({
    id: card?.visit.id ?? 'unknown',
    disabled: stays,
  });
  if (!card) return null;
  return (
    <button
      type="button"
      ref={setNodeRef}
      // A card that stays where it is can still be opened, so it is no disabled button.
      {...(stays ? {} : attributes)}
      {...(stays ? {} : listeners)}
      onClick={() => onOpen(card.visit.id)}
      aria-label={cardLabel(card)}
      data-visit={card.visit.id}
      className={`block h-full w-full touch-manipulation select-none ${isDragging ? 'opacity-35' : ''}`}
    >
      <CardFace {...card} overdue={overdue} />
    </button>
  );
}
