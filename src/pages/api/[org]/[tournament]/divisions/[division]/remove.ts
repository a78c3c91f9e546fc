import { removeDivision } from '~/features/tournaments/commands/change-division';
import { emptyInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Remove an empty division. */
export const POST = endpoint({
  access: only('director'),
  input: emptyInput,
  handler: async ({ scope, params, org, tournament }) => {
    if (!isId(params['division'])) throw notFound();
    await removeDivision(scope, params['division']);
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: 'Removed.' };
  },
});
