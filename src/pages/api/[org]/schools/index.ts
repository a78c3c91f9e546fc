import { addSchool } from '~/features/schools/commands/keep-school';
import { schoolInput } from '~/features/schools/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Add a school to the directory. */
export const POST = endpoint({
  access: only('treasurer', 'director'),
  input: schoolInput,
  handler: async ({ scope, input, org }) => {
    await addSchool(scope, input);
    return { goTo: `/${org.slug}/office/schools`, message: `${input.name} is in the list.` };
  },
});
