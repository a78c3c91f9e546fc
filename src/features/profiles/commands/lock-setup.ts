import { and, eq } from 'drizzle-orm';
import { checkValue } from '~/domain/fields';
import { getEventModule } from '~/event-modules/registry';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import { personOf, type Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireLeader } from '../../events/policy';
import { getEventBySlug } from '../../events/queries';
import { events } from '../../events/tables';
import { lockEvent } from '../queries';

/**
 * Lock the kept set-up: scoring opens. The version says which one was looked at.
 *
 * @throws AppError out-of-order, conflict, bad-input when what is kept no longer passes its own checks
 */
export async function lockSetup(scope: Scope, input: { eventSlug: string; version: number }): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const seen = await getEventBySlug(tx, scope, input.eventSlug);
    requireLeader(scope, seen);
    await lockEvent(tx, seen.id);
    const event = await getEventBySlug(tx, scope, input.eventSlug);
    if (event.state !== 'open') throw new AppError('out-of-order', 'This event is handed in.');
    if (event.setupLockedAt) throw new AppError('out-of-order', 'This set-up is locked already.');
    if (event.setup === null) throw new AppError('out-of-order', 'Keep the set-up before you lock it.');
    if (event.setupVersion !== input.version) throw new AppError('conflict', 'The set-up was changed meanwhile. Look at it again, then lock it.');
    const checked = checkValue(getEventModule(event.moduleKey).setup.schema, event.setup);
    if (!checked.ok) throw new AppError('bad-input', 'The kept set-up needs another look before it can be locked.', { fields: checked.fields });
    await tx
      .update(events)
      .set({ setupLockedAt: now(), setupLockedBy: personOf(scope) })
      .where(and(eq(events.orgId, scope.orgId), eq(events.id, event.id)));
    await writeAudit(tx, scope, {
      action: 'setup.locked',
      subjectType: 'event',
      subjectId: event.id,
      tournamentId: event.tournamentId,
      detail: { version: event.setupVersion },
    });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}
