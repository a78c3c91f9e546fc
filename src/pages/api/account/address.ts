import { changeAddress } from '~/features/accounts/commands/change-address';
import { changeAddressInput } from '~/features/accounts/schema';
import { endpoint } from '~/server/endpoint';

/** Ask for another address; it changes when the link that goes there is opened. */
export const POST = endpoint({
  access: 'person',
  input: changeAddressInput,
  handler: async ({ person, input }) => {
    await changeAddress(person, input);
    return { goTo: '/account?said=address' };
  },
});
