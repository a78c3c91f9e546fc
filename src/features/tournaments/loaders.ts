import { withScope } from '~/server/database';
import type { Scope } from '~/server/scope';
import { loadNavigation } from './queries';
import type { TournamentNavigation } from './types';

/** What the tournament's rail shows: counts, and an event leader's own events. One query. */
export function loadTournamentNavigation(scope: Scope): Promise<TournamentNavigation> {
  return withScope(scope, (tx) => loadNavigation(tx, scope));
}
