import { withdrawInvitation } from '~/features/organizations/commands/withdraw-invitation';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Withdraw an invitation. */
export const POST = endpoint({
  access: only('director'),
  handler: async ({ scope, org, params }) => {
    if (!isId(params['invitation'])) throw notFound();
    await withdrawInvitation(scope, params['invitation']);
    return { goTo: `/${org.slug}/office/people`, message: 'Withdrawn: the link no longer works.' };
  },
});
