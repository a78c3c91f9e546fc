import { withScope } from '~/server/database';
import type { Scope } from '~/server/scope';
import { listSchools } from '../schools/queries';
import type { SchoolRow } from '../schools/types';
import { requireDirector } from '../tournaments/policy';
import { listDivisions } from '../tournaments/queries';
import type { DivisionRow } from '../tournaments/types';
import { getTeamInScope, listTeams } from './queries';
import type { TeamRow } from './types';

/** The teams of a tournament, its divisions, and the schools that may enter. */
export interface EntriesPage {
  divisions: DivisionRow[];
  teams: TeamRow[];
  schools: SchoolRow[];
}

/** @throws AppError not-allowed */
export function loadEntries(scope: Scope): Promise<EntriesPage> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const [divisions, teams, schools] = await Promise.all([
      listDivisions(tx, scope, scope.tournamentId!),
      listTeams(tx, scope, { tournamentId: scope.tournamentId!, states: ['waiting', 'confirmed', 'withdrawn'] }),
      listSchools(tx, scope),
    ]);
    return { divisions, teams, schools };
  });
}

/** One team and its division. @throws AppError not-found, not-allowed */
export function loadTeam(scope: Scope, teamId: string): Promise<{ team: TeamRow; division: DivisionRow }> {
  requireDirector(scope, scope.tournamentId);
  return withScope(scope, async (tx) => {
    const [team, divisions] = await Promise.all([getTeamInScope(tx, scope, teamId), listDivisions(tx, scope, scope.tournamentId!)]);
    return { team, division: divisions.find((d) => d.id === team.divisionId)! };
  });
}
