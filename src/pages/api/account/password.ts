import { changePassword } from '~/features/accounts/commands/change-password';
import { changePasswordInput } from '~/features/accounts/schema';
import { counted } from '~/domain/time';
import { endpoint } from '~/server/endpoint';

/** Choose another password; the present one is asked for. */
export const POST = endpoint({
  access: 'person',
  input: changePasswordInput,
  handler: async ({ person, input }) => {
    const { ended } = await changePassword(person, input);
    return { goTo: '/account', message: ended === 0 ? 'Your new password is kept.' : `Your new password is kept, and ${counted(ended, 'other session')} ended.` };
  },
});
