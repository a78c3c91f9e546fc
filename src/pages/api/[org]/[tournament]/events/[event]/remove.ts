import { removeEvent } from '~/features/events/commands/change-event';
import { emptyInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Remove an event for which nothing was kept. */
export const POST = endpoint({
  access: only('director'),
  input: emptyInput,
  handler: async ({ scope, params, org, tournament }) => {
    await removeEvent(scope, params['event']!);
    return { goTo: `/${org.slug}/${tournament.slug}/events`, message: 'Removed.' };
  },
});
