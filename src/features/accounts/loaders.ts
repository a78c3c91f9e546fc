import { dayOf, formatShortDay } from '~/domain/time';
import { now } from '~/server/clock';
import { withPerson, withScope } from '~/server/database';
import { environment } from '~/server/environment';
import { resolvePlace, type SignedIn } from '~/server/request-scope';
import { deriveToken, hashToken } from '~/server/tokens';
import { roleLabel } from '../organizations/assembly';
import { getInvitation, listOfficeTournaments, membershipsOf } from '../organizations/queries';
import { landingPath, placePath } from './assembly';
import { getLiveCode, listOwnInvitations, listOwnOrganizations, listSessions, newestTournamentOf, someAddresses } from './queries';
import type { Belonging, OpenInvitation, SessionRow } from './types';

/** One organization with the roles that somebody holds in it. */
async function loadBelonging(person: SignedIn, slug: string): Promise<Belonging | null> {
  const { org, scope } = await resolvePlace(person, slug);
  if (!org || !scope) return null;
  return withScope(scope, async (tx) => {
    const held = await membershipsOf(tx, scope, person.personId);
    const schools = held.flatMap((m) => (m.role === 'coach' && m.schoolId ? [m.schoolId] : []));
    const newest = schools.length > 0 ? await newestTournamentOf(tx, scope, schools) : new Map<string, string>();
    return {
      slug: org.slug,
      name: org.name,
      isSuspended: org.isSuspended || held.every((m) => m.state === 'suspended'),
      places: held
        .filter((m) => m.state === 'active')
        .map((m) => ({
          role: m.role,
          label: roleLabel(m.role, m),
          href: org.isSuspended ? null : placePath(org.slug, m.role, { ...m, schoolTournament: m.schoolId ? (newest.get(m.schoolId) ?? null) : null }),
        })),
    };
  });
}

/** The organizations somebody belongs to, by name, with where the work of each role is. */
export async function loadBelongings(person: SignedIn): Promise<Belonging[]> {
  const own = await withPerson(person.personId, (tx) => listOwnOrganizations(tx, person.personId));
  const out: Belonging[] = [];
  // One after another: somebody in many organizations must not take all the connections.
  for (const { slug } of own) {
    const found = await loadBelonging(person, slug);
    if (found) out.push(found);
  }
  return out;
}

/** Where somebody goes who has just signed in, and was not on the way anywhere. */
export async function loadLanding(personId: string): Promise<string> {
  // Only the id is looked at by what follows.
  const person: SignedIn = { personId, name: '', email: '', emailVerified: true, isOperator: false, sessionId: '' };
  return landingPath(await loadBelongings(person));
}

/** Invitations that wait for somebody's confirmed address. */
async function loadInvitations(person: SignedIn): Promise<OpenInvitation[]> {
  const waiting = await withPerson(person.personId, (tx) => listOwnInvitations(tx, person.email));
  const out: OpenInvitation[] = [];
  for (const { id, slug } of waiting) {
    const { org, scope } = await resolvePlace(person, slug);
    if (!org || !scope || org.isSuspended) continue;
    const invitation = await withScope(scope, (tx) => getInvitation(tx, scope, id));
    out.push({
      id,
      organization: org.name,
      label: roleLabel(invitation.role, invitation),
      href: `/${org.slug}/join/${deriveToken('invitation', id)}`,
      until: formatShortDay(dayOf(invitation.expiresAt, org.timeZone)),
    });
  }
  return out;
}

export interface AccountPage {
  belongings: Belonging[];
  invitations: OpenInvitation[];
  sessions: (SessionRow & { isThis: boolean })[];
  now: Date;
}

/** What somebody's own page shows. */
export async function loadAccount(person: SignedIn): Promise<AccountPage> {
  const here = hashToken(person.sessionId);
  const sessions = await withPerson(person.personId, (tx) => listSessions(tx, person.personId));
  return {
    belongings: await loadBelongings(person),
    invitations: await loadInvitations(person),
    sessions: sessions.map((s) => ({ ...s, isThis: s.id === here })).sort((a, b) => Number(b.isThis) - Number(a.isThis)),
    now: now(),
  };
}

export interface LinkPage {
  purpose: 'verify' | 'change';
  /** The address that the link confirms. */
  email: string;
  /** The browser that asked for it, so no password is needed. */
  isHere: boolean;
}

/** What a link that confirms an address is for; null when it no longer works. Looking uses nothing up. */
export async function loadVerifyLink(token: string, startedCodeId: string | null): Promise<LinkPage | null> {
  const code = await withPerson(null, (tx) => getLiveCode(tx, ['verify', 'change'], token));
  if (!code) return null;
  return { purpose: code.purpose === 'change' ? 'change' : 'verify', email: code.email ?? code.personEmail, isHere: code.purpose === 'change' || code.id === startedCodeId };
}

/** Whose password a link sets; null when it no longer works. Looking uses nothing up. */
export async function loadResetLink(token: string): Promise<{ email: string } | null> {
  const code = await withPerson(null, (tx) => getLiveCode(tx, ['reset'], token));
  return code && { email: code.personEmail };
}

/** In the demo, the public programmes to look at; elsewhere none. */
export async function loadDemoProgrammes(): Promise<{ name: string; organization: string; day: string; href: string }[]> {
  if (!environment().FAIRLEAD_DEMO) return [];
  const out: { name: string; organization: string; day: string; href: string }[] = [];
  for (const slug of await withPerson(null, someAddresses)) {
    const { org, scope } = await resolvePlace(null, slug);
    if (!org?.isDemo || !scope) continue;
    const all = await withScope(scope, (tx) => listOfficeTournaments(tx, scope));
    out.push(...all.filter((t) => t.isPublished).map((t) => ({ name: t.name, organization: org.name, day: t.day, href: `/${slug}/${t.slug}` })));
  }
  return out.slice(0, 6);
}
