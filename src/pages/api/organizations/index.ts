import { createOrganization } from '~/features/organizations/commands/create-organization';
import { createOrganizationInput } from '~/features/organizations/schema';
import { endpoint } from '~/server/endpoint';

/** Found an organization. */
export const POST = endpoint({
  access: 'person',
  input: createOrganizationInput,
  handler: async ({ person, input }) => {
    const { slug } = await createOrganization(person, input);
    return { goTo: `/${slug}/office`, message: `${input.name} is ready, and you are its owner.` };
  },
});
