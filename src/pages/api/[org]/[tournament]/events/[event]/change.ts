import { changeEvent } from '~/features/events/commands/change-event';
import { changeEventInput } from '~/features/events/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Rename an event, move it, make it count or not. */
export const POST = endpoint({
  access: only('director'),
  input: changeEventInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await changeEvent(scope, params['event']!, input);
    return { goTo: `/${org.slug}/${tournament.slug}/events`, message: `${input.name} is kept.` };
  },
});
