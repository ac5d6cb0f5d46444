/** The visits that a pour causes: what, when at the earliest and latest, and how long. */

import type { BoardIndex } from './board-index.ts';
import type { Chain } from './chain.ts';
import { type Interval, MS_PER_HOUR } from './interval.ts';
import type { VisitKind } from './vocabulary.ts';

export interface PlannedFollowUp {
  readonly kind: 'saw' | 'strip';
  /** Key of the title in the catalogue of words. */
  readonly titleKey: 'follow-up.saw' | 'follow-up.strip';
  readonly window: Interval;
  readonly plannedMin: number;
  /** The follow-up that is there already; null where one is to be made. */
  readonly existingVisitId: string | null;
}

/** Minutes planned for a crew. Common practice, no source. */
const PLANNED_MIN = { saw: 120, strip: 120 } as const;
/** Forms are wanted back within three days of their release. Common practice, no source. */
const STRIP_WITHIN_HOURS = 72;

/** The window in which a follow-up of the kind may begin; null where the chain asks for none. */
export function followUpWindow(chain: Chain, kind: VisitKind): Interval | null {
  if (kind === 'saw') return chain.sawWindow;
  if (kind !== 'strip') return null;
  const forms = chain.blackouts.find((one) => one.use === 'forms');
  const startMs = Math.max(chain.endMs, forms?.interval.endMs ?? 0);
  return { startMs, endMs: startMs + STRIP_WITHIN_HOURS * MS_PER_HOUR };
}

/** The follow-ups of a pour's visit, with those that exist already. */
export function followUpsOf(index: BoardIndex, visitId: string, chain: Chain): PlannedFollowUp[] {
  const existing = index.followUps.get(visitId) ?? [];
  return (['saw', 'strip'] as const).flatMap((kind) => {
    const window = followUpWindow(chain, kind);
    if (!window) return [];
    const existingVisitId = existing.find((visit) => visit.kind === kind)?.id ?? null;
    const titleKey = `follow-up.${kind}` as const;
    return [{ kind, titleKey, window, plannedMin: PLANNED_MIN[kind], existingVisitId }];
  });
}
