import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { fieldError, uniqueViolation } from '~/server/errors';
import { announce, orgTopic, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { roleLabel } from '../assembly';
import { requireOwner } from '../policy';
import { getMembership, lockAsOwner, requireAnotherOwner, resolvePlace } from '../queries';
import type { RoleInput } from '../schema';
import { memberships } from '../tables';

/**
 * Turn one role of somebody into another, or move it to another place.
 *
 * @throws AppError not-allowed (owners only), not-found, bad-input (no place, held already), out-of-order for the last owner
 */
export async function changeRole(scope: Scope, personId: string, membershipId: string, input: RoleInput): Promise<{ label: string }> {
  requireOwner(scope);
  try {
    const result = await withScope(scope, async (tx) => {
      await lockAsOwner(tx, scope);
      const before = await getMembership(tx, scope, personId, membershipId);
      const place = await resolvePlace(tx, scope, input);
      if (before.role === 'owner' && place.role !== 'owner') await requireAnotherOwner(tx, scope, personId);
      await tx
        .update(memberships)
        .set(place)
        .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.id, membershipId)));
      const after = await getMembership(tx, scope, personId, membershipId);
      const label = roleLabel(after.role, after);
      await writeAudit(tx, scope, {
        action: 'role.changed',
        subjectType: 'person',
        subjectId: personId,
        tournamentId: after.tournamentId ?? before.tournamentId,
        detail: { name: before.name, before: roleLabel(before.role, before), after: label },
      });
      return { label, touched: [before.tournamentId, after.tournamentId] };
    });
    announce(orgTopic(scope.orgId));
    for (const id of result.touched) if (id) announce(tournamentTopic(scope.orgId, id));
    return { label: result.label };
  } catch (error) {
    if (uniqueViolation(error) === 'memberships_grant_key') throw fieldError('role', 'This person has that role already.');
    throw error;
  }
}
