import { getEventModule } from '~/event-modules/registry';
import { withScope } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { listEvents } from '../events/queries';
import type { EventRow } from '../events/types';
import { getRelease } from '../results/queries';
import { canDirect, requireDirector } from './policy';
import { countsOf, getTournament, listDivisions, loadNavigation } from './queries';
import type { DivisionRow, EventCounts, TournamentNavigation } from './types';

/** What the tournament's rail shows: counts, and an event leader's own events. One query. */
export function loadTournamentNavigation(scope: Scope): Promise<TournamentNavigation> {
  return withScope(scope, (tx) => loadNavigation(tx, scope));
}

type Tournament = Awaited<ReturnType<typeof getTournament>>;

/** What the settings page shows. @throws AppError not-allowed */
export function loadSettings(scope: Scope): Promise<{ tournament: Tournament; divisions: (DivisionRow & { isEmpty: boolean })[] }> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    const [divisions, events, counts] = await Promise.all([listDivisions(tx, scope, tournament.id), listEvents(tx, scope, tournament.id), countsOf(tx, scope, tournament.id)]);
    return { tournament, divisions: divisions.map((d) => ({ ...d, isEmpty: !events.some((e) => e.division.id === d.id) && !counts.entered[d.id] })) };
  });
}

/** One event on the day: what is kept of what is expected, and when last. */
export interface OverviewEvent {
  event: EventRow;
  teams: number;
  /** Teams with every part, or not taking part. */
  complete: number;
  kept: number;
  expected: number;
  lastKeptAt: Date | null;
}

/** The day at a glance. */
export interface OverviewPage {
  tournament: Tournament;
  events: OverviewEvent[];
  teams: number;
  kept: number;
  expected: number;
}

/** @throws AppError not-allowed */
export function loadOverview(scope: Scope): Promise<OverviewPage> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    const [events, counts] = await Promise.all([listEvents(tx, scope, tournament.id), countsOf(tx, scope, tournament.id)]);
    const rows = events.map((event): OverviewEvent => {
      const parts = getEventModule(event.moduleKey).parts.length;
      const field = counts.confirmed[event.division.id] ?? 0;
      const mine: EventCounts = counts.events[event.id] ?? { kept: 0, out: 0, full: {}, lastKeptAt: null };
      return {
        event,
        teams: field,
        complete: mine.out + (mine.full[parts] ?? 0),
        kept: mine.kept,
        expected: Math.max(0, field - mine.out) * parts,
        lastKeptAt: mine.lastKeptAt === null ? null : new Date(mine.lastKeptAt),
      };
    });
    return {
      tournament,
      events: rows,
      teams: Object.values(counts.confirmed).reduce((a, b) => a + b, 0),
      kept: rows.reduce((n, r) => n + r.kept, 0),
      expected: rows.reduce((n, r) => n + r.expected, 0),
    };
  });
}

/** The public programme. */
export interface ProgrammePage {
  tournament: Tournament;
  divisions: DivisionRow[];
  events: EventRow[];
  teams: number;
  /** Results can be seen. */
  isReleased: boolean;
}

/** @throws AppError not-found when it is not published and whoever asks does not direct it */
export function loadProgramme(scope: Scope): Promise<ProgrammePage> {
  return withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    if (!tournament.isPublished && !canDirect(scope, tournament.id)) throw notFound();
    const [divisions, events, counts, release] = await Promise.all([
      listDivisions(tx, scope, tournament.id),
      listEvents(tx, scope, tournament.id),
      countsOf(tx, scope, tournament.id),
      getRelease(tx, scope, tournament.id, 'public'),
    ]);
    return { tournament, divisions, events, teams: Object.values(counts.confirmed).reduce((a, b) => a + b, 0), isReleased: release !== null };
  });
}
