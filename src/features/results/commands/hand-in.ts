import { and, eq } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope, type Tx } from '~/server/database';
import { AppError } from '~/server/errors';
import { announce, tournamentTopic } from '~/server/live';
import { personOf, type Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { requireLeader } from '../../events/policy';
import { getEventBySlug } from '../../events/queries';
import { events } from '../../events/tables';
import type { EventRow } from '../../events/types';
import { lockEvent } from '../../profiles/queries';
import { canDirect, requireDirector } from '../../tournaments/policy';
import { eventField } from '../queries';

/** Read the event again under its lock, so that no reading slips in between. */
async function locked(tx: Tx, scope: Scope, slug: string, check: (event: EventRow) => void): Promise<EventRow> {
  const seen = await getEventBySlug(tx, scope, slug);
  check(seen);
  await lockEvent(tx, seen.id);
  return getEventBySlug(tx, scope, slug);
}

async function set(tx: Tx, scope: Scope, event: EventRow, change: Partial<typeof events.$inferInsert>, action: string, detail: Record<string, unknown> = {}): Promise<void> {
  await tx
    .update(events)
    .set(change)
    .where(and(eq(events.orgId, scope.orgId), eq(events.id, event.id)));
  await writeAudit(tx, scope, { action, subjectType: 'event', subjectId: event.id, tournamentId: event.tournamentId, detail: { name: event.name, division: event.division.name, ...detail } });
}

/**
 * Hand an event in: its scores are given over to the director and take no more readings. What is missing may be missing; the
 * director settles it.
 *
 * @throws AppError not-found, not-allowed, out-of-order
 */
export async function handIn(scope: Scope, slug: string): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const event = await locked(tx, scope, slug, (e) => requireLeader(scope, e));
    if (event.state !== 'open') throw new AppError('out-of-order', 'This event is handed in already.');
    if (!event.setupLockedAt) throw new AppError('out-of-order', 'Lock the set-up first: nothing can be scored without it.');
    const field = await eventField(tx, scope, event);
    if (field.rows.length === 0) throw new AppError('out-of-order', 'No team is entered in this division yet.');
    await set(tx, scope, event, { state: 'handed-in', handedInAt: now(), handedInBy: personOf(scope) }, 'event.handed-in', { kept: field.kept, missing: field.open.length });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}

/**
 * Take an event back, so that readings can be changed. A leader may until it is accepted; after that the director, with a reason.
 *
 * @throws AppError not-found, not-allowed, out-of-order
 */
export async function takeBack(scope: Scope, slug: string, reason: string): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const event = await locked(tx, scope, slug, (e) => requireLeader(scope, e));
    if (event.state === 'open') throw new AppError('out-of-order', 'This event is not handed in.');
    if (event.state === 'accepted' && !canDirect(scope, event.tournamentId)) {
      throw new AppError('not-allowed', 'This event is accepted. Ask the tournament’s director to take it back.');
    }
    await set(tx, scope, event, { state: 'open', handedInAt: null, handedInBy: null, acceptedAt: null, acceptedBy: null }, 'event.taken-back', { was: event.state, reason });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}

/**
 * Accept what was handed in: it counts. Everything that is missing must be settled first.
 *
 * @throws AppError not-found, not-allowed, out-of-order
 */
export async function acceptEvent(scope: Scope, slug: string): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const event = await locked(tx, scope, slug, (e) => requireDirector(scope, e.tournamentId));
    if (event.state === 'open') throw new AppError('out-of-order', 'This event is not handed in yet.');
    if (event.state === 'accepted') throw new AppError('out-of-order', 'This event is accepted already.');
    const field = await eventField(tx, scope, event);
    if (field.open.length > 0) {
      throw new AppError('out-of-order', `${field.open.length === 1 ? 'One team is' : `${field.open.length} teams are`} not settled yet: say for each whether it did not start or the missing part counts as nothing.`);
    }
    await set(tx, scope, event, { state: 'accepted', acceptedAt: now(), acceptedBy: personOf(scope) }, 'event.accepted', { teams: field.rows.length, settled: field.settled.length });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}
