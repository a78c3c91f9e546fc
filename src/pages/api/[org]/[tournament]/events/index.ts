import { addEvent } from '~/features/events/commands/add-event';
import { addEventInput } from '~/features/events/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Put an event into divisions. */
export const POST = endpoint({
  access: only('director'),
  input: addEventInput,
  handler: async ({ scope, input, org, tournament }) => {
    const added = await addEvent(scope, input);
    return { goTo: `/${org.slug}/${tournament.slug}/events`, message: `${input.name} is in ${added.length === 1 ? 'one division' : `${added.length} divisions`}. Give it a leader next.` };
  },
});
