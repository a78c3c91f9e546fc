import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { competitionRank } from './places';
import { teamTotals, type TeamTotalsInput } from './team-totals';

const events = (n: number, trials: number[] = []) => Array.from({ length: n }, (_, i) => ({ name: `E${i + 1}`, trial: trials.includes(i) }));

const season: fc.Arbitrary<TeamTotalsInput> = fc.integer({ min: 1, max: 6 }).chain((n) =>
  fc
    .record({
      trials: fc.array(fc.boolean(), { minLength: n, maxLength: n }),
      places: fc.array(fc.tuple(fc.constantFrom('S1', 'S2', 'S3'), fc.array(fc.integer({ min: 1, max: 5 }), { minLength: n, maxLength: n })), { maxLength: 12 }),
      drop: fc.nat({ max: 2 }),
      advance: fc.nat({ max: 8 }),
      perSchool: fc.integer({ min: 0, max: 4 }),
    })
    .map(({ trials, places, drop, advance, perSchool }) => {
      // At least one counted event, and fewer dropped than counted.
      const list = trials.map((trial, i) => ({ name: `E${i}`, trial: i === 0 ? false : trial }));
      const counted = list.filter(({ trial }) => !trial).length;
      return { events: list, teams: places.map(([school, values], i) => ({ team: i + 1, school, places: values })), drop: Math.min(drop, counted - 1), advance, perSchool };
    }),
);

/** The tie rule word for word: more firsts, then more seconds, and so on. */
function countsDiffer(a: readonly number[], b: readonly number[]): number {
  for (let value = 1; value <= 30; value += 1) {
    const difference = b.filter((v) => v === value).length - a.filter((v) => v === value).length;
    if (difference !== 0) return difference;
  }
  return 0;
}

describe('teamTotals', () => {
  it('does not depend on the order of teams or events', () => {
    fc.assert(
      fc.property(season.chain((s) => fc.tuple(fc.constant(s), fc.shuffledSubarray([...s.teams], { minLength: s.teams.length }))), ([s, teams]) => {
        expect(teamTotals({ ...s, teams })).toEqual(teamTotals(s));
        const reversed = { ...s, events: [...s.events].reverse(), teams: s.teams.map((t) => ({ ...t, places: [...t.places].reverse() })) };
        expect(teamTotals(reversed)).toEqual(teamTotals(s));
      }),
    );
  });

  it('sums what is left, and places by total and then by counting firsts, seconds, …', () => {
    fc.assert(
      fc.property(season, (s) => {
        const { rows } = teamTotals(s);
        const kept = new Map(
          s.teams.map(({ team, places }) => {
            const values = places.filter((_, i) => s.events[i]?.trial === false).sort((a, b) => a - b);
            return [team, values.slice(0, values.length - s.drop)];
          }),
        );
        const better = (a: number, b: number): number => {
          const [x, y] = [kept.get(a) ?? [], kept.get(b) ?? []];
          const sum = (v: number[]) => v.reduce((t, n) => t + n, 0);
          return sum(x) - sum(y) || countsDiffer(x, y);
        };
        expect(rows).toHaveLength(s.teams.length);
        for (const row of rows) {
          expect(row.dropped).toHaveLength(s.drop);
          expect(row.total).toBe((kept.get(row.team) ?? []).reduce((t, n) => t + n, 0));
          expect(row.place).toBe(1 + s.teams.filter(({ team }) => better(team, row.team) < 0).length);
        }
        rows.forEach((row, i) => {
          const before = rows[i - 1];
          if (before) expect(before.place < row.place || (before.place === row.place && before.team < row.team)).toBe(true);
        });
      }),
    );
  });

  it('sends on at most so many, at most so many a school, and names every tie that is cut', () => {
    fc.assert(
      fc.property(season, (s) => {
        const { rows, advance, cutTie } = teamTotals(s);
        expect(advance.length).toBeLessThanOrEqual(s.advance);
        for (const school of ['S1', 'S2', 'S3']) {
          expect(rows.filter((r) => r.school === school && advance.includes(r.team)).length).toBeLessThanOrEqual(s.perSchool);
        }
        // Nobody left out could still have gone on.
        for (const row of rows.filter((r) => !advance.includes(r.team))) {
          const ofSchool = rows.filter((r) => r.school === row.school && advance.includes(r.team)).length;
          expect(advance.length === s.advance || ofSchool === s.perSchool).toBe(true);
        }
        for (const row of rows) {
          const group = rows.filter((r) => r.place === row.place).map((r) => advance.includes(r.team));
          expect(cutTie.includes(row.team)).toBe(group.includes(true) && group.includes(false));
        }
      }),
    );
  });

  it('adds places as cross-country does: teams that are not complete are taken out, the places closed up, then summed', () => {
    // The published rule of cross-country running and its worked example: C has two runners only, so it does not count. A 27, B 28.
    const finish = ['A1', 'B1', 'B2', 'C1', 'A2', 'B3', 'A3', 'C2', 'A4', 'B4', 'A5', 'B5'].filter((runner) => !runner.startsWith('C'));
    const places = competitionRank(finish.map((runner, at) => ({ runner, at })), (a, b) => a.at - b.at);
    const of = (letter: string) => places.filter(({ item }) => item.runner.startsWith(letter)).map(({ place }) => place);
    const { rows } = teamTotals({
      events: events(5),
      teams: [
        { team: 2, school: 'B', places: of('B') },
        { team: 1, school: 'A', places: of('A') },
      ],
      drop: 0,
      advance: 1,
      perSchool: 1,
    });
    expect(rows.map(({ school, total, place }) => [school, total, place])).toEqual([
      ['A', 27, 1],
      ['B', 28, 2],
    ]);
  });

  it('a shared place that is cut is left to a person', () => {
    const out = teamTotals({
      events: events(2),
      teams: [
        { team: 7, school: 'S1', places: [2, 1] },
        { team: 3, school: 'S2', places: [1, 2] },
        { team: 5, school: 'S3', places: [4, 4] },
      ],
      drop: 0,
      advance: 1,
      perSchool: 1,
    });
    expect(out.rows.map(({ team, place }) => [team, place])).toEqual([[3, 1], [7, 1], [5, 3]]);
    expect(out.advance).toEqual([3]);
    expect(out.cutTie).toEqual([3, 7]);
  });

  it('leaves trial events out of totals, drops and ties', () => {
    const out = teamTotals({
      events: events(3, [1]),
      teams: [
        { team: 1, school: 'S1', places: [2, 1, 3] },
        { team: 2, school: 'S2', places: [3, 24, 2] },
      ],
      drop: 1,
      advance: 0,
      perSchool: 1,
    });
    expect(out.rows).toEqual([
      { team: 1, school: 'S1', total: 2, dropped: [3], place: 1 },
      { team: 2, school: 'S2', total: 2, dropped: [3], place: 1 },
    ]);
  });

  it.each<[string, Partial<TeamTotalsInput>]>([
    ['bad-drop', { drop: 2, teams: [{ team: 1, school: 'S', places: [] }] }],
    ['bad-drop', { drop: -1 }],
    ['bad-drop', { drop: 0.5 }],
    ['bad-drop', { drop: 0, events: events(2, [0, 1]) }],
    ['bad-places', { teams: [{ team: 1, school: 'S', places: [1] }] }],
    ['bad-places', { teams: [{ team: 1, school: 'S', places: [1, 2, 3] }] }],
    ['bad-places', { teams: [{ team: 1, school: 'S', places: [1, 0] }] }],
    ['bad-places', { teams: [{ team: 1, school: 'S', places: [1, 1.5] }] }],
    ['bad-places', { teams: [{ team: 1, school: 'S', places: [1, null as unknown as number] }] }],
    ['bad-places', { teams: [{ team: 1, school: 'S', places: undefined as unknown as number[] }] }],
  ])('refuses with %s', (code, change) => {
    const input = { events: events(2), teams: [{ team: 1, school: 'S', places: [1, 2] }], drop: 0, advance: 1, perSchool: 1, ...change };
    expect(() => teamTotals(input)).toThrow(expect.objectContaining({ code }) as Error);
  });
});
