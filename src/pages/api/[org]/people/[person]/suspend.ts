import { suspendPerson } from '~/features/organizations/commands/suspend-person';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Stop somebody's roles for the time being. */
export const POST = endpoint({
  access: only('owner'),
  handler: async ({ scope, org, params }) => {
    if (!isId(params['person'])) throw notFound();
    const { name } = await suspendPerson(scope, params['person']);
    return { goTo: `/${org.slug}/office/people/${params['person']}`, message: `${name} is suspended.` };
  },
});
