import { resendInvitation } from '~/features/organizations/commands/resend-invitation';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Send an invitation again. */
export const POST = endpoint({
  access: only('director'),
  handler: async ({ scope, org, params }) => {
    if (!isId(params['invitation'])) throw notFound();
    const { email } = await resendInvitation(scope, params['invitation']);
    return { goTo: `/${org.slug}/office/people`, message: `Sent again to ${email}.` };
  },
});
