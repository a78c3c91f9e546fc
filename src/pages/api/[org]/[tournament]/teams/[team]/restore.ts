import { restoreTeam } from '~/features/entries/commands/withdraw-team';
import { emptyInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Bring a withdrawn team back. */
export const POST = endpoint({
  access: only('director'),
  input: emptyInput,
  handler: async ({ scope, params, org, tournament }) => {
    if (!isId(params['team'])) throw notFound();
    await restoreTeam(scope, params['team']);
    return { goTo: `/${org.slug}/${tournament.slug}/entries`, message: 'The team is in again.' };
  },
});
