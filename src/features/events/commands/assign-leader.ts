import { and, eq } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { fieldError, notFound, uniqueViolation } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, tournamentTopic } from '~/server/live';
import type { Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { memberships } from '../../organizations/tables';
import { requireDirector } from '../../tournaments/policy';
import { getEventBySlug } from '../queries';

/**
 * Put somebody who is in the organization already in charge of an event.
 *
 * @throws AppError not-allowed, not-found (the event), bad-input when they are not in the organization or lead it already
 */
export async function assignLeader(scope: Scope, slug: string, personId: string): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  try {
    await withScope(scope, async (tx) => {
      const event = await getEventBySlug(tx, scope, slug);
      const [member] = await tx
        .select({ id: memberships.id })
        .from(memberships)
        .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.personId, personId), eq(memberships.state, 'active')))
        .limit(1);
      if (!member) throw fieldError('personId', 'Choose somebody who is in the organization, or invite them by e-mail.');
      await tx.insert(memberships).values({
        orgId: scope.orgId,
        id: newId(),
        personId,
        role: 'leader',
        tournamentId: event.tournamentId,
        eventId: event.id,
        createdAt: now(),
      });
      await writeAudit(tx, scope, { action: 'leader.assigned', subjectType: 'event', subjectId: event.id, tournamentId: event.tournamentId, detail: { person: personId } });
    });
  } catch (error) {
    if (uniqueViolation(error) === 'memberships_grant_key') throw fieldError('personId', 'They lead this event already.');
    throw error;
  }
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}

/** Take somebody out of the charge of an event. @throws AppError not-allowed, not-found */
export async function unassignLeader(scope: Scope, slug: string, personId: string): Promise<void> {
  requireDirector(scope, scope.tournamentId);
  await withScope(scope, async (tx) => {
    const event = await getEventBySlug(tx, scope, slug);
    const gone = await tx
      .delete(memberships)
      .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.eventId, event.id), eq(memberships.personId, personId), eq(memberships.role, 'leader')))
      .returning({ id: memberships.id });
    if (gone.length === 0) throw notFound();
    await writeAudit(tx, scope, { action: 'leader.unassigned', subjectType: 'event', subjectId: event.id, tournamentId: event.tournamentId, detail: { person: personId } });
  });
  announce(tournamentTopic(scope.orgId, scope.tournamentId!));
}
