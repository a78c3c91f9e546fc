import { acceptInvitation } from '~/features/organizations/commands/answer-invitation';
import { endpoint } from '~/server/endpoint';

/** Accept an invitation; the link and the confirmed address together are the right. */
export const POST = endpoint({
  access: 'person',
  handler: async ({ scope, person, params, org }) => {
    const { goTo, label } = await acceptInvitation(scope, person, params['token']!);
    return { goTo, message: `Welcome to ${org.name}. Your role: ${label}.` };
  },
});
