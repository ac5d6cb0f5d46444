import type { Crew, Visit } from '@strikeboard/domain/snapshot';
import { memo } from 'react';
import type { CardProps } from './VisitCard.tsx';
import { VisitCard } from './VisitCard.tsx';

export const ROW_HEIGHT_PX = 76;
const MIN_CARD_PX = 26;

/** A placed visit with its place on the lane. */
export interface LaidCard {
  visit: Visit;
  leftPx: number;
  widthPx: number;
  /** 0 for the top row; cards that share time stand below one another. */
  row: number;
}

/** Lays the cards of one lane in as few rows as keep them from covering one another. */
export function layLane(cards: readonly { visit: Visit; leftPx: number; rightPx: number }[]): {
  cards: LaidCard[];
  rows: number;
} {
  const rowEnds: number[] = [];
  const laid = [...cards]
    .sort((a, b) => a.leftPx - b.leftPx || a.visit.id.localeCompare(b.visit.id))
    .map(({ visit, leftPx, rightPx }) => {
      const widthPx = Math.max(rightPx - leftPx, MIN_CARD_PX);
      // Half a pixel of grace, since touching is not overlapping.
      const free = rowEnds.findIndex((endPx) => endPx <= leftPx + 0.5);
      const row = free === -1 ? rowEnds.length : free;
      rowEnds[row] = leftPx + widthPx;
      return { visit, leftPx, widthPx, row };
    });
  return { cards: laid, rows: Math.max(rowEnds.length, 1) };
}

/** A stretch of a lane with one verdict for the card that is held. */
export interface Shade {
  leftPx: number;
  widthPx: number;
  verdict: 0 | 1 | 2;
}

const shadeLooks = ['shade-fits', 'shade-caution', 'shade-stop'] as const;

const Shades = memo(function Shades({ shades }: { shades: readonly Shade[] }) {
  return shades.map((shade) => (
    <div
      key={shade.leftPx}
      aria-hidden="true"
      className={`pointer-events-none absolute inset-y-0 ${shadeLooks[shade.verdict]}`}
      style={{ left: shade.leftPx, width: shade.widthPx }}
    />
  ));
});

export function Lane({
  crew,
  people,
  cards,
  rows,
  shades,
  target,
  headWidthPx,
  boardWidthPx,
  dayWidthPx,
  nowPx,
  cardOf,
  mayMove,
  onOpen,
}: {
  crew: Crew;
  people: string;
  cards: readonly LaidCard[];
  rows: number;
  shades: readonly Shade[];
  /** Where the held card would stand on this lane. */
  target: { leftPx: number; widthPx: number; verdict: 0 | 1 | 2; label: string } | null;
  headWidthPx: number;
  boardWidthPx: number;
  dayWidthPx: number;
  nowPx: number | null;
  cardOf: (visit: Visit, widthPx: number) => CardProps | null;
  mayMove: boolean;
  onOpen: (visitId: string) => void;
}) {
  const heightPx = rows * ROW_HEIGHT_PX + 8;
  return (
    <section
      aria-label={crew.name}
      className="flex border-b border-line-strong"
      style={{ width: headWidthPx + boardWidthPx, height: heightPx }}
    >
      <div
        className="sticky left-0 z-10 shrink-0 border-r border-line-strong bg-sheet px-2 py-1.5"
        style={{ width: headWidthPx }}
      >
        <div className="truncate font-semibold" title={crew.name}>
          {crew.name}
        </div>
        <div className="line-clamp-2 text-xs text-ink-soft">{people}</div>
      </div>
      <div
        data-lane={crew.id}
        className="relative shrink-0 bg-sheet"
        style={{
          width: boardWidthPx,
          backgroundImage: 'linear-gradient(to right, var(--line-strong) 1px, transparent 1px)',
          backgroundSize: `${dayWidthPx}px 100%`,
        }}
      >
        <Shades shades={shades} />
        {nowPx !== null && (
          <div
            aria-hidden="true"
            className="pointer-events-none absolute inset-y-0 w-0.5 bg-stop/60"
            style={{ left: nowPx }}
          />
        )}
        {cards.map((card) => (
          <div
            key={card.visit.id}
            className="absolute"
            style={{
              left: card.leftPx,
              width: card.widthPx,
              top: 4 + card.row * ROW_HEIGHT_PX,
              height: ROW_HEIGHT_PX - 4,
            }}
          >
            <VisitCard card={cardOf(card.visit, card.widthPx)} mayMove={mayMove} onOpen={onOpen} />
          </div>
        ))}
        {target && (
          <div
            aria-hidden="true"
            className={`pointer-events-none absolute inset-y-0.5 z-10 rounded-card border-3 ${
              ['border-fits', 'border-caution', 'border-stop'][target.verdict]
            }`}
            style={{ left: target.leftPx, width: target.widthPx }}
          >
            <span className="absolute left-0 top-0 bg-ink px-1 text-xs font-semibold whitespace-nowrap text-paper">
              {target.label}
            </span>
          </div>
        )}
      </div>
    </section>
  );
}
