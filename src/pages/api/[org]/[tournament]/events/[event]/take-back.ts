import { takeBack } from '~/features/results/commands/hand-in';
import { reasonInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Open a handed-in or accepted event again. */
export const POST = endpoint({
  access: only('director', 'leader'),
  input: reasonInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await takeBack(scope, params['event']!, input.reason);
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}`, message: 'Taken back: readings can be changed.' };
  },
});
