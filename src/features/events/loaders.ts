import { withScope } from '~/server/database';
import type { Scope } from '~/server/scope';
import { requireDirector } from '../tournaments/policy';
import { listDivisions } from '../tournaments/queries';
import type { DivisionRow } from '../tournaments/types';
import { getEventBySlug, listEvents, listMembers } from './queries';
import type { EventRow } from './types';

/** Every event of the tournament and the divisions it can be put in. @throws AppError not-allowed */
export function loadEvents(scope: Scope): Promise<{ events: EventRow[]; divisions: DivisionRow[] }> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const [events, divisions] = await Promise.all([listEvents(tx, scope, scope.tournamentId!), listDivisions(tx, scope, scope.tournamentId!)]);
    return { events, divisions };
  });
}

/** One event, and who in the organization could lead it. @throws AppError not-found, not-allowed */
export function loadEventEdit(scope: Scope, slug: string): Promise<{ event: EventRow; people: { personId: string; name: string }[] }> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const [event, members] = await Promise.all([getEventBySlug(tx, scope, slug), listMembers(tx, scope)]);
    const leading = new Set(event.leaders.map((l) => l.personId));
    return { event, people: members.filter((m) => !leading.has(m.personId)) };
  });
}
