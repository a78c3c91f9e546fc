import { acceptEvent } from '~/features/results/commands/hand-in';
import { nothingInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Accept what was handed in. */
export const POST = endpoint({
  access: only('director'),
  input: nothingInput,
  handler: async ({ scope, params, org, tournament }) => {
    await acceptEvent(scope, params['event']!);
    return { goTo: `/${org.slug}/${tournament.slug}/scores`, message: 'Accepted: it counts.' };
  },
});
