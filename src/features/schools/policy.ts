import { holds, type Scope } from '~/server/scope';

/** The office keeps the directory of schools: owners, treasurers and any of its directors. */
export function canKeepSchools(scope: Scope): boolean {
  return holds(scope, 'owner') || holds(scope, 'treasurer') || holds(scope, 'director');
}

/** The schools a coach speaks for. */
export function schoolsOf(scope: Scope): string[] {
  return scope.grants.flatMap((g) => (g.role === 'coach' && g.schoolId ? [g.schoolId] : []));
}
