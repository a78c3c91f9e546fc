import { resetPassword } from '~/features/accounts/commands/reset-password';
import { startSession } from '~/features/accounts/commands/start-session';
import { loadLanding } from '~/features/accounts/loaders';
import { resetInput } from '~/features/accounts/schema';
import { endpoint } from '~/server/endpoint';
import { clearedStartedCookie } from '~/server/started';

/** Set a new password. Every session has ended; here a new one begins. */
export const POST = endpoint({
  access: 'public',
  input: resetInput,
  handler: async ({ params, input, clientAddress, headers, request, visitor }) => {
    const { personId } = await resetPassword(params['code']!, input.password, clientAddress);
    headers.append('set-cookie', await startSession(personId, { userAgent: request.headers.get('user-agent'), visitor }));
    headers.append('set-cookie', clearedStartedCookie());
    return { goTo: await loadLanding(personId), message: 'Your new password is kept. You are signed in here and nowhere else.' };
  },
});
