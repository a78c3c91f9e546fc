import { sql } from 'drizzle-orm';
import { deriveToken, hashToken } from '~/server/authentication';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { fieldError } from '~/server/errors';
import { newId } from '~/server/ids';
import { enqueue } from '~/server/jobs';
import { announce, orgTopic } from '~/server/live';
import { personOf, type Scope } from '~/server/scope';
import { countTry } from '../../accounts/queries';
import { writeAudit } from '../../audit/queries';
import { roleLabel } from '../assembly';
import { INVITATION_DAYS } from '../constants';
import { requireOffer } from '../policy';
import { findOpenInvitation, getInvitation, holdsAlready, membershipsOfAddress, resolvePlace } from '../queries';
import type { Invite } from '../schema';
import { invitations } from '../tables';

/**
 * Offer somebody a role by mail. Whether the address has an account is neither asked nor told.
 *
 * @throws AppError not-allowed, bad-input (no place, held already, offered already, suspended here), too-many
 */
export async function invitePerson(scope: Scope, input: Invite): Promise<{ id: string; label: string }> {
  await countTry('invitation:organization', scope.orgId, 'This office has sent very many invitations within the hour.');
  const id = newId();
  const label = await withScope(scope, async (tx) => {
    // The same offer made twice at once: the second waits here and then sees the first.
    await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`${scope.orgId}:${input.email.toLowerCase()}`}, 3))`);
    const place = await resolvePlace(tx, scope, input);
    requireOffer(scope, place);
    const held = await membershipsOfAddress(tx, scope, input.email);
    if (held.some((m) => m.state === 'suspended')) throw fieldError('email', 'This person is suspended here. An owner restores them first.');
    if (holdsAlready(held, place)) throw fieldError('email', 'This person has that role already.');
    if (await findOpenInvitation(tx, scope, input.email, place)) throw fieldError('email', 'This address is invited to that role already. Send that invitation again from the list.');
    const moment = now();
    await tx.insert(invitations).values({
      orgId: scope.orgId,
      id,
      email: input.email,
      ...place,
      tokenHash: hashToken(deriveToken('invitation', id)),
      invitedBy: personOf(scope),
      createdAt: moment,
      expiresAt: new Date(moment.getTime() + INVITATION_DAYS * 86_400_000),
    });
    const words = roleLabel(place.role, await getInvitation(tx, scope, id));
    await writeAudit(tx, scope, { action: 'invitation.sent', subjectType: 'invitation', subjectId: id, tournamentId: place.tournamentId, detail: { email: input.email, role: place.role, words } });
    await enqueue(tx, 'mail-invitation', { orgId: scope.orgId, invitationId: id });
    return words;
  });
  announce(orgTopic(scope.orgId));
  return { id, label };
}
