import { settleFinding } from '~/features/results/commands/settle-finding';
import { settleInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Settle what is missing of one team. */
export const POST = endpoint({
  access: only('director'),
  input: settleInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await settleFinding(scope, params['event']!, input);
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}`, message: 'Settled.' };
  },
});
