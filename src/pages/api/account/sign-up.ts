import { signUp } from '~/features/accounts/commands/sign-up';
import { signUpInput } from '~/features/accounts/schema';
import { endpoint, isLocalPath } from '~/server/endpoint';
import { startedCookie } from '~/server/started';

/** Sign up. The answer is the same whether the address has an account or not. */
export const POST = endpoint({
  access: 'public',
  input: signUpInput,
  handler: async ({ input: { next, ...input }, clientAddress, headers }) => {
    const { codeId } = await signUp({ ...input, goesTo: isLocalPath(next) ? next : '' }, clientAddress);
    headers.append('set-cookie', startedCookie(codeId, input.email));
    return { goTo: '/check-mail' };
  },
});
