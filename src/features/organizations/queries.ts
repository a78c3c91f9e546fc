import { and, asc, eq, gt, isNull, ne, sql, type SQL } from 'drizzle-orm';
import { now } from '~/server/clock';
import type { Tx } from '~/server/database';
import { AppError, fieldError, notFound } from '~/server/errors';
import { personOf, type Scope } from '~/server/scope';
import { people } from '../accounts/tables';
import { events } from '../events/tables';
import { schools } from '../schools/tables';
import { divisions, tournaments } from '../tournaments/tables';
import type { RoleInput } from './schema';
import { invitations, memberships, organizations } from './tables';
import type { InvitationRow, MembershipRow, OfficeTournament, Places } from './types';

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

/** An invitation by the hash of what stands in its link, whatever has become of it; null when there is none. */
export async function findInvitation(tx: Tx, scope: Scope, tokenHash: string): Promise<InvitationRow | null> {
  const [row] = await selectInvitations(tx, scope, eq(invitations.tokenHash, tokenHash));
  return row ?? null;
}

/**
 * Invitations that nobody has answered, open or past their time, oldest first; and those declined within the last month.
 * The audit trail says which were declined: to the office a declined invitation is an answer, to the link it is withdrawn.
 */
export async function listInvitations(tx: Tx, scope: Scope): Promise<(InvitationRow & { declined: boolean })[]> {
  const declined = sql`exists (select 1 from audit_entries a where a.org_id = ${invitations.orgId} and a.action = 'invitation.declined' and a.subject_id = ${invitations.id})`;
  const unanswered = await selectInvitations(tx, scope, and(isNull(invitations.acceptedAt), isNull(invitations.revokedAt))!);
  const refused = await selectInvitations(tx, scope, and(gt(invitations.revokedAt, new Date(now().getTime() - 30 * 86_400_000)), declined)!);
  return [...unanswered.map((i) => ({ ...i, declined: false })), ...refused.map((i) => ({ ...i, declined: true }))];
}

/** The open invitation of this address to exactly this role and place, or null. */
export async function findOpenInvitation(tx: Tx, scope: Scope, email: string, place: Place): Promise<InvitationRow | null> {
  const [row] = await selectInvitations(
    tx,
    scope,
    and(
      sql`lower(${invitations.email}) = lower(${email})`,
      isNull(invitations.acceptedAt),
      isNull(invitations.revokedAt),
      eq(invitations.role, place.role),
      same(invitations.tournamentId, place.tournamentId),
      same(invitations.eventId, place.eventId),
      same(invitations.schoolId, place.schoolId),
    )!,
  );
  return row ?? null;
}

const same = (column: typeof invitations.tournamentId | typeof invitations.eventId | typeof invitations.schoolId, value: string | null) =>
  value === null ? isNull(column) : eq(column, value);

async function selectMemberships(tx: Tx, scope: Scope, where: SQL | undefined): Promise<MembershipRow[]> {
  const rows = await tx
    .select({ membership: memberships, person: { name: people.name, email: people.email }, tournament: tournaments, event: events, division: divisions, school: schools })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .leftJoin(tournaments, and(eq(tournaments.orgId, memberships.orgId), eq(tournaments.id, memberships.tournamentId)))
    .leftJoin(events, and(eq(events.orgId, memberships.orgId), eq(events.id, memberships.eventId)))
    .leftJoin(divisions, and(eq(divisions.orgId, events.orgId), eq(divisions.id, events.divisionId)))
    .leftJoin(schools, and(eq(schools.orgId, memberships.orgId), eq(schools.id, memberships.schoolId)))
    .where(and(eq(memberships.orgId, scope.orgId), where))
    .orderBy(asc(sql`lower(${people.name})`), asc(people.id), asc(memberships.createdAt), asc(memberships.id));
  return rows.map(({ membership: m, person, tournament, event, division, school }) => ({
    id: m.id,
    personId: m.personId,
    name: person.name,
    email: person.email,
    role: m.role,
    tournamentId: m.tournamentId,
    eventId: m.eventId,
    schoolId: m.schoolId,
    state: m.state,
    createdAt: m.createdAt,
    tournament: tournament && { slug: tournament.slug, shortName: tournament.shortName },
    event: event && { slug: event.slug, name: event.name, division: division?.name ?? '' },
    school: school && { name: school.name },
  }));
}

/** Everybody's roles, by the person's name. */
export function listMemberships(tx: Tx, scope: Scope): Promise<MembershipRow[]> {
  return selectMemberships(tx, scope, undefined);
}

/** One person's roles in the organization; none when they are not in it. */
export function membershipsOf(tx: Tx, scope: Scope, personId: string): Promise<MembershipRow[]> {
  return selectMemberships(tx, scope, eq(memberships.personId, personId));
}

/** The roles of whoever has this address; none when nobody of the organization does. */
export function membershipsOfAddress(tx: Tx, scope: Scope, email: string): Promise<MembershipRow[]> {
  return selectMemberships(tx, scope, sql`lower(${people.email}) = lower(${email})`);
}

/** One role of a person; missing and foreign look alike. @throws AppError not-found */
export async function getMembership(tx: Tx, scope: Scope, personId: string, id: string): Promise<MembershipRow> {
  const [row] = await selectMemberships(tx, scope, and(eq(memberships.personId, personId), eq(memberships.id, id)));
  if (!row) throw notFound();
  return row;
}

/** A role and its place by ids. */
export interface Place {
  role: RoleInput['role'];
  tournamentId: string | null;
  eventId: string | null;
  schoolId: string | null;
}

/**
 * The place that a role needs, looked up in this organization. What the role does not need is left out, because without
 * script every choice of the form is sent.
 *
 * @throws AppError bad-input beside the choice that is missing, or is another organization's
 */
export async function resolvePlace(tx: Tx, scope: Scope, input: RoleInput): Promise<Place> {
  const none = { role: input.role, tournamentId: null, eventId: null, schoolId: null };
  switch (input.role) {
    case 'owner':
    case 'treasurer':
      return none;
    case 'director':
    case 'volunteer': {
      const [row] = input.tournamentId
        ? await tx.select({ id: tournaments.id }).from(tournaments).where(and(eq(tournaments.orgId, scope.orgId), eq(tournaments.id, input.tournamentId)))
        : [];
      if (!row) throw fieldError('tournamentId', input.role === 'director' ? 'Choose the tournament to direct.' : 'Choose the tournament to help at.');
      return { ...none, tournamentId: row.id };
    }
    case 'leader': {
      const [row] = input.eventId
        ? await tx.select({ id: events.id, tournamentId: events.tournamentId }).from(events).where(and(eq(events.orgId, scope.orgId), eq(events.id, input.eventId)))
        : [];
      if (!row) throw fieldError('eventId', 'Choose the event to lead.');
      return { ...none, tournamentId: row.tournamentId, eventId: row.id };
    }
    case 'coach': {
      const [row] = input.schoolId ? await tx.select({ id: schools.id }).from(schools).where(and(eq(schools.orgId, scope.orgId), eq(schools.id, input.schoolId))) : [];
      if (!row) throw fieldError('schoolId', 'Choose the school to speak for.');
      return { ...none, schoolId: row.id };
    }
  }
}

/** True when the role is held in exactly this place. */
export function holdsAlready(rows: readonly MembershipRow[], place: Place): boolean {
  return rows.some((m) => m.role === place.role && m.tournamentId === place.tournamentId && m.eventId === place.eventId && m.schoolId === place.schoolId);
}

/**
 * Take the organization's own lock, so that changes of who is in it follow one another: whoever looks for another owner after
 * this sees what everybody before has done.
 *
 * @throws AppError not-allowed when whoever acts has stopped being an owner meanwhile
 */
export async function lockAsOwner(tx: Tx, scope: Scope): Promise<void> {
  await tx.select({ id: organizations.orgId }).from(organizations).where(eq(organizations.orgId, scope.orgId)).for('update');
  const [owner] = await tx
    .select({ id: memberships.id })
    .from(memberships)
    .where(and(eq(memberships.orgId, scope.orgId), eq(memberships.personId, personOf(scope)), eq(memberships.role, 'owner'), eq(memberships.state, 'active')));
  if (!owner) throw new AppError('not-allowed', 'You are no longer an owner of the organization.');
}

/** Whether an owner remains without this person. Ask after {@link lockAsOwner}. @throws AppError out-of-order */
export async function requireAnotherOwner(tx: Tx, scope: Scope, personId: string): Promise<void> {
  const [other] = await tx
    .select({ id: memberships.id })
    .from(memberships)
    .where(and(eq(memberships.orgId, scope.orgId), ne(memberships.personId, personId), eq(memberships.role, 'owner'), eq(memberships.state, 'active')))
    .limit(1);
  if (!other) throw new AppError('out-of-order', 'This is the only owner who can act, and every organization needs one. Make somebody else an owner first.');
}

/** Tournaments, events and schools that a role can be given in: all of them, or a director's own tournaments. Tournaments long past are left out. */
export async function listPlaces(tx: Tx, scope: Scope, tournamentIds: string[] | null, since: string): Promise<Places> {
  const ids = tournamentIds === null ? sql`true` : sql`t.id = any(${sql.param(tournamentIds)}::uuid[])`;
  const { rows: own } = await tx.execute<{ id: string; name: string; day: string }>(
    sql`select t.id, t.name, t.day::text as day from tournaments t where t.org_id = ${scope.orgId} and t.day >= ${since} and ${ids} order by t.day, t.name`,
  );
  const { rows: each } = await tx.execute<{ id: string; name: string; division: string; tournament: string }>(
    sql`select e.id, e.name, d.name as division, t.short_name as tournament
          from events e join tournaments t on t.org_id = e.org_id and t.id = e.tournament_id join divisions d on d.org_id = e.org_id and d.id = e.division_id
         where e.org_id = ${scope.orgId} and t.day >= ${since} and ${ids} order by t.day, t.name, e.name, d.position`,
  );
  const all = await tx.select({ id: schools.id, name: schools.name, town: schools.town }).from(schools).where(eq(schools.orgId, scope.orgId)).orderBy(asc(sql`lower(${schools.name})`));
  return {
    tournaments: own.map((t) => ({ value: t.id, label: t.name })),
    events: each.map((e) => ({ value: e.id, label: `${e.tournament}: ${e.name} (${e.division})` })),
    schools: all.map((s) => ({ value: s.id, label: s.town ? `${s.name}, ${s.town}` : s.name })),
  };
}

/** The organization's tournaments with what they hold, the earliest day first. */
export async function listOfficeTournaments(tx: Tx, scope: Scope): Promise<OfficeTournament[]> {
  const { rows } = await tx.execute(sql`
    select t.id, t.slug, t.name, t.day::text as day, t.venue, t.is_published as "isPublished",
      (select count(*)::int from events e where e.org_id = t.org_id and e.tournament_id = t.id) as events,
      (select count(*)::int from events e where e.org_id = t.org_id and e.tournament_id = t.id and e.state <> 'open') as "handedIn",
      (select count(*)::int from teams x where x.org_id = t.org_id and x.tournament_id = t.id and x.state = 'confirmed') as teams,
      (select count(*)::int from releases r where r.org_id = t.org_id and r.tournament_id = t.id) as releases,
      (select min(r.public_from) from releases r where r.org_id = t.org_id and r.tournament_id = t.id) as "publicFrom"
    from tournaments t where t.org_id = ${scope.orgId} order by t.day, lower(t.name)`);
  return (rows as unknown as (Omit<OfficeTournament, 'publicFrom'> & { publicFrom: Date | string | null })[]).map((r) => ({
    ...r,
    publicFrom: r.publicFrom === null ? null : new Date(r.publicFrom),
  }));
}

/** Withdraw what is still offered to an address. Returns how many offers that ends. */
export async function withdrawAllFor(tx: Tx, scope: Scope, email: string): Promise<number> {
  const gone = await tx
    .update(invitations)
    .set({ revokedAt: now() })
    .where(and(eq(invitations.orgId, scope.orgId), sql`lower(${invitations.email}) = lower(${email})`, isNull(invitations.acceptedAt), isNull(invitations.revokedAt)))
    .returning({ id: invitations.id });
  return gone.length;
}
