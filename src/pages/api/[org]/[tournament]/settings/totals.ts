import { updateTournament } from '~/features/tournaments/commands/update-tournament';
import { rulesInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Change how totals are made. */
export const POST = endpoint({
  access: only('director'),
  input: rulesInput,
  handler: async ({ scope, input, org, tournament }) => {
    await updateTournament(scope, input);
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: 'The rules for totals are kept.' };
  },
});
