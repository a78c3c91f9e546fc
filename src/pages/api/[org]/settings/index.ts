import { updateOrganization } from '~/features/organizations/commands/update-organization';
import { updateOrganizationInput } from '~/features/organizations/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Change the organization's particulars. */
export const POST = endpoint({
  access: only('owner'),
  input: updateOrganizationInput,
  handler: async ({ scope, org, input }) => {
    await updateOrganization(scope, input);
    return { goTo: `/${org.slug}/office/settings`, message: 'Kept.' };
  },
});
