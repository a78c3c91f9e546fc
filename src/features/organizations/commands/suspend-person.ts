import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { AppError, notFound } from '~/server/errors';
import { announce, orgTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireOwner } from '../policy';
import { lockAsOwner, membershipsOf, requireAnotherOwner } from '../queries';
import { memberships } from '../tables';

async function setState(scope: Scope, personId: string, state: 'active' | 'suspended'): Promise<{ name: string }> {
  requireOwner(scope);
  if (state === 'suspended' && personId === scope.actor.personId) throw new AppError('out-of-order', 'You can’t suspend yourself. Another owner can.');
  const name = await withScope(scope, async (tx) => {
    await lockAsOwner(tx, scope);
    const held = await membershipsOf(tx, scope, personId);
    if (held.length === 0) throw notFound();
    if (held.every((m) => m.state === state)) throw new AppError('out-of-order', state === 'suspended' ? 'They are suspended already.' : 'They are not suspended.');
    if (state === 'suspended' && held.some((m) => m.role === 'owner')) await requireAnotherOwner(tx, scope, personId);
    await tx
      .update(memberships)
      .set({ state })
      .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.personId, personId)));
    await writeAudit(tx, scope, { action: state === 'suspended' ? 'person.suspended' : 'person.restored', subjectType: 'person', subjectId: personId, detail: { name: held[0]!.name } });
    return held[0]!.name;
  });
  announce(orgTopic(scope.orgId));
  return { name };
}

/**
 * Stop somebody's roles for the time being: nothing here is theirs to see or do until they are restored.
 *
 * @throws AppError not-allowed (owners only), not-found, out-of-order (yourself, the last owner, suspended already)
 */
export function suspendPerson(scope: Scope, personId: string): Promise<{ name: string }> {
  return setState(scope, personId, 'suspended');
}

/** Give a suspended person their roles back. @throws AppError not-allowed (owners only), not-found, out-of-order */
export function restorePerson(scope: Scope, personId: string): Promise<{ name: string }> {
  return setState(scope, personId, 'active');
}
