import { requestReset } from '~/features/accounts/commands/request-reset';
import { addressInput } from '~/features/accounts/schema';
import { endpoint } from '~/server/endpoint';

/** Send a link to choose a new password; the answer is the same whether the address has an account or not. */
export const POST = endpoint({
  access: 'public',
  input: addressInput,
  handler: async ({ input, clientAddress }) => {
    await requestReset(input.email, clientAddress);
    return { goTo: '/reset?said=sent' };
  },
});
