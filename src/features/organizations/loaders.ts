import { dayOf, momentAt } from '~/domain/time';
import { hashToken } from '~/server/authentication';
import { now } from '~/server/clock';
import { withScope } from '~/server/database';
import { notFound } from '~/server/errors';
import { isId } from '~/server/ids';
import type { OrgInfo, SignedIn } from '~/server/request-scope';
import { holds, type Scope } from '~/server/scope';
import { roleLabel, workPath } from './assembly';
import { canOffer, canTake, directedTournaments } from './policy';
import { findInvitation, listInvitations, listMemberships, listOfficeTournaments, listPlaces, membershipsOf } from './queries';
import type { InvitationRow, MembershipRow, OfficeTournament, Places } from './types';

/** How a tournament stands, in the order of its life. */
export type TournamentState = 'draft' | 'published' | 'today' | 'finished';

function stateOf(t: OfficeTournament, today: string): TournamentState {
  if (t.day < today) return 'finished';
  if (!t.isPublished) return 'draft';
  return t.day === today ? 'today' : 'published';
}

export interface OfficeLine extends OfficeTournament {
  state: TournamentState;
  /** The public sees results. */
  resultsOut: boolean;
  /** Where this person's work at it is done, by label. */
  links: { label: string; href: string }[];
}

/** The office's list: every tournament for owners and treasurers, for others those where they have work. The next day comes first, then what is past. */
export async function loadOffice(scope: Scope, zone: string): Promise<{ ahead: OfficeLine[]; past: OfficeLine[]; seesAll: boolean }> {
  const seesAll = holds(scope, 'owner') || holds(scope, 'treasurer');
  const { all, mine } = await withScope(scope, async (tx) => ({
    all: await listOfficeTournaments(tx, scope),
    mine: scope.actor.personId ? await membershipsOf(tx, scope, scope.actor.personId) : [],
  }));
  const today = dayOf(now(), zone);
  const lines = all
    .filter((t) => seesAll || mine.some((m) => m.tournamentId === t.id))
    .map((t): OfficeLine => {
      const base = `/${scope.orgSlug}/${t.slug}`;
      const director = holds(scope, 'owner') || mine.some((m) => m.role === 'director' && m.tournamentId === t.id);
      return {
        ...t,
        state: stateOf(t, today),
        resultsOut: t.publicFrom !== null && t.publicFrom <= now(),
        links: director
          ? [{ label: 'Overview', href: `${base}/overview` }]
          : mine.filter((m) => m.role === 'leader' && m.tournamentId === t.id && m.event).map((m) => ({ label: `${m.event!.name}, ${m.event!.division}`, href: `${base}/events/${m.event!.slug}` })),
      };
    });
  return { ahead: lines.filter((t) => t.day >= today), past: lines.filter((t) => t.day < today).reverse(), seesAll };
}

/** What an organization shows to everybody: published tournaments, and until when that stays the same if nothing is changed. */
export async function loadPublicPage(
  scope: Scope,
  zone: string,
): Promise<{ today: string; ahead: OfficeTournament[]; past: (OfficeTournament & { resultsOut: boolean })[]; until: Date; tournamentIds: string[] }> {
  const moment = now();
  const published = (await withScope(scope, (tx) => listOfficeTournaments(tx, scope))).filter((t) => t.isPublished);
  const today = dayOf(moment, zone);
  const tomorrow = momentAt(dayOf(new Date(Date.parse(`${today}T12:00:00Z`) + 86_400_000), 'UTC'), '00:00', zone);
  const coming = published.flatMap((t) => (t.publicFrom && t.publicFrom > moment ? [t.publicFrom] : []));
  return {
    today,
    ahead: published.filter((t) => t.day >= today),
    past: published
      .filter((t) => t.day < today)
      .reverse()
      .map((t) => ({ ...t, resultsOut: t.publicFrom !== null && t.publicFrom <= moment })),
    until: new Date(Math.min(tomorrow.getTime(), ...coming.map((c) => c.getTime()))),
    tournamentIds: published.map((t) => t.id),
  };
}

export interface PersonLine {
  personId: string;
  name: string;
  email: string;
  isSuspended: boolean;
  roles: string[];
}

export interface InvitationLine {
  id: string;
  email: string;
  label: string;
  invitedBy: string;
  createdAt: Date;
  expiresAt: Date;
  state: 'open' | 'expired' | 'declined';
  mayChange: boolean;
}

/** Whom somebody sees: owners everybody; directors those who work at their tournaments, coaches, and the owners. */
function seen<T extends { role: MembershipRow['role']; tournamentId: string | null }>(scope: Scope, rows: T[]): T[] {
  const own = directedTournaments(scope);
  return own === null ? rows : rows.filter((m) => m.role === 'owner' || m.role === 'coach' || (m.tournamentId !== null && own.includes(m.tournamentId)));
}

/** People with their roles, and what has been offered. `text` narrows both by name, address or role. */
export async function loadPeople(scope: Scope, text = ''): Promise<{ people: PersonLine[]; invitations: InvitationLine[]; total: number }> {
  const { rows, offers } = await withScope(scope, async (tx) => ({ rows: await listMemberships(tx, scope), offers: await listInvitations(tx, scope) }));
  const byPerson = new Map<string, PersonLine>();
  for (const m of seen(scope, rows)) {
    const line = byPerson.get(m.personId) ?? { personId: m.personId, name: m.name, email: m.email, isSuspended: false, roles: [] };
    line.isSuspended ||= m.state === 'suspended';
    line.roles.push(roleLabel(m.role, m));
    byPerson.set(m.personId, line);
  }
  const fits = (...texts: string[]) => text === '' || texts.join(' ').toLowerCase().includes(text.toLowerCase());
  const people = [...byPerson.values()];
  return {
    people: people.filter((p) => fits(p.name, p.email, ...p.roles)),
    invitations: seen(scope, offers)
      .map((i): InvitationLine => ({
        id: i.id,
        email: i.email,
        label: roleLabel(i.role, i),
        invitedBy: i.invitedBy,
        createdAt: i.createdAt,
        expiresAt: i.expiresAt,
        state: i.declined ? 'declined' : i.expiresAt <= now() ? 'expired' : 'open',
        mayChange: canOffer(scope, i),
      }))
      .filter((i) => fits(i.email, i.label)),
    total: people.length,
  };
}

/** Tournaments of the last two months and those to come, with their events, and the schools: where somebody can be given a role. */
export function loadPlaces(scope: Scope, zone: string): Promise<Places> {
  return withScope(scope, (tx) => listPlaces(tx, scope, directedTournaments(scope), dayOf(new Date(now().getTime() - 60 * 86_400_000), zone)));
}

export interface HeldRole {
  id: string;
  label: string;
  since: Date;
  role: MembershipRow['role'];
  tournamentId: string | null;
  eventId: string | null;
  schoolId: string | null;
  mayRemove: boolean;
}

/**
 * One person with the roles that may be seen.
 *
 * @throws AppError not-found when they are not in the organization, or nothing of theirs may be seen
 */
export async function loadPerson(scope: Scope, personId: string): Promise<{ personId: string; name: string; email: string; isSuspended: boolean; isSelf: boolean; roles: HeldRole[] }> {
  if (!isId(personId)) throw notFound();
  const rows = seen(scope, await withScope(scope, (tx) => membershipsOf(tx, scope, personId)));
  const [first] = rows;
  if (!first) throw notFound();
  return {
    personId,
    name: first.name,
    email: first.email,
    isSuspended: rows.some((m) => m.state === 'suspended'),
    isSelf: personId === scope.actor.personId,
    roles: rows.map((m) => ({
      id: m.id,
      label: roleLabel(m.role, m),
      since: m.createdAt,
      role: m.role,
      tournamentId: m.tournamentId,
      eventId: m.eventId,
      schoolId: m.schoolId,
      mayRemove: canTake(scope, m),
    })),
  };
}

export interface Offer {
  state: 'open' | 'accepted' | 'withdrawn' | 'expired' | 'unknown';
  /** Nothing when the link leads to no invitation. */
  invitation: (Pick<InvitationRow, 'email' | 'invitedBy' | 'expiresAt'> & { label: string }) | null;
  /** Who looks: nobody signed in, the one invited, the one invited before confirming the address, or somebody else. */
  visitor: 'nobody' | 'invited' | 'unconfirmed' | 'other';
  /** Where the work of the role is done, for whoever accepted it. */
  goTo: string | null;
}

/** What the link of an invitation offers, to whoever has the link. */
export async function loadOffer(org: OrgInfo, scope: Scope, person: SignedIn | null, token: string): Promise<Offer> {
  const found = /^[A-Za-z0-9_-]{20,80}$/.test(token) ? await withScope(scope, (tx) => findInvitation(tx, scope, hashToken(token))) : null;
  const visitor = !person ? 'nobody' : found && person.email.toLowerCase() !== found.email.toLowerCase() ? 'other' : person.emailVerified ? 'invited' : 'unconfirmed';
  if (!found) return { state: 'unknown', invitation: null, visitor, goTo: null };
  return {
    state: found.acceptedAt ? 'accepted' : found.revokedAt ? 'withdrawn' : found.expiresAt <= now() ? 'expired' : 'open',
    invitation: { email: found.email, invitedBy: found.invitedBy, expiresAt: found.expiresAt, label: roleLabel(found.role, found) },
    visitor,
    goTo: found.acceptedAt && found.acceptedBy === person?.personId ? workPath(org.slug, found.role, found) : null,
  };
}
