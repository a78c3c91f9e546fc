import { removeRole } from '~/features/organizations/commands/remove-role';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Take one role away from somebody. */
export const POST = endpoint({
  access: only('director'),
  handler: async ({ scope, org, params }) => {
    const { person, membership } = params;
    if (!isId(person) || !isId(membership)) throw notFound();
    const { label } = await removeRole(scope, person, membership);
    return { goTo: scope.actor.personId === person ? '/account' : `/${org.slug}/office/people`, message: `Taken away: ${label}.` };
  },
});
