import type { BoardIndex } from '@strikeboard/domain/board-index';
import { worstSeverity } from '@strikeboard/domain/finding';
import { planPlacement } from '@strikeboard/domain/plan-placement';
import { shadeLane } from '@strikeboard/domain/shade';
import { useMemo } from 'react';
import type { Spot } from './keyboard.ts';
import type { Shade } from './Lane.tsx';
import { instantOfSlot, type Scale, slotInstants, xOf } from './scale.ts';

const verdicts = { stop: 2, caution: 1, note: 0 } as const;

/** What would happen wherever the held card could be put down: stretches of each lane with one verdict. */
export function useShades(
  index: BoardIndex | null,
  heldId: string | null,
  scale: Scale,
): ReadonlyMap<string, readonly Shade[]> {
  return useMemo(() => {
    const shades = new Map<string, Shade[]>();
    const visit = heldId === null ? undefined : index?.visits.get(heldId);
    if (!index || !visit) return shades;
    const zone = index.sites.get(visit.siteId)?.zone ?? index.zone;
    const instants = slotInstants(scale, zone);
    const edges = instants.map((ms) => xOf(ms, zone, scale));
    const endPx = scale.days * scale.dayWidthPx;
    for (const crewId of index.crews.keys()) {
      const lane: Shade[] = [];
      for (const [at, verdict] of shadeLane(index, visit.id, crewId, instants, Date.now()).entries()) {
        const leftPx = edges[at] ?? 0;
        const widthPx = (edges[at + 1] ?? endPx) - leftPx;
        const last = lane.at(-1);
        const known = verdict === 0 || verdict === 1 ? verdict : 2;
        if (last?.verdict === known) last.widthPx += widthPx;
        else lane.push({ leftPx, widthPx, verdict: known });
      }
      shades.set(crewId, lane);
    }
    return shades;
  }, [index, heldId, scale]);
}

/** The held card where it would stand now: its length, its verdict and the findings behind it. */
export function usePreview(index: BoardIndex | null, heldId: string | null, spot: Spot) {
  const crewId = spot?.crewId;
  const day = spot?.slot.day;
  const minute = spot?.slot.minute;
  return useMemo(() => {
    const visit = heldId === null ? undefined : index?.visits.get(heldId);
    if (!index || !visit || crewId === undefined || day === undefined || minute === undefined) return null;
    const zone = index.sites.get(visit.siteId)?.zone ?? index.zone;
    const crewStartMs = instantOfSlot({ day, minute }, zone);
    const planned = planPlacement(index, { visitId: visit.id, crewId, crewStartMs }, Date.now());
    const worst = worstSeverity(planned.findings);
    return { ...planned, zone, crewId, crewStartMs, verdict: worst === null ? 0 : verdicts[worst] } as const;
  }, [index, heldId, crewId, day, minute]);
}
