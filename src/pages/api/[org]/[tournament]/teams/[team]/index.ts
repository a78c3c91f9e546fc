import { changeTeam } from '~/features/entries/commands/keep-team';
import { changeTeamInput } from '~/features/entries/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Rename a team or give it another number. */
export const POST = endpoint({
  access: only('director'),
  input: changeTeamInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    if (!isId(params['team'])) throw notFound();
    await changeTeam(scope, params['team'], input);
    return { goTo: `/${org.slug}/${tournament.slug}/entries`, message: `${input.name} is kept.` };
  },
});
