import { updateTournament } from '~/features/tournaments/commands/update-tournament';
import { publishInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Publish the programme, or take it back. */
export const POST = endpoint({
  access: only('director'),
  input: publishInput,
  handler: async ({ scope, input, org, tournament }) => {
    await updateTournament(scope, { isPublished: input.published });
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: input.published ? 'The programme is public.' : 'The programme is not public any more.' };
  },
});
