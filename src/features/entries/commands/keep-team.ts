import { and, eq, max } from 'drizzle-orm';
import { sql } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { fieldError, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { getSchoolInScope } from '../../schools/queries';
import { requireDirector } from '../../tournaments/policy';
import { getDivisionInScope, getTournament } from '../../tournaments/queries';
import { getTeamInScope } from '../queries';
import type { TeamInput } from '../schema';
import { teams } from '../tables';

function numberTaken(error: unknown): unknown {
  return uniqueViolation(error) === 'teams_number_key' ? fieldError('number', 'Another team of this division has this number.') : error;
}

/**
 * Enter a team in a division of the scope's tournament. Without a number it gets the next free one;
 * two teams entered at once get different ones.
 *
 * @throws AppError not-allowed, not-found, bad-input when the number is taken
 */
export async function addTeam(scope: Scope, input: TeamInput): Promise<{ id: string; number: number }> {
  requireDirector(scope, scope.tournamentId);
  const id = newId();
  let number = input.number ?? 0;
  try {
    await withScope(scope, async (tx) => {
      const tournament = await getTournament(tx, scope);
      const division = await getDivisionInScope(tx, scope, tournament.id, input.divisionId);
      await getSchoolInScope(tx, scope, input.schoolId);
      if (input.number == null) {
        await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${division.id}::text, 3))`);
        const [row] = await tx
          .select({ most: max(teams.number) })
          .from(teams)
          .where(and(eq(teams.orgId, scope.orgId), eq(teams.divisionId, division.id)));
        number = (row?.most ?? 0) + 1;
      }
      await tx.insert(teams).values({
        orgId: scope.orgId,
        id,
        tournamentId: tournament.id,
        divisionId: division.id,
        schoolId: input.schoolId,
        number,
        name: input.name,
        state: 'confirmed',
        createdAt: now(),
      });
      await writeAudit(tx, scope, { action: 'team.entered', subjectType: 'team', subjectId: id, tournamentId: tournament.id, detail: { name: input.name, number, division: division.name } });
    });
  } catch (error) {
    throw numberTaken(error);
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
  return { id, number };
}

/** Rename a team or give it another number. @throws AppError not-allowed, not-found, bad-input */
export async function changeTeam(scope: Scope, teamId: string, input: { name: string; number: number }): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  try {
    await withScope(scope, async (tx) => {
      const before = await getTeamInScope(tx, scope, teamId);
      await tx
        .update(teams)
        .set(input)
        .where(and(eq(teams.orgId, scope.orgId), eq(teams.id, teamId)));
      await writeAudit(tx, scope, {
        action: 'team.changed',
        subjectType: 'team',
        subjectId: teamId,
        tournamentId: scope.tournamentId,
        detail: { before: { name: before.name, number: before.number }, after: input },
      });
    });
  } catch (error) {
    throw numberTaken(error);
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}
