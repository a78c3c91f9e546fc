import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { schools } from '../schools/tables';
import { teams } from './tables';
import type { TeamRow } from './types';

/** Teams of the tournament by number; by default those that compete. */
export async function listTeams(
  tx: Tx,
  scope: Scope,
  where: { tournamentId: string; divisionId?: string; schoolIds?: string[]; states?: TeamRow['state'][] },
): Promise<TeamRow[]> {
  return tx
    .select({
      id: teams.id,
      divisionId: teams.divisionId,
      schoolId: teams.schoolId,
      schoolName: schools.name,
      number: teams.number,
      name: teams.name,
      state: teams.state,
    })
    .from(teams)
    .innerJoin(schools, and(eq(schools.orgId, teams.orgId), eq(schools.id, teams.schoolId)))
    .where(
      and(
        eq(teams.orgId, scope.orgId),
        eq(teams.tournamentId, where.tournamentId),
        where.divisionId ? eq(teams.divisionId, where.divisionId) : undefined,
        where.schoolIds ? inArray(teams.schoolId, where.schoolIds) : undefined,
        inArray(teams.state, where.states ?? ['confirmed']),
      ),
    )
    .orderBy(asc(teams.divisionId), asc(teams.number));
}

/** A team by id in the scope's tournament; missing and foreign look alike. @throws AppError not-found */
export async function getTeamInScope(tx: Tx, scope: Scope, id: string): Promise<TeamRow> {
  const all = scope.tournamentId
    ? await tx
        .select({ id: teams.id, divisionId: teams.divisionId, schoolId: teams.schoolId, schoolName: schools.name, number: teams.number, name: teams.name, state: teams.state })
        .from(teams)
        .innerJoin(schools, and(eq(schools.orgId, teams.orgId), eq(schools.id, teams.schoolId)))
        .where(and(eq(teams.orgId, scope.orgId), eq(teams.tournamentId, scope.tournamentId), eq(teams.id, id)))
    : [];
  if (!all[0]) throw notFound();
  return all[0];
}
