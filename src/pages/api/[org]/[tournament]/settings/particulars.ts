import { updateTournament } from '~/features/tournaments/commands/update-tournament';
import { updateTournamentInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Change the particulars. */
export const POST = endpoint({
  access: only('director'),
  input: updateTournamentInput,
  handler: async ({ scope, input, org, tournament }) => {
    await updateTournament(scope, input);
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: 'Kept.' };
  },
});
