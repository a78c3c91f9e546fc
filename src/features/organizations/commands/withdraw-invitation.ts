import { and, eq, isNull } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, orgTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { roleLabel } from '../assembly';
import { requireOffer } from '../policy';
import { getInvitation } from '../queries';
import { invitations } from '../tables';

/**
 * Withdraw an invitation that nobody has answered: its link stops working.
 *
 * @throws AppError not-found, not-allowed, out-of-order when it is answered or withdrawn already
 */
export async function withdrawInvitation(scope: Scope, id: string): Promise<void> {
  await withScope(scope, async (tx) => {
    const invitation = await getInvitation(tx, scope, id);
    requireOffer(scope, invitation);
    const gone = await tx
      .update(invitations)
      .set({ revokedAt: now() })
      .where(and(eq(invitations.orgId, scope.orgId), eq(invitations.id, id), isNull(invitations.acceptedAt), isNull(invitations.revokedAt)))
      .returning({ id: invitations.id });
    if (gone.length === 0) throw new AppError('out-of-order', 'This invitation is answered or withdrawn already.');
    await writeAudit(tx, scope, {
      action: 'invitation.withdrawn',
      subjectType: 'invitation',
      subjectId: id,
      tournamentId: invitation.tournamentId,
      detail: { email: invitation.email, role: invitation.role, words: roleLabel(invitation.role, invitation) },
    });
  });
  announce(orgTopic(scope.orgId));
}
