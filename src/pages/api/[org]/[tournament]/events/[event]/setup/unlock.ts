import { unlockSetup } from '~/features/profiles/commands/unlock-setup';
import { unlockSetupInput } from '~/features/profiles/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Unlock the set-up, with a reason that is kept. */
export const POST = endpoint({
  access: only('director', 'leader'),
  input: unlockSetupInput,
  handler: async ({ scope, input, params, org, tournament }) => {
    await unlockSetup(scope, { eventSlug: params['event']!, ...input });
    return { goTo: `/${org.slug}/${tournament.slug}/events/${params['event']!}/setup`, message: 'Unlocked. Scoring waits until it is locked again.' };
  },
});
