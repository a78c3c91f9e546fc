/** The roles of product life; see the table of people. */
export const ROLES = ['owner', 'treasurer', 'director', 'leader', 'volunteer', 'coach'] as const;
export type Role = (typeof ROLES)[number];

/** One role a person holds, and where: a director's tournament, a leader's event, a coach's school. */
export interface Grant {
  role: Role;
  tournamentId: string | null;
  eventId: string | null;
  schoolId: string | null;
}

declare const scopeBrand: unique symbol;

/** Who acts: a person, the public, or the service's own job. */
export interface Actor {
  kind: 'person' | 'public' | 'job';
  personId: string | null;
  name: string;
}

/**
 * What a request may see: one organization, one actor, the roles it holds there, and the tournament
 * named in the address. Made only by the middleware, the job runner and the public gate
 * (`makeScope` may be imported nowhere else; the linter sees to it).
 */
export interface Scope {
  readonly [scopeBrand]: true;
  readonly orgId: string;
  readonly orgSlug: string;
  readonly actor: Actor;
  readonly grants: readonly Grant[];
  readonly tournamentId: string | null;
}

/** Brand a scope. Middleware, job runner, public gate and the demo's seed only. */
export function makeScope(plain: Omit<Scope, typeof scopeBrand>): Scope {
  return plain as Scope;
}

/** True when the scope's actor holds the role, in that place where a place is given. Owners hold every office role. */
export function holds(
  scope: Scope,
  role: Role,
  place: { tournamentId?: string | null; eventId?: string | null; schoolId?: string | null } = {},
): boolean {
  return scope.grants.some(
    (g) =>
      g.role === role &&
      (place.tournamentId == null || g.tournamentId == null || g.tournamentId === place.tournamentId) &&
      (place.eventId == null || g.eventId == null || g.eventId === place.eventId) &&
      (place.schoolId == null || g.schoolId == null || g.schoolId === place.schoolId),
  );
}

/** The person who acts. @throws Error when the public acts: a command that needs a person was reached without one. */
export function personOf(scope: Scope): string {
  if (scope.actor.personId === null) throw new Error('this command needs a person');
  return scope.actor.personId;
}
