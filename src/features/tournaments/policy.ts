import { AppError } from '~/server/errors';
import { holds, type Scope } from '~/server/scope';

/** Owners and the tournament's directors run it. */
export function canDirect(scope: Scope, tournamentId: string | null): boolean {
  return holds(scope, 'owner') || (tournamentId !== null && holds(scope, 'director', { tournamentId }));
}

/** @throws AppError not-allowed */
export function requireDirector(scope: Scope, tournamentId: string | null): void {
  if (!canDirect(scope, tournamentId)) throw new AppError('not-allowed', 'Only the tournament’s director or an owner does this.');
}

/** Anybody with work to do in the tournament: may see its staff pages' common parts. */
export function isStaff(scope: Scope, tournamentId: string | null): boolean {
  return scope.grants.some((g) => g.role === 'owner' || g.role === 'treasurer' || (g.role !== 'coach' && (g.tournamentId === null || g.tournamentId === tournamentId)));
}
