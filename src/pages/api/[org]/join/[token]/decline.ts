import { declineInvitation } from '~/features/organizations/commands/answer-invitation';
import { endpoint } from '~/server/endpoint';

/** Decline an invitation. */
export const POST = endpoint({
  access: 'person',
  handler: async ({ scope, person, params, org }) => {
    await declineInvitation(scope, person, params['token']!);
    return { goTo: '/account', message: `Declined. ${org.name} will see that.` };
  },
});
