import { endThisSession } from '~/features/accounts/commands/end-sessions';
import { signOutInput } from '~/features/accounts/schema';
import { endpoint, isLocalPath } from '~/server/endpoint';

/** End this session. Whoever is signed out already is answered the same. */
export const POST = endpoint({
  access: 'public',
  input: signOutInput,
  handler: async ({ input, visitor, headers }) => {
    headers.append('set-cookie', await endThisSession(visitor));
    return { goTo: isLocalPath(input.next) ? input.next : '/' };
  },
});
