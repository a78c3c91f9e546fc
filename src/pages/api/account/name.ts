import { changeName } from '~/features/accounts/commands/change-name';
import { nameInput } from '~/features/accounts/schema';
import { endpoint } from '~/server/endpoint';

/** Change the own name. */
export const POST = endpoint({
  access: 'person',
  input: nameInput,
  handler: async ({ person, input }) => {
    await changeName(person, input.name);
    return { goTo: '/account', message: 'Your name is kept.' };
  },
});
