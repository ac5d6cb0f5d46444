import type { BoardPatch } from '@strikeboard/db/queries/board-change';
import { describe, expect, it } from 'vitest';
import { crewsOf, patchOfLanes } from './foreman-view.ts';

const during = { startMs: 0, endMs: 3_600_000 };

function visit(id: string, crewId: string | null): BoardPatch['visits'][number] {
  return {
    ...{ id, crewId, version: 1, kind: 'prep', state: 'firm', siteId: 's', pourId: null, partYd3: null },
    ...{ title: id, during, wantedOn: null, plannedMin: 60, window: null, causedByVisitId: null },
    ...{ acceptedCodes: [], untold: false },
  };
}

const shift = (visitId: string) => ({
  ...{ id: `shift-${visitId}`, visitId, personId: 'p', during, held: during },
  ...({ state: 'held', answer: 'none', told: true } as const),
});

describe("a foreman's part of the board (common practice, no source)", () => {
  const patch: BoardPatch = {
    ...{ revision: 7, kind: 'place', actorPersonId: null, visitIds: ['own', 'other', 'waits'] },
    visits: [visit('own', 'north'), visit('other', 'south'), visit('waits', null)],
    shifts: [shift('own'), shift('other')],
    ...{ pours: [], slabs: [], offers: [], mixOrders: [], bookings: [] },
  };

  it('has the rows of their lanes only, and still names what has left them', () => {
    const seen = patchOfLanes(patch, new Set(['north']));
    expect(seen.visits.map(({ id }) => id)).toEqual(['own']);
    expect(seen.shifts.map(({ visitId }) => visitId)).toEqual(['own']);
    expect(seen.visitIds).toEqual(['own', 'other', 'waits']);
  });

  it('counts the crews that they lead and those that they are on', () => {
    const crews = [
      { id: 'north', name: 'North', foremanId: 'p', sortOrder: 1 },
      { id: 'south', name: 'South', foremanId: 'q', sortOrder: 2 },
      { id: 'saw', name: 'Saw', foremanId: null, sortOrder: 3 },
    ];
    const memberships = [{ crewId: 'saw', personId: 'p', during }];
    expect([...crewsOf({ crews, memberships }, 'p')]).toEqual(['north', 'saw']);
  });
});
