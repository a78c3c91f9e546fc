import { and, eq } from 'drizzle-orm';
import { hashToken } from '~/server/authentication';
import { now } from '~/server/clock';
import { withScope, type Tx } from '~/server/database';
import { AppError, notFound } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, orgTopic, tournamentTopic } from '~/server/live';
import type { SignedIn } from '~/server/request-scope';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { roleLabel, workPath } from '../assembly';
import { findInvitation, membershipsOf } from '../queries';
import { invitations, memberships } from '../tables';
import type { InvitationRow } from '../types';

/** The invitation of the link, which nobody else can answer until this transaction ends. */
async function takeOpen(tx: Tx, scope: Scope, person: SignedIn, token: string): Promise<InvitationRow> {
  const hash = hashToken(token);
  await tx
    .select({ id: invitations.id })
    .from(invitations)
    .where(and(eq(invitations.orgId, scope.orgId), eq(invitations.tokenHash, hash)))
    .for('update');
  const invitation = await findInvitation(tx, scope, hash);
  if (!invitation) throw notFound('This link leads to no invitation.');
  if (!person.emailVerified || invitation.email.toLowerCase() !== person.email.toLowerCase()) {
    throw new AppError('not-allowed', `This invitation was sent to another address than ${person.email}. Sign in with the address that it was sent to.`);
  }
  if (invitation.acceptedAt) throw new AppError('out-of-order', 'This invitation was accepted already.');
  if (invitation.revokedAt) throw new AppError('out-of-order', 'This invitation was withdrawn. Ask whoever invited you.');
  if (invitation.expiresAt <= now()) throw new AppError('out-of-order', 'This invitation has expired. Ask whoever invited you to send it again.');
  return invitation;
}

/**
 * Accept the invitation of a link: the role begins. Only the confirmed address that it was sent to may.
 *
 * @returns where the role's work is done, and the role in words
 * @throws AppError not-found, not-allowed (another address; suspended here), out-of-order (accepted, withdrawn, expired)
 */
export async function acceptInvitation(scope: Scope, person: SignedIn, token: string): Promise<{ goTo: string; label: string }> {
  const result = await withScope(scope, async (tx) => {
    const invitation = await takeOpen(tx, scope, person, token);
    const held = await membershipsOf(tx, scope, person.personId);
    // Otherwise an invitation that is still about would undo an owner's suspension.
    if (held.some((m) => m.state === 'suspended')) throw new AppError('not-allowed', 'You are suspended here just now. An owner of the organization can change that.');
    const { role, tournamentId, eventId, schoolId } = invitation;
    await tx.insert(memberships).values({ orgId: scope.orgId, id: newId(), personId: person.personId, role, tournamentId, eventId, schoolId, createdAt: now() }).onConflictDoNothing();
    await tx
      .update(invitations)
      .set({ acceptedAt: now(), acceptedBy: person.personId })
      .where(and(eq(invitations.orgId, scope.orgId), eq(invitations.id, invitation.id)));
    const label = roleLabel(role, invitation);
    await writeAudit(tx, scope, { action: 'invitation.accepted', subjectType: 'invitation', subjectId: invitation.id, tournamentId, detail: { email: invitation.email, role, words: label } });
    return { goTo: workPath(scope.orgSlug, role, invitation), label, tournamentId };
  });
  announce(orgTopic(scope.orgId));
  if (result.tournamentId) announce(tournamentTopic(scope.orgId, result.tournamentId));
  return { goTo: result.goTo, label: result.label };
}

/**
 * Decline the invitation of a link; the office sees that it was declined.
 *
 * @throws AppError as {@link acceptInvitation}
 */
export async function declineInvitation(scope: Scope, person: SignedIn, token: string): Promise<void> {
  await withScope(scope, async (tx) => {
    const invitation = await takeOpen(tx, scope, person, token);
    await tx
      .update(invitations)
      .set({ revokedAt: now() })
      .where(and(eq(invitations.orgId, scope.orgId), eq(invitations.id, invitation.id)));
    await writeAudit(tx, scope, {
      action: 'invitation.declined',
      subjectType: 'invitation',
      subjectId: invitation.id,
      tournamentId: invitation.tournamentId,
      detail: { email: invitation.email, role: invitation.role, words: roleLabel(invitation.role, invitation) },
    });
  });
  announce(orgTopic(scope.orgId));
}
