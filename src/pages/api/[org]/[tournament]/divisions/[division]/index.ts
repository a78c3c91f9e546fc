import { changeDivision } from '~/features/tournaments/commands/change-division';
import { divisionInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Rename a division or change its mark. */
export const POST = endpoint({
  access: only('director'),
  input: divisionInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    if (!isId(params['division'])) throw notFound();
    await changeDivision(scope, params['division'], input);
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: `${input.name} is kept.` };
  },
});
