import { lockSetup } from '~/features/profiles/commands/lock-setup';
import { lockSetupInput } from '~/features/profiles/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Lock the set-up: scoring opens. */
export const POST = endpoint({
  access: only('director', 'leader'),
  input: lockSetupInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await lockSetup(scope, { eventSlug: params['event']!, ...input });
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}`, message: 'Locked: scoring is open.' };
  },
});
