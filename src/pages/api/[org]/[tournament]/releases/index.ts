import { formatMoment } from '~/domain/time';
import { releaseResults } from '~/features/results/commands/release-results';
import { releaseInput } from '~/features/results/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Release the results as they stand. */
export const POST = endpoint({
  access: only('director'),
  input: releaseInput,
  handler: async ({ scope, input, org, tournament }) => {
    const { number, publicFrom } = await releaseResults(scope, org.timeZone, input);
    const message = input.when === 'now' ? `Release ${number} is public.` : `Release ${number} is public from ${formatMoment(publicFrom, org.timeZone)}.`;
    return { goTo: `/${org.slug}/${tournament.slug}/release`, message };
  },
});
