import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireLeader } from '../../events/policy';
import { getEventBySlug } from '../../events/queries';
import { events } from '../../events/tables';
import { canDirect } from '../../tournaments/policy';
import { countReadings, lockEvent } from '../queries';

/**
 * Unlock a set-up so that it can be changed; scoring waits until it is locked again. Once something
 * has been scored by it, only a director or an owner does this. The reason is kept.
 *
 * @throws AppError out-of-order, not-allowed
 */
export async function unlockSetup(scope: Scope, input: { eventSlug: string; reason: string }): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const seen = await getEventBySlug(tx, scope, input.eventSlug);
    requireLeader(scope, seen);
    await lockEvent(tx, seen.id);
    const event = await getEventBySlug(tx, scope, input.eventSlug);
    if (event.state !== 'open') throw new AppError('out-of-order', 'This event is handed in: take it back first.');
    if (!event.setupLockedAt) throw new AppError('out-of-order', 'This set-up is not locked.');
    const kept = await countReadings(tx, scope, event.id);
    if (kept > 0 && !canDirect(scope, event.tournamentId)) {
      throw new AppError('not-allowed', `${kept} readings are kept under this set-up. Ask the tournament’s director to unlock it.`);
    }
    await tx
      .update(events)
      .set({ setupLockedAt: null, setupLockedBy: null })
      .where(and(eq(events.orgId, scope.orgId), eq(events.id, event.id)));
    await writeAudit(tx, scope, {
      action: 'setup.unlocked',
      subjectType: 'event',
      subjectId: event.id,
      tournamentId: event.tournamentId,
      detail: { version: event.setupVersion, reason: input.reason, keptReadings: kept },
    });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}
