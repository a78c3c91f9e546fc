import { verifyAddress } from '~/features/accounts/commands/verify-address';
import { startSession } from '~/features/accounts/commands/start-session';
import { loadLanding } from '~/features/accounts/loaders';
import { verifyInput } from '~/features/accounts/schema';
import { endpoint } from '~/server/endpoint';
import { clearedStartedCookie, readStarted } from '~/server/started';

/** Confirm an address. Whoever signed up here, or knows the password, is signed in by it. */
export const POST = endpoint({
  access: 'public',
  input: verifyInput,
  handler: async ({ params, input, request, clientAddress, headers, visitor }) => {
    const started = readStarted(request.headers.get('cookie'));
    const { personId, goesTo, changed } = await verifyAddress(params['code']!, { startedCodeId: started?.codeId ?? null, password: input.password }, clientAddress);
    headers.append('set-cookie', clearedStartedCookie());
    if (changed) {
      // The link proves the address, not who opens it.
      return visitor?.personId === personId ? { goTo: '/account', message: 'Your address is changed.' } : { goTo: '/sign-in?said=changed' };
    }
    headers.append('set-cookie', await startSession(personId, { userAgent: request.headers.get('user-agent'), visitor }));
    return { goTo: goesTo || (await loadLanding(personId)), message: 'Your address is confirmed.' };
  },
});
