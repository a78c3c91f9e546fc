import { and, eq } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { enqueue } from '~/server/jobs';
import type { Scope } from '~/server/scope';
import { countTry } from '../../accounts/queries';
import { writeAudit } from '../../audit/queries';
import { roleLabel } from '../assembly';
import { INVITATION_DAYS } from '../constants';
import { requireOffer } from '../policy';
import { getInvitation } from '../queries';
import { invitations } from '../tables';

/**
 * Send an invitation again; its days start anew, so one that has expired works again. The link stays the same.
 *
 * @throws AppError not-found, not-allowed, out-of-order when it is answered or withdrawn, too-many
 */
export async function resendInvitation(scope: Scope, id: string): Promise<{ email: string }> {
  await countTry('invitation:organization', scope.orgId, 'This office has sent very many invitations within the hour.');
  return withScope(scope, async (tx) => {
    const invitation = await getInvitation(tx, scope, id);
    requireOffer(scope, invitation);
    if (invitation.acceptedAt) throw new AppError('out-of-order', 'This invitation was accepted.');
    if (invitation.revokedAt) throw new AppError('out-of-order', 'This invitation was withdrawn or declined. Invite them anew.');
    await tx
      .update(invitations)
      .set({ expiresAt: new Date(now().getTime() + INVITATION_DAYS * 86_400_000) })
      .where(and(eq(invitations.orgId, scope.orgId), eq(invitations.id, id)));
    await writeAudit(tx, scope, {
      action: 'invitation.resent',
      subjectType: 'invitation',
      subjectId: id,
      tournamentId: invitation.tournamentId,
      detail: { email: invitation.email, role: invitation.role, words: roleLabel(invitation.role, invitation) },
    });
    await enqueue(tx, 'mail-invitation', { orgId: scope.orgId, invitationId: id });
    return { email: invitation.email };
  });
}
