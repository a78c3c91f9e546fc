import { AppError, notFound } from './errors';
import type { OrgInfo, SignedIn, TournamentInfo } from './request-scope';
import { holds, type Role, type Scope } from './scope';

/**
 * Who may come in, declared by every page, endpoint and stream:
 * - `public`: anybody;
 * - `person`: anybody signed in, with a verified address;
 * - `operator`: who runs the service;
 * - `signed`: the signature in the request is the right (webhooks, feeds, expiring links);
 * - a role rule: somebody who holds one of the roles in the organization, and in the tournament where the address names one.
 */
export type Access = 'public' | 'person' | 'operator' | 'signed' | RoleRule;

export interface RoleRule {
  readonly roles: readonly Role[];
}

/** A role rule. Owners are always let in. */
export function only(...roles: Role[]): RoleRule {
  return { roles };
}

/** Anyone whose work is inside the organization: everybody but coaches. */
export const STAFF: RoleRule = only('owner', 'treasurer', 'director', 'leader', 'volunteer');

export interface Visitor {
  person: SignedIn | null;
  org: OrgInfo | null;
  tournament: TournamentInfo | null;
  scope: Scope | null;
}

/**
 * Let in or refuse.
 *
 * @throws AppError signed-out, not-allowed, suspended, or not-found (the same for what is missing and for what is another organization's).
 */
export function admit(access: Access, visitor: Visitor, names: { org: boolean; tournament: boolean }): void {
  if (names.org && !visitor.org) throw access === 'public' || visitor.person ? notFound() : new AppError('signed-out', 'Sign in to go on.');
  if (visitor.org?.isSuspended && access !== 'signed') throw new AppError('suspended', 'This organization is suspended just now. Its data is kept.');
  if (access === 'public' || access === 'signed') {
    if (names.tournament && !visitor.tournament) throw notFound();
    return;
  }
  if (!visitor.person) throw new AppError('signed-out', 'Sign in to go on.');
  if (!visitor.person.emailVerified) throw new AppError('signed-out', 'Confirm your e-mail address first: the link is in your mail.');
  if (access === 'person') return;
  if (access === 'operator') {
    if (!visitor.person.isOperator) throw notFound();
    return;
  }
  const scope = visitor.scope;
  // Somebody with nothing in this organization learns nothing about what is in it.
  if (!scope || scope.grants.length === 0) throw notFound();
  if (names.tournament && !visitor.tournament) throw notFound();
  const place = { tournamentId: visitor.tournament?.id ?? null };
  if (holds(scope, 'owner') || access.roles.some((role) => holds(scope, role, place))) return;
  throw new AppError('not-allowed', 'Your role here doesn’t include this. The owner of the organization can change that.');
}
