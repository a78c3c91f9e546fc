import { invitePerson } from '~/features/organizations/commands/invite-person';
import { inviteInput } from '~/features/organizations/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Offer somebody a role by mail. */
export const POST = endpoint({
  access: only('director'),
  input: inviteInput,
  handler: async ({ scope, org, input }) => {
    const { label } = await invitePerson(scope, input);
    return { goTo: `/${org.slug}/office/people`, message: `${input.email} is invited: ${label}.` };
  },
});
