import { changeRole } from '~/features/organizations/commands/change-role';
import { roleInput } from '~/features/organizations/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Turn one role into another, or move it to another place. */
export const POST = endpoint({
  access: only('owner'),
  input: roleInput,
  handler: async ({ scope, org, params, input }) => {
    const { person, membership } = params;
    if (!isId(person) || !isId(membership)) throw notFound();
    const { label } = await changeRole(scope, person, membership, input);
    // Whoever gives up being an owner may no longer see people's pages.
    return { goTo: scope.actor.personId === person && input.role !== 'owner' ? `/${org.slug}/office` : `/${org.slug}/office/people/${person}`, message: `The role is now: ${label}.` };
  },
});
