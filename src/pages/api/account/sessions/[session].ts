import { endOneSession } from '~/features/accounts/commands/end-sessions';
import { endpoint } from '~/server/endpoint';

/** End one of the own sessions, named by its hash. */
export const POST = endpoint({
  access: 'person',
  handler: async ({ person, params }) => {
    await endOneSession(person, params['session']!);
    return { goTo: '/account', message: 'That session has ended.' };
  },
});
