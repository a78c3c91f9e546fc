import { and, eq } from 'drizzle-orm';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { AppError, notFound } from '~/server/errors';
import { newId } from '~/server/ids';
import { announce, tournamentTopic } from '~/server/live';
import { personOf, type Scope } from '~/server/scope';
import { writeAudit } from '../../audit/queries';
import { getEventBySlug } from '../../events/queries';
import { lockEvent } from '../../profiles/queries';
import type { Settle } from '../../scores/schema';
import { settlements } from '../../scores/tables';
import { requireDirector } from '../../tournaments/policy';
import { eventField } from '../queries';

/**
 * Settle what is missing of one team, with a reason that is kept. The fingerprint says which facts were looked at: if they have
 * changed, nothing is settled.
 *
 * @throws AppError not-found, not-allowed, out-of-order, conflict
 */
export async function settleFinding(scope: Scope, slug: string, input: Settle): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const seen = await getEventBySlug(tx, scope, slug);
    requireDirector(scope, seen.tournamentId);
    await lockEvent(tx, seen.id);
    const event = await getEventBySlug(tx, scope, slug);
    if (event.state !== 'handed-in') throw new AppError('out-of-order', event.state === 'open' ? 'The event is not handed in yet: its leader may still keep what is missing.' : 'This event is accepted already.');
    const field = await eventField(tx, scope, event);
    const row = field.rows.find((r) => r.teamId === input.teamId);
    if (!row?.finding) throw notFound('Nothing is missing of this team any more.');
    if (row.finding.fingerprint !== input.fingerprint) throw new AppError('conflict', `Something was kept for ${row.label} meanwhile. Look again, then settle it.`);
    if (row.finding.settlement) throw new AppError('out-of-order', `${row.label} is settled already.`);
    await tx.insert(settlements).values({
      orgId: scope.orgId,
      id: newId(),
      eventId: event.id,
      teamId: input.teamId,
      kind: row.finding.kind,
      fingerprint: row.finding.fingerprint,
      outcome: input.outcome,
      reason: input.reason,
      settledAt: now(),
      settledBy: personOf(scope),
    });
    await writeAudit(tx, scope, {
      action: 'score.settled',
      subjectType: 'event',
      subjectId: event.id,
      tournamentId: event.tournamentId,
      detail: { name: event.name, division: event.division.name, team: input.teamId, label: row.label, words: row.finding.words, outcome: input.outcome, reason: input.reason },
    });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}

/** Undo a settlement while the event is not accepted. @throws AppError not-found, not-allowed, out-of-order */
export async function unsettleFinding(scope: Scope, slug: string, settlementId: string): Promise<void> {
  const tournamentId = await withScope(scope, async (tx) => {
    const seen = await getEventBySlug(tx, scope, slug);
    requireDirector(scope, seen.tournamentId);
    await lockEvent(tx, seen.id);
    const event = await getEventBySlug(tx, scope, slug);
    if (event.state === 'accepted') throw new AppError('out-of-order', 'This event is accepted: take it back first.');
    const [gone] = await tx
      .delete(settlements)
      .where(and(eq(settlements.orgId, scope.orgId), eq(settlements.eventId, event.id), eq(settlements.id, settlementId)))
      .returning();
    if (!gone) throw notFound();
    await writeAudit(tx, scope, {
      action: 'score.unsettled',
      subjectType: 'event',
      subjectId: event.id,
      tournamentId: event.tournamentId,
      detail: { name: event.name, division: event.division.name, team: gone.teamId, outcome: gone.outcome, reason: gone.reason },
    });
    return event.tournamentId;
  });
  announce(tournamentTopic(scope.orgId, tournamentId));
}
