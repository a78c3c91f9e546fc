import { createTournament } from '~/features/tournaments/commands/create-tournament';
import { createTournamentInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Add a tournament to the season. */
export const POST = endpoint({
  access: only('owner'),
  input: createTournamentInput,
  handler: async ({ scope, input, org }) => {
    const { slug } = await createTournament(scope, input);
    return { goTo: `/${org.slug}/${slug}/settings`, message: 'Added. It is a draft until you publish it.' };
  },
});
