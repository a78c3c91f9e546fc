import { keepSetup } from '~/features/profiles/commands/keep-setup';
import { keepSetupInput } from '~/features/profiles/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Keep the set-up as a new version. */
export const PUT = endpoint({
  access: only('director', 'leader'),
  input: keepSetupInput,
  handler: ({ scope, input, params }) => keepSetup(scope, { eventSlug: params['event']!, ...input }),
});
