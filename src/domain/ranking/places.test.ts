import { rank } from 'd3-array';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { competitionRank, placePoints } from './places';

const ascending = (a: number, b: number): number => a - b;
/** Places in the order the values came in. */
const placesOf = (values: readonly number[]): number[] => {
  const places: number[] = [];
  for (const { item, place } of competitionRank(values.map((value, i) => ({ value, i })), (a, b) => a.value - b.value)) places[item.i] = place;
  return places;
};

describe('competitionRank', () => {
  it('is what d3-array’s rank gives, which counts from zero', () => {
    fc.assert(fc.property(fc.array(fc.integer({ min: 0, max: 12 })), (values) => {
      expect(placesOf(values)).toEqual([...rank(values)].map((r) => r + 1));
    }));
  });

  it('is the documented example of scipy.stats.rankdata(method="min"): 0, 2, 3, 2 → 1, 2, 4, 2', () => {
    expect(placesOf([0, 2, 3, 2])).toEqual([1, 2, 4, 2]);
  });

  it('gives each item one more than the number of better ones', () => {
    fc.assert(fc.property(fc.array(fc.integer({ min: 0, max: 8 })), (values) => {
      expect(placesOf(values)).toEqual(values.map((value) => 1 + values.filter((other) => other < value).length));
    }));
  });

  it('keeps equal items in the order they came, and does not touch what it was given', () => {
    const items = ['b2', 'a1', 'c2', 'd1'];
    const rows = competitionRank(items, (a, b) => a.slice(1).localeCompare(b.slice(1)));
    expect(rows).toEqual([
      { item: 'a1', place: 1 },
      { item: 'd1', place: 1 },
      { item: 'b2', place: 3 },
      { item: 'c2', place: 3 },
    ]);
    expect(items).toEqual(['b2', 'a1', 'c2', 'd1']);
    expect(competitionRank([], ascending)).toEqual([]);
  });
});

describe('placePoints', () => {
  it('are the place, N + 1 for not started, N + 2 for disqualified', () => {
    expect([placePoints('scored', 7, 24), placePoints('dns', null, 24), placePoints('dq', 1, 24)]).toEqual([7, 25, 26]);
    expect(() => placePoints('scored', null, 24)).toThrow(expect.objectContaining({ code: 'bad-status' }) as Error);
  });
});
