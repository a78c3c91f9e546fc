import { and, eq, type SQL } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { people } from '../accounts/tables';
import { events } from '../events/tables';
import { schools } from '../schools/tables';
import { divisions, tournaments } from '../tournaments/tables';
import { invitations, organizations } from './tables';
import type { InvitationRow } from './types';

/** The organization's own row. @throws AppError not-found */
export async function getOrganization(tx: Tx, scope: Scope): Promise<typeof organizations.$inferSelect> {
  const [row] = await tx.select().from(organizations).where(eq(organizations.orgId, scope.orgId));
  if (!row) throw notFound();
  return row;
}

async function selectInvitations(tx: Tx, scope: Scope, where: SQL): Promise<InvitationRow[]> {
  const rows = await tx
    .select({ invitation: invitations, invitedBy: people.name, tournament: tournaments, event: events, division: divisions, school: schools })
    .from(invitations)
    .innerJoin(people, eq(people.id, invitations.invitedBy))
    .leftJoin(tournaments, and(eq(tournaments.orgId, invitations.orgId), eq(tournaments.id, invitations.tournamentId)))
    .leftJoin(events, and(eq(events.orgId, invitations.orgId), eq(events.id, invitations.eventId)))
    .leftJoin(divisions, and(eq(divisions.orgId, events.orgId), eq(divisions.id, events.divisionId)))
    .leftJoin(schools, and(eq(schools.orgId, invitations.orgId), eq(schools.id, invitations.schoolId)))
    .where(and(eq(invitations.orgId, scope.orgId), where))
    .orderBy(invitations.createdAt, invitations.id);
  return rows.map(({ invitation: i, invitedBy, tournament, event, division, school }) => ({
    id: i.id,
    email: i.email,
    role: i.role,
    tournamentId: i.tournamentId,
    eventId: i.eventId,
    schoolId: i.schoolId,
    invitedBy,
    createdAt: i.createdAt,
    expiresAt: i.expiresAt,
    acceptedAt: i.acceptedAt,
    acceptedBy: i.acceptedBy,
    revokedAt: i.revokedAt,
    tournament: tournament && { slug: tournament.slug, shortName: tournament.shortName },
    event: event && { slug: event.slug, name: event.name, division: division?.name ?? '' },
    school: school && { name: school.name },
  }));
}

/** An invitation by id, whatever has become of it; missing and foreign look alike. @throws AppError not-found */
export async function getInvitation(tx: Tx, scope: Scope, id: string): Promise<InvitationRow> {
  const [row] = await selectInvitations(tx, scope, eq(invitations.id, id));
  if (!row) throw notFound();
  return row;
}
