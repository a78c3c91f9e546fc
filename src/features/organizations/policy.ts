import { AppError } from '~/server/errors';
import { holds, type Role, type Scope } from '~/server/scope';

/** A role and where it is held or offered. */
export interface Offer {
  role: Role;
  tournamentId: string | null;
}

/** Owners see everybody; a director sees whom they work with. */
export function canSeePeople(scope: Scope): boolean {
  return holds(scope, 'owner') || holds(scope, 'director');
}

/** The tournaments somebody directs; null stands for all of them. */
export function directedTournaments(scope: Scope): string[] | null {
  if (holds(scope, 'owner')) return null;
  return scope.grants.flatMap((g) => (g.role === 'director' && g.tournamentId ? [g.tournamentId] : []));
}

/**
 * Who may offer a role, send the offer again or withdraw it. Owners offer every role. A director staffs the own tournament (event
 * leaders and volunteers) and may bring coaches in, because schools enter through the director; never a role as high as the own.
 */
export function canOffer(scope: Scope, offer: Offer): boolean {
  if (holds(scope, 'owner')) return true;
  if (offer.role === 'coach') return holds(scope, 'director');
  return (offer.role === 'leader' || offer.role === 'volunteer') && offer.tournamentId !== null && holds(scope, 'director', { tournamentId: offer.tournamentId });
}

/** Who may take a role away or change it: as with offering, but a coach speaks for a school in every tournament, so only owners end that. */
export function canTake(scope: Scope, offer: Offer): boolean {
  return offer.role === 'coach' ? holds(scope, 'owner') : canOffer(scope, offer);
}

/** @throws AppError not-allowed */
export function requireOffer(scope: Scope, offer: Offer): void {
  if (!canOffer(scope, offer)) {
    throw new AppError('not-allowed', 'Directors invite event leaders and volunteers to their own tournament, and coaches. An owner invites everybody else.');
  }
}

/** @throws AppError not-allowed */
export function requireTake(scope: Scope, offer: Offer): void {
  if (!canTake(scope, offer)) throw new AppError('not-allowed', 'An owner of the organization changes this role.');
}

/** @throws AppError not-allowed */
export function requireOwner(scope: Scope): void {
  if (!holds(scope, 'owner')) throw new AppError('not-allowed', 'Only an owner of the organization does this.');
}
