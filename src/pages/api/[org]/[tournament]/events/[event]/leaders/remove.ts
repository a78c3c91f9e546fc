import { unassignLeader } from '~/features/events/commands/assign-leader';
import { leaderInput } from '~/features/events/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Take somebody out of the charge. */
export const POST = endpoint({
  access: only('director'),
  input: leaderInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await unassignLeader(scope, params['event']!, input.personId);
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}/edit`, message: 'They do not lead it any more.' };
  },
});
