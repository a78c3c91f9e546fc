import { counted } from '~/domain/time';
import { endOtherSessions } from '~/features/accounts/commands/end-sessions';
import { endpoint } from '~/server/endpoint';

/** End all the own sessions but this one. */
export const POST = endpoint({
  access: 'person',
  handler: async ({ person }) => {
    const ended = await endOtherSessions(person);
    return { goTo: '/account', message: `${counted(ended, 'other session')} ended.` };
  },
});
