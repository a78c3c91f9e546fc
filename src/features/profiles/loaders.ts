import { getEventModule } from '~/event-modules/registry';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { canLead } from '../events/policy';
import { getEventBySlug } from '../events/queries';
import { canDirect } from '../tournaments/policy';
import { countReadings, lockerOf, siblingSetups } from './queries';
import type { SetupPage } from './types';

/**
 * An event's set-up as its page shows it.
 *
 * @throws AppError not-found, not-allowed
 */
export async function loadSetup(scope: Scope, eventSlug: string): Promise<SetupPage> {
  return withScope(scope, async (tx) => {
    const event = await getEventBySlug(tx, scope, eventSlug);
    if (!canLead(scope, event)) throw new AppError('not-allowed', 'Only this event’s leader sees its set-up, or the tournament’s director.');
    const module = getEventModule(event.moduleKey);
    const [keptReadings, lockedBy, siblings] = await Promise.all([countReadings(tx, scope, event.id), lockerOf(tx, scope, event.id), siblingSetups(tx, scope, event)]);
    const setup = event.setup ?? module.setup.defaults();
    const parsed = module.setup.schema.safeParse(setup);
    const open = event.state === 'open';
    return {
      event: {
        id: event.id,
        slug: event.slug,
        name: event.name,
        moduleKey: event.moduleKey,
        kind: module.name,
        state: event.state,
        division: { name: event.division.name, letter: event.division.letter, shape: event.division.shape },
      },
      setup,
      version: event.setupVersion,
      lockedAt: event.setupLockedAt,
      lockedBy,
      findings: parsed.success ? module.setup.findings(parsed.data) : [],
      summary: parsed.success ? module.setup.summary(parsed.data) : [],
      tieBreak: parsed.success ? module.tieBreakWords(parsed.data) : [],
      keptReadings,
      siblings,
      may: {
        edit: open && event.setupLockedAt === null,
        lock: open && event.setupLockedAt === null,
        // Once something has been scored by it, changing the profile is the director's to allow.
        unlock: open && event.setupLockedAt !== null && (keptReadings === 0 || canDirect(scope, event.tournamentId)),
      },
    };
  });
}
