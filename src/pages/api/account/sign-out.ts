import { endThisSession } from '~/features/accounts/commands/end-sessions';
import { endpoint } from '~/server/endpoint';

/** End this session. Whoever is signed out already is answered the same. */
export const POST = endpoint({
  access: 'public',
  handler: async ({ visitor, headers }) => {
    headers.append('set-cookie', await endThisSession(visitor));
    return { goTo: '/' };
  },
});
