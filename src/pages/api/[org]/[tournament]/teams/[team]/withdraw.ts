import { withdrawTeam } from '~/features/entries/commands/withdraw-team';
import { emptyInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Take a team out of the field. */
export const POST = endpoint({
  access: only('director'),
  input: emptyInput,
  handler: async ({ scope, params, org, tournament }) => {
    if (!isId(params['team'])) throw notFound();
    await withdrawTeam(scope, params['team']);
    return { goTo: `/${org.slug}/${tournament.slug}/entries`, message: 'Withdrawn. What was kept of it stays, and counts nowhere.' };
  },
});
