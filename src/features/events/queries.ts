import { and, asc, eq, ne } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { people } from '../accounts/tables';
import { memberships } from '../organizations/tables';
import { divisions } from '../tournaments/tables';
import { events } from './tables';
import type { EventRow } from './types';

async function select(tx: Tx, scope: Scope, tournamentId: string, slug: string | null, id: string | null): Promise<EventRow[]> {
  const [rows, leaders] = await Promise.all([
    tx
      .select({ event: events, division: divisions })
      .from(events)
      .innerJoin(divisions, and(eq(divisions.orgId, events.orgId), eq(divisions.id, events.divisionId)))
      .where(
        and(
          eq(events.orgId, scope.orgId),
          eq(events.tournamentId, tournamentId),
          slug === null ? undefined : eq(events.slug, slug),
          id === null ? undefined : eq(events.id, id),
        ),
      )
      .orderBy(asc(events.name), asc(divisions.position)),
    tx
      .select({ eventId: memberships.eventId, personId: people.id, name: people.name })
      .from(memberships)
      .innerJoin(people, eq(people.id, memberships.personId))
      .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.role, 'leader'), eq(memberships.state, 'active'), eq(memberships.tournamentId, tournamentId)))
      .orderBy(asc(people.name)),
  ]);
  return rows.map(({ event: e, division: d }) => ({
    id: e.id,
    tournamentId: e.tournamentId,
    slug: e.slug,
    name: e.name,
    moduleKey: e.moduleKey,
    isTrial: e.isTrial,
    room: e.room,
    state: e.state,
    setup: e.setup,
    setupVersion: e.setupVersion,
    setupLockedAt: e.setupLockedAt,
    handedInAt: e.handedInAt,
    acceptedAt: e.acceptedAt,
    division: { id: d.id, slug: d.slug, name: d.name, letter: d.letter, shape: d.shape, position: d.position },
    leaders: leaders.filter((l) => l.eventId === e.id).map((l) => ({ personId: l.personId, name: l.name })),
  }));
}

/** Every event of the tournament, by name and then division. */
export function listEvents(tx: Tx, scope: Scope, tournamentId: string): Promise<EventRow[]> {
  return select(tx, scope, tournamentId, null, null);
}

/** The event an address names, in the scope's tournament; missing and foreign look alike. @throws AppError not-found */
export async function getEventBySlug(tx: Tx, scope: Scope, slug: string): Promise<EventRow> {
  if (!scope.tournamentId) throw notFound();
  const [row] = await select(tx, scope, scope.tournamentId, slug, null);
  if (!row) throw notFound();
  return row;
}

/** An event by id, in the scope's tournament; missing and foreign look alike. @throws AppError not-found */
export async function getEventInScope(tx: Tx, scope: Scope, id: string): Promise<EventRow> {
  if (!scope.tournamentId) throw notFound();
  const [row] = await select(tx, scope, scope.tournamentId, null, id);
  if (!row) throw notFound();
  return row;
}

/** Everybody who is active in the organization other than as a coach alone, by name. */
export async function listMembers(tx: Tx, scope: Scope): Promise<{ personId: string; name: string }[]> {
  return tx
    .selectDistinct({ personId: people.id, name: people.name })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.state, 'active'), ne(memberships.role, 'coach')))
    .orderBy(asc(people.name));
}
