import { isPlaced } from '../board-index.ts';
import { contains, MS_PER_HOUR } from '../interval.ts';
import { basisOf } from '../plan.ts';
import { type Check, sources, visitSubject } from './report.ts';

/** From this long before the saw window on, an unmanned one is a caution. */
const SOON_MS = 24 * MS_PER_HOUR;

/** A pour's joints are to be sawn, and no saw visit that stands on the board begins within the window. */
export const followUpUnmanned: Check = (plan, report) => {
  const window = plan.pour?.chain.sawWindow;
  if (!window) return;
  const saws = (plan.index.followUps.get(plan.visit.id) ?? []).filter((visit) => visit.kind === 'saw');
  if (saws.some((visit) => isPlaced(visit) && contains(window, visit.during.startMs))) return;
  report('follow-up-unmanned', window.startMs - plan.nowMs <= SOON_MS ? 'caution' : 'note', () => ({
    against: saws.map((visit) => visitSubject(visit.id)),
    during: window,
    facts: {
      kind: 'saw',
      windowFromMs: window.startMs,
      windowUntilMs: window.endMs,
      standsOutside: saws.some(isPlaced),
    },
    formula: 'saw window = end of finishing + hours',
    source: sources.saw,
    clears: [{ kind: 'man-follow-up', window }],
  }));
};

/** A saw visit that begins outside the window of the pour that caused it. */
export const sawOutsideWindow: Check = (plan, report) => {
  const { visit, index, during } = plan;
  if (visit.kind !== 'saw') return;
  const cause = visit.causedByVisitId === null ? undefined : index.visits.get(visit.causedByVisitId);
  const shape = cause && isPlaced(cause) ? basisOf(index, cause.id).pour?.shape : undefined;
  const startMs = cause?.during?.startMs ?? 0;
  const window = shape?.sawWindow
    ? { startMs: shape.sawWindow.startMs + startMs, endMs: shape.sawWindow.endMs + startMs }
    : visit.window;
  if (!window || contains(window, during.startMs)) return;
  report('follow-up-unmanned', 'caution', () => ({
    against: cause ? [visitSubject(cause.id)] : [],
    during: window,
    facts: {
      kind: 'saw',
      windowFromMs: window.startMs,
      windowUntilMs: window.endMs,
      startsMs: during.startMs,
      standsOutside: true,
    },
    formula: 'saw window = end of finishing + hours',
    source: sources.saw,
    clears: [
      during.startMs < window.startMs
        ? { kind: 'start-after', atMs: window.startMs }
        : { kind: 'start-by', atMs: window.endMs },
    ],
  }));
};
