import { handIn } from '~/features/results/commands/hand-in';
import { nothingInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Give the event's scores over to the director. */
export const POST = endpoint({
  access: only('director', 'leader'),
  input: nothingInput,
  handler: async ({ scope, params, org, tournament }) => {
    await handIn(scope, params['event']!);
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}`, message: 'Handed in. The director takes it from here.' };
  },
});
