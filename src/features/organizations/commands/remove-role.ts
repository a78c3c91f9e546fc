import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { announce, orgTopic, tournamentTopic } from '~/server/live';
import { holds, type Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { roleLabel } from '../assembly';
import { requireTake } from '../policy';
import { getMembership, lockAsOwner, requireAnotherOwner } from '../queries';
import { memberships } from '../tables';

/**
 * Take one role away from somebody; what they did in it stays.
 *
 * @throws AppError not-found, not-allowed, out-of-order for the last owner
 */
export async function removeRole(scope: Scope, personId: string, membershipId: string): Promise<{ label: string }> {
  const { label, tournamentId } = await withScope(scope, async (tx) => {
    if (holds(scope, 'owner')) await lockAsOwner(tx, scope);
    const before = await getMembership(tx, scope, personId, membershipId);
    requireTake(scope, before);
    if (before.role === 'owner' && before.state === 'active') await requireAnotherOwner(tx, scope, personId);
    await tx.delete(memberships).where(and(eq(memberships.orgId, scope.orgId), eq(memberships.id, membershipId)));
    const words = roleLabel(before.role, before);
    await writeAudit(tx, scope, { action: 'role.removed', subjectType: 'person', subjectId: personId, tournamentId: before.tournamentId, detail: { name: before.name, before: words } });
    return { label: words, tournamentId: before.tournamentId };
  });
  announce(orgTopic(scope.orgId));
  if (tournamentId) announce(tournamentTopic(scope.orgId, tournamentId));
  return { label };
}
