import { dayOf, formatDay } from '~/domain/time';
import { deriveToken } from '~/server/authentication';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { environment } from '~/server/environment';
import { AppError } from '~/server/errors';
import { jobScope, type Handlers } from '~/server/jobs';
import { sendMail } from '~/server/mail';
import { roleLabel } from './assembly';
import { Invitation, invitationSubject } from './emails/invitation';
import { getInvitation, getOrganization } from './queries';

/**
 * The organizations' mails. An invitation that was answered, withdrawn or has passed sends nothing; the job's id in the key
 * lets an invitation be sent again on purpose, and never twice by a job that is tried again.
 */
export const ORGANIZATION_JOBS: Pick<Handlers, 'mail-invitation'> = {
  async 'mail-invitation'({ orgId, invitationId }, jobId) {
    const found = await withScope(jobScope(orgId), async (tx) => ({
      org: await getOrganization(tx, jobScope(orgId)),
      invitation: await getInvitation(tx, jobScope(orgId), invitationId),
    })).catch((error: unknown) => {
      // Its event was removed in the meantime, and the invitation with it.
      if (error instanceof AppError && error.code === 'not-found') return null;
      throw error;
    });
    if (!found) return;
    const { org, invitation } = found;
    if (invitation.acceptedAt || invitation.revokedAt || invitation.expiresAt <= now()) return;
    await sendMail(
      `invitation/${invitation.id}/${jobId}`,
      invitation.email,
      invitationSubject(org.name),
      Invitation({
        organization: org.name,
        invitedBy: invitation.invitedBy,
        role: roleLabel(invitation.role, invitation),
        href: `${environment().PUBLIC_URL}/${org.slug}/join/${deriveToken('invitation', invitation.id)}`,
        until: formatDay(dayOf(invitation.expiresAt, org.timeZone)),
      }),
    );
  },
};
