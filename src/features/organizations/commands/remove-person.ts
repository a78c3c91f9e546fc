import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { notFound } from '~/server/errors';
import { announce, orgTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { roleLabel } from '../assembly';
import { requireOwner } from '../policy';
import { lockAsOwner, membershipsOf, requireAnotherOwner, withdrawAllFor } from '../queries';
import { memberships } from '../tables';

/**
 * Take somebody out of the organization: all their roles end, and what is still offered to them is withdrawn, so that no link
 * lets them back in. Their account and what they did stay.
 *
 * @throws AppError not-allowed (owners only), not-found, out-of-order for the last owner
 */
export async function removePerson(scope: Scope, personId: string): Promise<{ name: string }> {
  requireOwner(scope);
  const name = await withScope(scope, async (tx) => {
    await lockAsOwner(tx, scope);
    const held = await membershipsOf(tx, scope, personId);
    if (held.length === 0) throw notFound();
    if (held.some((m) => m.role === 'owner' && m.state === 'active')) await requireAnotherOwner(tx, scope, personId);
    await tx.delete(memberships).where(and(eq(memberships.orgId, scope.orgId), eq(memberships.personId, personId)));
    const offers = await withdrawAllFor(tx, scope, held[0]!.email);
    await writeAudit(tx, scope, {
      action: 'person.removed',
      subjectType: 'person',
      subjectId: personId,
      detail: { name: held[0]!.name, roles: held.map((m) => roleLabel(m.role, m)), withdrawnInvitations: offers },
    });
    return held[0]!.name;
  });
  announce(orgTopic(scope.orgId));
  return { name };
}
