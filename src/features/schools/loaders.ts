import { withScope } from '~/server/database';
import type { Scope } from '~/server/scope';
import { listSchools } from './queries';
import type { SchoolRow } from './types';

/** The office's directory of schools. */
export function loadSchools(scope: Scope): Promise<SchoolRow[]> {
  return withScope(scope, (tx) => listSchools(tx, scope));
}
