import { and, count, eq, ne, sql } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import type { Scope } from '~/server/scope';
import { people } from '../accounts/tables';
import { events } from '../events/tables';
import { readings } from '../scores/tables';
import { divisions } from '../tournaments/tables';

/** How many readings are kept for an event. */
export async function countReadings(tx: Tx, scope: Scope, eventId: string): Promise<number> {
  const [row] = await tx.select({ n: count() }).from(readings).where(and(eq(readings.orgId, scope.orgId), eq(readings.eventId, eventId)));
  return row?.n ?? 0;
}

/** Who locked an event's set-up. */
export async function lockerOf(tx: Tx, scope: Scope, eventId: string): Promise<string | null> {
  const [row] = await tx
    .select({ name: people.name })
    .from(events)
    .innerJoin(people, eq(people.id, events.setupLockedBy))
    .where(and(eq(events.orgId, scope.orgId), eq(events.id, eventId)));
  return row?.name ?? null;
}

/** Kept set-ups of the same kind in the same tournament. */
export async function siblingSetups(tx: Tx, scope: Scope, event: { id: string; tournamentId: string; moduleKey: string }): Promise<{ slug: string; label: string; setup: unknown }[]> {
  const rows = await tx
    .select({ slug: events.slug, name: events.name, division: divisions.name, setup: events.setup })
    .from(events)
    .innerJoin(divisions, and(eq(divisions.orgId, events.orgId), eq(divisions.id, events.divisionId)))
    .where(
      and(
        eq(events.orgId, scope.orgId),
        eq(events.tournamentId, event.tournamentId),
        eq(events.moduleKey, event.moduleKey),
        ne(events.id, event.id),
        sql`${events.setup} is not null`,
      ),
    )
    .orderBy(events.name, divisions.position);
  return rows.map((r) => ({ slug: r.slug, label: `${r.name}, ${r.division}`, setup: r.setup }));
}

/** Alone with an event until the transaction ends: keeping a reading takes the same lock shared. */
export async function lockEvent(tx: Tx, eventId: string): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${eventId}::text, 1))`);
}
