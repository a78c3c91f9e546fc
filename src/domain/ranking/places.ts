/** Places as sports give them: equals share a place and the next place is skipped (1, 2, 2, 4). */
import { DomainError } from '../domain-error';

/** Whether a team has a score, did not start, or was disqualified. */
export const TEAM_STATUSES = ['scored', 'dns', 'dq'] as const;
export type TeamStatus = (typeof TEAM_STATUSES)[number];

/**
 * Items in order of `compare` (negative: first is better), each with its place. Items that compare equal share a place
 * ("standard competition ranking") and keep the order they came in. `compare` must be a consistent weak order.
 */
export function competitionRank<T>(items: readonly T[], compare: (a: T, b: T) => number): { item: T; place: number }[] {
  const sorted = [...items].sort(compare);
  const rows: { item: T; place: number }[] = [];
  sorted.forEach((item, i) => {
    const before = rows[i - 1];
    rows.push({ item, place: before !== undefined && compare(before.item, item) === 0 ? before.place : i + 1 });
  });
  return rows;
}

/**
 * Place points: a scored team's place; N + 1 for a team that did not start and N + 2 for one disqualified, N being all teams
 * of the event whatever their status.
 * @throws DomainError `bad-status` for a scored team without a place.
 */
export function placePoints(status: TeamStatus, place: number | null, fieldSize: number): number {
  if (status === 'dns') return fieldSize + 1;
  if (status === 'dq') return fieldSize + 2;
  if (place === null) throw new DomainError('bad-status', 'A scored team needs a place.');
  return place;
}
