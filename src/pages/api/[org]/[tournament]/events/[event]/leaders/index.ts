import { assignLeader } from '~/features/events/commands/assign-leader';
import { leaderInput } from '~/features/events/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Put somebody in charge. */
export const POST = endpoint({
  access: only('director'),
  input: leaderInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await assignLeader(scope, params['event']!, input.personId);
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}/edit`, message: 'They lead it now.' };
  },
});
