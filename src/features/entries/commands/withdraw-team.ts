import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireDirector } from '../../tournaments/policy';
import { getTeamInScope } from '../queries';
import { teams } from '../tables';

async function setState(scope: Scope, teamId: string, state: 'confirmed' | 'withdrawn'): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  await withScope(scope, async (tx) => {
    const before = await getTeamInScope(tx, scope, teamId);
    if (before.state === state) throw new AppError('out-of-order', state === 'withdrawn' ? `${before.name} is withdrawn already.` : `${before.name} is in already.`);
    await tx
      .update(teams)
      .set({ state })
      .where(and(eq(teams.orgId, scope.orgId), eq(teams.id, teamId)));
    await writeAudit(tx, scope, {
      action: state === 'withdrawn' ? 'team.withdrawn' : 'team.restored',
      subjectType: 'team',
      subjectId: teamId,
      tournamentId: scope.tournamentId,
      detail: { name: before.name, number: before.number },
    });
  });
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}

/** Take a team out of the field; what was kept of it stays, and counts nowhere. @throws AppError */
export function withdrawTeam(scope: Scope, teamId: string): Promise<void> {
  return setState(scope, teamId, 'withdrawn');
}

/** Bring a withdrawn team back, with all that was kept of it. @throws AppError */
export function restoreTeam(scope: Scope, teamId: string): Promise<void> {
  return setState(scope, teamId, 'confirmed');
}
