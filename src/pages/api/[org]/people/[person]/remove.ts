import { removePerson } from '~/features/organizations/commands/remove-person';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Take somebody out of the organization. */
export const POST = endpoint({
  access: only('owner'),
  handler: async ({ scope, org, params, person }) => {
    if (!isId(params['person'])) throw notFound();
    const { name } = await removePerson(scope, params['person']);
    return params['person'] === person.personId ? { goTo: '/account', message: `You left ${org.name}.` } : { goTo: `/${org.slug}/office/people`, message: `${name} is no longer in ${org.name}.` };
  },
});
