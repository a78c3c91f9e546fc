/**
 * Score and ranking of the optics shoot, in exact rationals. Definition: tests/reference/CONVENTIONS.md, section F.
 * score = wA·max(0, 1 − d/R) + wB·used/available + wT·test/testMax.
 */
import { DomainError } from '../domain-error';
import { compareExact, exact, isHalfStep, ONE, roundHalfUp, toRatioText, tryExact, ZERO, type Exact } from '../exact';
import { competitionRank, placePoints, type TeamStatus } from '../ranking/places';

/** Decimal text ("12.5") or a whole number. */
export type ExactInput = string | number;

export interface OpticsRules {
  /** Weights of accuracy, barriers used and written test: whole numbers ≥ 0 that add to 100. */
  wA: number;
  wB: number;
  wT: number;
  /** Full scale, mm: at this distance and beyond accuracy is 0. */
  R: ExactInput;
  barriersAvailable: number;
  testMax: ExactInput;
}

export interface OpticsTeam {
  team: string;
  /** Distance from spot to target along the walls, mm; null when the beam hit no wall. */
  d: ExactInput | null;
  barriersUsed: number;
  /** Points of the written test, a whole number of halves. */
  testRaw: ExactInput;
  /** Only for ties; a team without one stands after those with. */
  mirrorsUsed?: number | null;
  /** Seconds, only for ties; a team without one stands after those with. */
  timeUsed?: ExactInput | null;
  status?: TeamStatus;
}

/** Ratios are text "p/q" in lowest terms; `display` is the score rounded half up to two decimals. */
export interface OpticsScore {
  accuracy: string;
  barrier: string;
  test: string;
  score: string;
  display: string;
}

export interface OpticsRankRow {
  team: string;
  status: TeamStatus;
  score: string | null;
  display: string | null;
  place: number | null;
  points: number;
}

/** What may settle equal scores. */
export const OPTICS_TIE_BREAKS = ['distance', 'barriersUsed', 'test', 'mirrorsUsed', 'timeUsed'] as const;
export type OpticsTieBreak = (typeof OPTICS_TIE_BREAKS)[number];

const isCount = (value: unknown): value is number => Number.isInteger(value) && (value as number) >= 0;

/** Rules that have been checked, with their decimals read. */
interface CheckedRules extends Pick<OpticsRules, 'wA' | 'wB' | 'wT' | 'barriersAvailable'> {
  R: Exact;
  testMax: Exact;
}

function checkRules(rules: OpticsRules): CheckedRules {
  const { wA, wB, wT, barriersAvailable } = rules;
  if (![wA, wB, wT].every(isCount) || wA + wB + wT !== 100) throw new DomainError('bad-weights');
  const R = tryExact(rules.R);
  if (R === null || compareExact(R, ZERO) <= 0) throw new DomainError('bad-scale');
  const testMax = tryExact(rules.testMax);
  if (testMax === null || compareExact(testMax, ZERO) <= 0) throw new DomainError('bad-test');
  if (!isCount(barriersAvailable) || barriersAvailable < 1) throw new DomainError('bad-barriers');
  return { wA, wB, wT, barriersAvailable, R, testMax };
}

/** The exact values of one scored team. */
interface ExactScore {
  d: Exact | null;
  testRaw: Exact;
  accuracy: Exact;
  barrier: Exact;
  test: Exact;
  score: Exact;
}

function exactScore(rules: CheckedRules, team: OpticsTeam): ExactScore {
  const { wA, wB, wT, R, testMax, barriersAvailable } = rules;
  const d = team.d === null ? null : tryExact(team.d);
  if (team.d !== null && (d === null || compareExact(d, ZERO) < 0)) throw new DomainError('bad-distance');
  if (!isCount(team.barriersUsed) || team.barriersUsed > barriersAvailable) throw new DomainError('bad-barriers');
  const testRaw = tryExact(team.testRaw);
  if (testRaw === null || compareExact(testRaw, ZERO) < 0 || compareExact(testRaw, testMax) > 0 || !isHalfStep(testRaw)) {
    throw new DomainError('bad-test');
  }
  const accuracy = d === null || compareExact(d, R) >= 0 ? ZERO : ONE.sub(d.div(R));
  const barrier = exact(team.barriersUsed).div(barriersAvailable);
  const test = testRaw.div(testMax);
  return { d, testRaw, accuracy, barrier, test, score: accuracy.mul(wA).add(barrier.mul(wB)).add(test.mul(wT)) };
}

/**
 * One team's score and its three shares.
 * @throws DomainError, the first that holds: `bad-weights` not whole, negative, or not adding to 100; `bad-scale` R ≤ 0;
 *   `bad-test` testMax ≤ 0; `bad-barriers` available < 1; `bad-distance` d negative or unreadable; `bad-barriers` used outside
 *   0..available; `bad-test` test outside 0..testMax or not a multiple of 1/2.
 */
export function opticsScore(input: { rules: OpticsRules; team: OpticsTeam }): OpticsScore {
  const { accuracy, barrier, test, score } = exactScore(checkRules(input.rules), input.team);
  return {
    accuracy: toRatioText(accuracy),
    barrier: toRatioText(barrier),
    test: toRatioText(test),
    score: toRatioText(score),
    display: roundHalfUp(score, 2),
  };
}

/** What a team is ordered by: its score and the tie-break values, null where it has none. */
interface OpticsKeys {
  score: Exact;
  distance: Exact | null;
  barriersUsed: Exact;
  test: Exact;
  mirrorsUsed: Exact | null;
  timeUsed: Exact | null;
}

const HIGHER_FIRST: ReadonlySet<keyof OpticsKeys> = new Set(['score', 'barriersUsed', 'test']);

function compareKey(a: OpticsKeys, b: OpticsKeys, key: keyof OpticsKeys): number {
  const x = a[key];
  const y = b[key];
  if (x === null || y === null) return (x === null ? 1 : 0) - (y === null ? 1 : 0);
  return HIGHER_FIRST.has(key) ? compareExact(y, x) : compareExact(x, y);
}

/**
 * Places of all teams. Scored teams by exact score, higher first, then by the tie-break order; teams equal in everything share
 * a place and stand in input order. Then teams that did not start, then the disqualified, whose results are not read.
 *
 * `tieBreak` is a permutation or part of {@link OPTICS_TIE_BREAKS} (default: all, in that order). `fieldSize` is N for the
 * points of those not scored (default: the number of teams given).
 * @throws DomainError as {@link opticsScore}, for the first team that fails; `bad-status`; `bad-tie-break`.
 */
export function opticsRank(
  input: { rules: OpticsRules; teams: readonly OpticsTeam[] },
  options: { tieBreak?: readonly OpticsTieBreak[]; fieldSize?: number } = {},
): { rows: OpticsRankRow[] } {
  const { rules, teams } = input;
  const order = options.tieBreak ?? OPTICS_TIE_BREAKS;
  const fieldSize = options.fieldSize ?? teams.length;
  if (new Set(order).size !== order.length || !order.every((key) => OPTICS_TIE_BREAKS.includes(key))) {
    throw new DomainError('bad-tie-break');
  }
  const checked = checkRules(rules);

  const scored: { team: string; keys: OpticsKeys }[] = [];
  const others: Record<'dns' | 'dq', OpticsRankRow[]> = { dns: [], dq: [] };
  for (const team of teams) {
    const status = team.status ?? 'scored';
    if (status === 'dns' || status === 'dq') {
      const points = placePoints(status, null, fieldSize);
      others[status].push({ team: team.team, status, score: null, display: null, place: null, points });
    } else if (status === 'scored') {
      const { score, d, testRaw } = exactScore(checked, team);
      scored.push({
        team: team.team,
        keys: {
          score,
          distance: d,
          barriersUsed: exact(team.barriersUsed),
          test: testRaw,
          mirrorsUsed: tryExact(team.mirrorsUsed),
          timeUsed: tryExact(team.timeUsed),
        },
      });
    } else {
      throw new DomainError('bad-status');
    }
  }

  const compare = (a: (typeof scored)[number], b: (typeof scored)[number]): number => {
    for (const key of ['score', ...order] as const) {
      const difference = compareKey(a.keys, b.keys, key);
      if (difference !== 0) return difference;
    }
    return 0;
  };
  const rows = competitionRank(scored, compare).map(({ item, place }): OpticsRankRow => {
    const { score } = item.keys;
    const points = placePoints('scored', place, fieldSize);
    return { team: item.team, status: 'scored', score: toRatioText(score), display: roundHalfUp(score, 2), place, points };
  });
  return { rows: [...rows, ...others.dns, ...others.dq] };
}
