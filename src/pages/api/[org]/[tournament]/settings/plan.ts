import { updateTournament } from '~/features/tournaments/commands/update-tournament';
import { dayPlanInput } from '~/features/tournaments/schema';
import { only } from '~/server/access';
import { endpoint } from '~/server/endpoint';

/** Change the plan of the day. */
export const POST = endpoint({
  access: only('director'),
  input: dayPlanInput,
  handler: async ({ scope, input, org, tournament }) => {
    await updateTournament(scope, { dayPlan: input.lines });
    return { goTo: `/${org.slug}/${tournament.slug}/settings`, message: 'The plan of the day is kept.' };
  },
});
