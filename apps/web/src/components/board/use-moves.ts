import type { BoardIndex } from '@strikeboard/domain/board-index';
import { snapshotWithChange } from '@strikeboard/domain/change-rows';
import { type Finding, worstSeverity } from '@strikeboard/domain/finding';
import { nearestFit } from '@strikeboard/domain/fit';
import { needsReason, planPlacement } from '@strikeboard/domain/plan-placement';
import type { Placement, Snapshot } from '@strikeboard/domain/snapshot';
import { formatClock, formatDay, siteDayOf } from '@strikeboard/domain/zone';
import { useCallback, useState } from 'react';
import { placeVisit, returnVisit, undoChange } from '../../lib/api/schemas/board.ts';
import { ApiProblem, call, newKey } from '../../lib/client/api.ts';
import { office } from '../../lib/words/office.en.ts';
import { showToast } from '../ui/Toasts.tsx';
import type { BoardPatch } from './board-data.ts';
import type { Refusal } from './DropDialog.tsx';

const words = office.board;
const { cannotStand, needsReason: asksReason, withCaution, withNothing } = office.drop;
const FITS_SHOWN = 4;

/** "Tue Dec 8, 6:30 AM" on the site's clock. */
export function whenText(ms: number, zone: string): string {
  return `${formatDay(siteDayOf(ms, zone), 'en')}, ${formatClock(ms, zone, 'en')}`;
}

interface Board {
  slug: string;
  snapshot: Snapshot | undefined;
  index: BoardIndex | null;
  apply: (patch: BoardPatch) => void;
  show: (snapshot: Snapshot) => void;
  reload: () => Promise<void>;
  /** Said to those who hear the board. */
  say: (text: string) => void;
}

/** Moves of cards: shown at once, decided by the server, put back when it refuses. */
export function useMoves({ slug, snapshot, index, apply, show, reload, say }: Board) {
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [lastRevision, setLastRevision] = useState<number | null>(null);

  const titleOf = useCallback(
    (visitId: string): string => {
      const visit = snapshot?.visits.find((row) => row.id === visitId);
      const pour = snapshot?.pours.find((row) => row.id === visit?.pourId);
      return pour?.name ?? visit?.title ?? '';
    },
    [snapshot],
  );
  const zoneOf = useCallback(
    (visitId: string): string => {
      const visit = snapshot?.visits.find((row) => row.id === visitId);
      return snapshot?.sites.find((site) => site.id === visit?.siteId)?.zone ?? snapshot?.zone ?? 'UTC';
    },
    [snapshot],
  );

  const undo = useCallback(
    async (revision: number) => {
      try {
        const { patch, revision: undoneAt } = await call(undoChange, {
          params: { slug, revision: String(revision) },
        });
        apply(patch);
        setLastRevision(undoneAt);
        say(words.undone);
      } catch (error) {
        if (!(error instanceof ApiProblem)) throw error;
        showToast(error.problem.detail, { tone: 'stop' });
      }
    },
    [slug, apply, say],
  );

  const done = useCallback(
    (text: string, change: { revision: number; patch: BoardPatch }) => {
      apply(change.patch);
      setLastRevision(change.revision);
      say(text);
      showToast(text, { action: { label: words.undo, run: () => void undo(change.revision) } });
    },
    [apply, say, undo],
  );

  const refuse = useCallback(
    (
      kind: Refusal['kind'],
      placement: Placement,
      findings: readonly Finding[],
      accept: (reason: string) => void,
    ) => {
      if (!index) return;
      const zone = zoneOf(placement.visitId);
      const nearest =
        kind === 'stops'
          ? nearestFit(index, placement.visitId, placement.crewStartMs, {
              nowMs: Date.now(),
              crewId: placement.crewId,
              limit: FITS_SHOWN,
            }).map(({ crewId, crewStartMs, worst }) => ({
              crewId,
              crewStartMs,
              label: `${whenText(crewStartMs, zone)} · ${index.crews.get(crewId)?.name ?? ''} · ${worst === 'caution' ? withCaution : withNothing}`,
            }))
          : [];
      setRefusal({
        kind,
        visitId: placement.visitId,
        title: titleOf(placement.visitId),
        zone,
        findings: findings.filter((finding) => finding.severity === (kind === 'stops' ? 'stop' : 'caution')),
        nearest,
        accept,
      });
      say(
        kind === 'stops' ? cannotStand(titleOf(placement.visitId)) : asksReason(titleOf(placement.visitId)),
      );
    },
    [index, zoneOf, titleOf, say],
  );

  const place = useCallback(
    async (placement: Placement, reason: string | null = null): Promise<void> => {
      const visit = index?.visits.get(placement.visitId);
      if (!index || !snapshot || !visit) return;
      setRefusal(null);
      const planned = planPlacement(index, placement, Date.now());
      const again = (text: string) => void place(placement, text);
      if (worstSeverity(planned.findings) === 'stop')
        return refuse('stops', placement, planned.findings, again);
      const asking = needsReason(planned.findings, []);
      if (asking.length > 0 && reason === null)
        return refuse('reason-needed', placement, planned.findings, again);
      show(snapshotWithChange(snapshot, index, planned.change));
      try {
        const change = await call(placeVisit, {
          params: { slug, id: placement.visitId },
          key: newKey(),
          body: {
            crewId: placement.crewId,
            crewStartMs: placement.crewStartMs,
            pumpId: placement.pumpId,
            baseVersion: visit.version,
            reasons: reason === null ? {} : Object.fromEntries(asking.map((code) => [code, reason])),
          },
        });
        const crew = index.crews.get(placement.crewId)?.name ?? '';
        done(
          words.dropped(
            titleOf(placement.visitId),
            crew,
            whenText(placement.crewStartMs, zoneOf(placement.visitId)),
          ),
          change,
        );
      } catch (error) {
        if (!(error instanceof ApiProblem)) throw error;
        show(snapshot);
        const { code, detail, findings, changed = [] } = error.problem;
        if ((code === 'stops' || code === 'reason-needed') && findings) {
          await reload();
          refuse(code, placement, findings, again);
          return;
        }
        const told = changed.length > 0 ? `${detail} ${words.changedMeanwhile(changed)}` : detail;
        showToast(code === 'unreachable' ? words.offlineMove : told, { tone: 'stop' });
        say(words.cancelled(titleOf(placement.visitId)));
        if (code !== 'unreachable') await reload();
      }
    },
    [slug, snapshot, index, show, done, refuse, reload, titleOf, zoneOf, say],
  );

  const putBack = useCallback(
    async (visitId: string): Promise<void> => {
      const visit = index?.visits.get(visitId);
      if (!visit || visit.state === 'waiting') return;
      try {
        const change = await call(returnVisit, {
          params: { slug, id: visitId },
          body: { baseVersion: visit.version },
        });
        done(words.backToWaiting(titleOf(visitId)), change);
      } catch (error) {
        if (!(error instanceof ApiProblem)) throw error;
        showToast(error.problem.detail, { tone: 'stop' });
        await reload();
      }
    },
    [slug, index, done, titleOf, reload],
  );

  return {
    place,
    putBack,
    undo,
    done,
    lastRevision,
    refusal,
    closeRefusal: () => setRefusal(null),
    titleOf,
    zoneOf,
  };
}
