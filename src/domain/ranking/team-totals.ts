/**
 * Team totals by place sum, and who goes on. Definition: tests/reference/CONVENTIONS.md, section G.
 * All values are whole numbers, so plain numbers are exact here.
 */
import { DomainError } from '../domain-error';
import { competitionRank } from './places';

export interface TeamTotalsInput {
  /** A trial event is run and ranked, but does not count. */
  events: readonly { name: string; trial: boolean }[];
  /** `places`: place points, one per event in the order of `events`. `team`: its number, unique. */
  teams: readonly { team: number; school: string; places: readonly number[] }[];
  /** How many of a team's largest counted values are left out. */
  drop: number;
  /** How many teams go on. */
  advance: number;
  /** At most so many of one school go on. */
  perSchool: number;
}

export interface TeamTotalsRow {
  team: number;
  school: string;
  total: number;
  /** The values left out, ascending. */
  dropped: number[];
  place: number;
}

export interface TeamTotalsResult {
  rows: TeamTotalsRow[];
  /** Numbers of the teams that go on, in order. */
  advance: number[];
  /** Teams of every shared place of which some but not all go on: a person must decide. */
  cutTie: number[];
}

/**
 * Sums each team's place points over the counted events without its `drop` largest, lowest total first. Equal totals: more
 * firsts among the values that count, then more seconds, and so on; still equal: a shared place, by ascending team number.
 * @throws DomainError `bad-drop` unless drop is a whole number, 0 ≤ drop < counted events; `bad-places` unless every team has
 *   one whole number ≥ 1 per event.
 */
export function teamTotals(input: TeamTotalsInput): TeamTotalsResult {
  const { events, teams, drop, advance, perSchool } = input;
  const counted = events.flatMap((event, i) => (event.trial ? [] : [i]));
  if (!Number.isInteger(drop) || drop < 0 || drop >= counted.length) throw new DomainError('bad-drop');
  for (const { places } of teams) {
    if (!Array.isArray(places) || places.length !== events.length || !places.every((p) => Number.isSafeInteger(p) && p >= 1)) {
      throw new DomainError('bad-places');
    }
  }

  const summed = teams.map(({ team, school, places }) => {
    const values = counted.map((i) => places[i] as number).sort((a, b) => a - b);
    const kept = values.slice(0, values.length - drop);
    return { team, school, kept, dropped: values.slice(kept.length), total: kept.reduce((sum, p) => sum + p, 0) };
  });
  // Of two ascending lists of one length, the one smaller at the first difference has more of that smaller value: comparing
  // them place by place is counting firsts, then seconds, then thirds.
  const byTotal = (a: (typeof summed)[number], b: (typeof summed)[number]): number => {
    if (a.total !== b.total) return a.total - b.total;
    const i = a.kept.findIndex((value, at) => value !== b.kept[at]);
    return i < 0 ? 0 : (a.kept[i] as number) - (b.kept[i] as number);
  };
  const rows = competitionRank([...summed].sort((a, b) => a.team - b.team), byTotal).map(({ item, place }) => ({
    team: item.team,
    school: item.school,
    total: item.total,
    dropped: item.dropped,
    place,
  }));

  const taken: number[] = [];
  const perSchoolTaken = new Map<string, number>();
  for (const row of rows) {
    const ofSchool = perSchoolTaken.get(row.school) ?? 0;
    if (taken.length >= advance || ofSchool >= perSchool) continue;
    taken.push(row.team);
    perSchoolTaken.set(row.school, ofSchool + 1);
  }

  const goesOn = new Set(taken);
  const groups = new Map<number, number[]>();
  for (const row of rows) groups.set(row.place, [...(groups.get(row.place) ?? []), row.team]);
  const cutTie = [...groups.values()].filter((g) => g.some((t) => goesOn.has(t)) && !g.every((t) => goesOn.has(t))).flat();
  return { rows, advance: taken, cutTie };
}
