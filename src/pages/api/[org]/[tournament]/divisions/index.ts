import { addDivision } from '~/features/tournaments/commands/add-division';
import { divisionInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Add a division. */
export const POST = endpoint({
  access: only('director'),
  input: divisionInput,
  handler: async ({ scope, input, org, tournament }) => {
    await addDivision(scope, input);
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: `${input.name} is added.` };
  },
});
