import { AppError } from '~/server/errors';
import { holds, type Scope } from '~/server/scope';
import { canDirect } from '../tournaments/policy';

/** The event's leaders, the tournament's directors and the owners set up and score an event. */
export function canLead(scope: Scope, event: { id: string; tournamentId: string }): boolean {
  return canDirect(scope, event.tournamentId) || holds(scope, 'leader', { tournamentId: event.tournamentId, eventId: event.id });
}

/** @throws AppError not-allowed */
export function requireLeader(scope: Scope, event: { id: string; tournamentId: string }): void {
  if (!canLead(scope, event)) throw new AppError('not-allowed', 'Only this event’s leader does this, or the tournament’s director.');
}
