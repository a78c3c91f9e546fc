import { addTeam } from '~/features/entries/commands/keep-team';
import { teamInput } from '~/features/entries/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Enter a team. */
export const POST = endpoint({
  access: only('director'),
  input: teamInput,
  handler: async ({ scope, input, org, tournament }) => {
    const { number } = await addTeam(scope, input);
    return { goTo: `/${org.slug}/${tournament.slug}/entries?division=${input.divisionId}`, message: `${input.name} is entered as number ${number}.` };
  },
});
