import { unsettleFinding } from '~/features/results/commands/settle-finding';
import { unsettleInput } from '~/features/scores/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Undo a settlement. */
export const POST = endpoint({
  access: only('director'),
  input: unsettleInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await unsettleFinding(scope, params['event']!, input.settlementId);
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}`, message: 'Not settled any more.' };
  },
});
