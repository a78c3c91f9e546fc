import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { teams } from '../../entries/tables';
import { events } from '../../events/tables';
import { requireDirector } from '../policy';
import { getDivisionInScope, getTournament } from '../queries';
import type { DivisionInput } from '../schema';
import { divisions } from '../tables';
import { divisionProblem } from './add-division';

/**
 * Rename a division or change its mark. Its address stays as it is, so that printed links go on working.
 *
 * @throws AppError not-allowed, not-found, bad-input
 */
export async function changeDivision(scope: Scope, divisionId: string, input: DivisionInput): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  try {
    await withScope(scope, async (tx) => {
      const tournament = await getTournament(tx, scope);
      const before = await getDivisionInScope(tx, scope, tournament.id, divisionId);
      await tx
        .update(divisions)
        .set(input)
        .where(and(eq(divisions.orgId, scope.orgId), eq(divisions.id, before.id)));
      await writeAudit(tx, scope, { action: 'division.changed', subjectType: 'division', subjectId: before.id, tournamentId: tournament.id, detail: { before, after: input } });
    });
  } catch (error) {
    throw divisionProblem(error);
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}

/**
 * Remove a division that has neither teams nor events.
 *
 * @throws AppError not-allowed, not-found, conflict when it is not empty
 */
export async function removeDivision(scope: Scope, divisionId: string): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  await withScope(scope, async (tx) => {
    const tournament = await getTournament(tx, scope);
    const division = await getDivisionInScope(tx, scope, tournament.id, divisionId);
    const [team] = await tx.select({ id: teams.id }).from(teams).where(and(eq(teams.orgId, scope.orgId), eq(teams.divisionId, division.id))).limit(1);
    const [event] = await tx.select({ id: events.id }).from(events).where(and(eq(events.orgId, scope.orgId), eq(events.divisionId, division.id))).limit(1);
    if (team || event) throw new AppError('conflict', `${division.name} has ${team ? 'teams' : 'events'}: remove those first.`);
    await tx.delete(divisions).where(and(eq(divisions.orgId, scope.orgId), eq(divisions.id, division.id)));
    await writeAudit(tx, scope, { action: 'division.removed', subjectType: 'division', subjectId: division.id, tournamentId: tournament.id, detail: { name: division.name } });
  });
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}
