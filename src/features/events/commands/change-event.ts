import { and, eq } from 'drizzle-orm';
import { withScope } from '~/server/database';
import { AppError, fieldError, uniqueViolation } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { readingRevisions, settlements } from '../../scores/tables';
import { requireDirector } from '../../tournaments/policy';
import { getEventBySlug } from '../queries';
import { events } from '../tables';

/** Rename an event, move it to another room, make it count or not. @throws AppError not-allowed, not-found, bad-input */
export async function changeEvent(scope: Scope, slug: string, input: { name: string; room: string; isTrial: boolean }): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  try {
    await withScope(scope, async (tx) => {
      const before = await getEventBySlug(tx, scope, slug);
      await tx
        .update(events)
        .set(input)
        .where(and(eq(events.orgId, scope.orgId), eq(events.id, before.id)));
      await writeAudit(tx, scope, {
        action: 'event.changed',
        subjectType: 'event',
        subjectId: before.id,
        tournamentId: before.tournamentId,
        detail: { before: { name: before.name, room: before.room, isTrial: before.isTrial }, after: input },
      });
    });
  } catch (error) {
    if (uniqueViolation(error) === 'events_name_key') throw fieldError('name', 'This division has an event of this name already.');
    throw error;
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}

/** Remove an event for which nothing was ever kept. @throws AppError not-allowed, not-found, conflict */
export async function removeEvent(scope: Scope, slug: string): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  await withScope(scope, async (tx) => {
    const event = await getEventBySlug(tx, scope, slug);
    const [kept] = await tx.select({ v: readingRevisions.version }).from(readingRevisions).where(and(eq(readingRevisions.orgId, scope.orgId), eq(readingRevisions.eventId, event.id))).limit(1);
    const [settled] = await tx.select({ id: settlements.id }).from(settlements).where(and(eq(settlements.orgId, scope.orgId), eq(settlements.eventId, event.id))).limit(1);
    if (kept || settled) throw new AppError('conflict', `${event.name} has readings kept, so it stays. It can be made a trial event, which counts for nobody.`);
    await tx.delete(events).where(and(eq(events.orgId, scope.orgId), eq(events.id, event.id)));
    await writeAudit(tx, scope, {
      action: 'event.removed',
      subjectType: 'event',
      subjectId: event.id,
      tournamentId: event.tournamentId,
      detail: { name: event.name, division: event.division.name },
    });
  });
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}
