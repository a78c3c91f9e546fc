import { resendVerification } from '~/features/accounts/commands/resend-verification';
import { addressInput } from '~/features/accounts/schema';
import { endpoint } from '~/server/endpoint';

/** Send the mail with the link again, if there is something to confirm; the answer is the same in any case. */
export const POST = endpoint({
  access: 'public',
  input: addressInput,
  handler: async ({ input, clientAddress }) => {
    await resendVerification(input.email, clientAddress);
    return { goTo: '/check-mail?said=again' };
  },
});
