import { describe, expect, test } from 'vitest';
import {
  crewVisitsDuring,
  indexSnapshot,
  isActive,
  isPlaced,
  rowsOfVisit,
  withVisitRows,
} from './board-index.ts';
import { at, day, ids, placed, sampleIndex, sampleSnapshot, sampleVisit } from './testing/sample-board.ts';
import { orderStates, visitStates } from './vocabulary.ts';

const hours = (from: number, until: number) => ({ startMs: at(day, from), endMs: at(day, until) });
const block = (visitId: string, from: number, until: number) =>
  sampleVisit(visitId, { kind: 'prep', state: 'firm', crewId: ids.northCrew, during: hours(from, until) });

describe('an index', () => {
  test('lists a crew’s and a site’s visits by start, whatever the order of the rows', () => {
    const visits = [block('late', 15, 16), block('early', 6, 9), block('noon', 11, 14)];
    const index = indexSnapshot({ ...sampleSnapshot(), visits });
    const order = (list: readonly { id: string }[] | undefined) => (list ?? []).map((visit) => visit.id);
    expect(order(index.visitsByCrew.get(ids.northCrew))).toEqual(['early', 'noon', 'late']);
    expect(order(index.visitsBySite.get(ids.orchard))).toEqual(['early', 'noon', 'late']);
  });

  test.each([
    // Half-open: touching is not sharing.
    ['within', 12, 13, ['noon']],
    ['touching both ends', 9, 11, []],
    ['over all', 5, 17, ['early', 'noon', 'late']],
    ['the last hour', 15, 16, ['late']],
  ] as const)('finds the crew’s visits %s', (_name, from, until, expected) => {
    const visits = [block('late', 15, 16), block('early', 6, 9), block('noon', 11, 14)];
    const index = indexSnapshot({ ...sampleSnapshot(), visits });
    expect(crewVisitsDuring(index, ids.northCrew, hours(from, until)).map((visit) => visit.id)).toEqual(
      expected,
    );
    expect(crewVisitsDuring(index, ids.southCrew, hours(from, until))).toEqual([]);
  });

  test('holds for a crew what is pencilled, firm or done', () => {
    const standing = visitStates.filter((state) => isPlaced({ ...block('x', 6, 9), state }));
    expect(standing).toEqual(['pencilled', 'firm', 'done']);
    expect(isPlaced({ ...block('x', 6, 9), during: null })).toBe(false);
    expect(orderStates.filter(isActive)).toEqual(['drafted', 'sent', 'confirmed', 'countered']);
  });

  test('does not change the snapshot that it is made of, nor an index that another is made of', () => {
    const snapshot = sampleSnapshot();
    const copy = JSON.parse(JSON.stringify(snapshot));
    const index = indexSnapshot(snapshot);
    const after = placed(index, ids.floor, ids.northCrew, at(day, 6));
    expect(snapshot).toEqual(copy);
    expect(index).toEqual(indexSnapshot(copy));
    expect(after.bookingsByEquipment.get(ids.pump)).toHaveLength(1);
  });

  test('takes a visit that it did not know', () => {
    const visit = block('new', 6, 9);
    const index = withVisitRows(sampleIndex(), {
      visit,
      shifts: [],
      offers: [],
      bookings: [],
      mixOrders: [],
    });
    expect(rowsOfVisit(index, 'new')?.visit).toEqual(visit);
    expect(index.visitsByCrew.get(ids.northCrew)).toEqual([visit]);
    expect(rowsOfVisit(index, 'unknown')).toBeNull();
  });
});
