import { changeSchool } from '~/features/schools/commands/keep-school';
import { schoolInput } from '~/features/schools/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';

/** Rename a school or correct its town. */
export const POST = endpoint({
  access: only('treasurer', 'director'),
  input: schoolInput,
  handler: async ({ scope, input, org, params }) => {
    if (!isId(params['school'])) throw notFound();
    await changeSchool(scope, params['school'], input);
    return { goTo: `/${org.slug}/office/schools`, message: `${input.name} is kept.` };
  },
});
