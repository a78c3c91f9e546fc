import { readSessionCookie, validateSession } from './authentication';
import { pool, prepared } from './database';
import { newId } from './ids';
import { makeScope, type Grant, type Scope } from './scope';

/** Who is signed in. */
export interface SignedIn {
  personId: string;
  name: string;
  email: string;
  emailVerified: boolean;
  isOperator: boolean;
  sessionId: string;
}

/** What the address names. */
export interface OrgInfo {
  id: string;
  slug: string;
  name: string;
  timeZone: string;
  currency: string;
  contact: string;
  isDemo: boolean;
  isSuspended: boolean;
}
export interface TournamentInfo {
  id: string;
  slug: string;
  name: string;
  shortName: string;
  /** YYYY-MM-DD. */
  day: string;
  /** HH:MM on the wall. */
  startsAt: string;
  endsAt: string;
  isPublished: boolean;
}

export interface RequestScope {
  person: SignedIn | null;
  org: OrgInfo | null;
  tournament: TournamentInfo | null;
  scope: Scope | null;
  /** A Set-Cookie value to send along, when the session's idle limit moved on or it ended. */
  cookie: string | null;
}

const SLUG = /^[a-z0-9](-?[a-z0-9])*$/;

/** True for a text that can be an address part. */
export function isSlug(text: string | undefined): text is string {
  return text !== undefined && text.length <= 64 && SLUG.test(text);
}

/**
 * Session → person → organization → grants → scope, for one request. Used by the pages, the
 * endpoints and the live streams alike; two round trips.
 */
export async function resolveRequest(cookieHeader: string | null | undefined, orgSlug?: string, tournamentSlug?: string): Promise<RequestScope> {
  const out: RequestScope = { person: null, org: null, tournament: null, scope: null, cookie: null };
  const sessionId = readSessionCookie(cookieHeader);
  if (sessionId) {
    const found = await validateSession(sessionId);
    out.cookie = found.cookie;
    if (found.user) {
      out.person = {
        personId: found.user.id,
        name: found.user.name,
        email: found.user.email,
        emailVerified: found.user.emailVerifiedAt !== null,
        isOperator: found.user.isOperator,
        sessionId,
      };
    }
  }
  return { ...out, ...(await resolvePlace(out.person, orgSlug, tournamentSlug)) };
}

/** What an address names and what this person may do there; all null when it names nothing. For pages that span organizations. */
export async function resolvePlace(person: SignedIn | null, orgSlug?: string, tournamentSlug?: string): Promise<Pick<RequestScope, 'org' | 'tournament' | 'scope'>> {
  if (!isSlug(orgSlug)) return { org: null, tournament: null, scope: null };
  const { rows } = await pool().query(
    prepared('resolve_scope', 'select resolve_scope($1, $2, $3) as r', [orgSlug, isSlug(tournamentSlug) ? tournamentSlug : null, person?.personId ?? null]),
  );
  const r = rows[0]?.r as { org: OrgInfo; tournament: TournamentInfo | null; grants: Grant[] } | null;
  if (!r) return { org: null, tournament: null, scope: null };
  return {
    org: r.org,
    tournament: r.tournament,
    scope: makeScope({
      orgId: r.org.id,
      orgSlug: r.org.slug,
      actor: person ? { kind: 'person', personId: person.personId, name: person.name } : { kind: 'public', personId: null, name: 'the public' },
      grants: r.grants,
      tournamentId: r.tournament?.id ?? null,
    }),
  };
}

/**
 * The scope in which somebody founds an organization: its id is made here, so whatever is done with it can reach nothing that
 * exists already. For the command that creates an organization alone.
 */
export function foundingScope(person: SignedIn, slug: string): Scope {
  return makeScope({
    orgId: newId(),
    orgSlug: slug,
    actor: { kind: 'person', personId: person.personId, name: person.name },
    grants: [{ role: 'owner', tournamentId: null, eventId: null, schoolId: null }],
    tournamentId: null,
  });
}
