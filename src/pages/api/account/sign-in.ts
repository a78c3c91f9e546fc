import { signIn } from '~/features/accounts/commands/sign-in';
import { startSession } from '~/features/accounts/commands/start-session';
import { loadLanding } from '~/features/accounts/loaders';
import { signInInput } from '~/features/accounts/schema';
import { endpoint, isLocalPath } from '~/server/endpoint';
import { startedCookie } from '~/server/started';

/** Sign in: a session with a new id, whatever the browser had before. */
export const POST = endpoint({
  access: 'public',
  input: signInInput,
  handler: async ({ input: { next, ...input }, clientAddress, headers, visitor, request }) => {
    const goesTo = isLocalPath(next) ? next : '';
    const result = await signIn({ ...input, goesTo }, clientAddress);
    if (result.kind === 'unconfirmed') {
      headers.append('set-cookie', startedCookie(result.codeId, result.email));
      return { goTo: '/check-mail?said=unconfirmed' };
    }
    headers.append('set-cookie', await startSession(result.personId, { userAgent: request.headers.get('user-agent'), visitor }));
    return { goTo: goesTo || (await loadLanding(result.personId)) };
  },
});
