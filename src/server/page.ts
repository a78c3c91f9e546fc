import type { AstroGlobal } from 'astro';
import { admit, type Access } from './access';
import type { OrgInfo, SignedIn, TournamentInfo } from './request-scope';
import type { Scope } from './scope';

export interface PageContext {
  person: SignedIn | null;
  org: OrgInfo | null;
  tournament: TournamentInfo | null;
  scope: Scope | null;
}

/**
 * Called first by every page: lets the visitor in or throws what the middleware turns into the
 * sign-in page, 403 or 404. Private pages are never stored by anybody in between.
 */
export function requirePage(astro: AstroGlobal, access: Access): PageContext {
  const { locals, params } = astro;
  admit(access, locals, { org: 'org' in params, tournament: 'tournament' in params });
  if (access !== 'public') astro.response.headers.set('cache-control', 'no-store');
  return { person: locals.person, org: locals.org, tournament: locals.tournament, scope: locals.scope };
}

/** The same for a page inside an organization, whose address always names one. */
export function requireOrgPage(astro: AstroGlobal, access: Access): { person: SignedIn | null; org: OrgInfo; scope: Scope } {
  const { person, org, scope } = requirePage(astro, access);
  if (!org || !scope) throw new Error('this page is not inside an organization');
  return { person, org, scope };
}

/** The same for a page of one tournament. */
export function requireTournamentPage(
  astro: AstroGlobal,
  access: Access,
): { person: SignedIn | null; org: OrgInfo; scope: Scope; tournament: TournamentInfo } {
  const page = requireOrgPage(astro, access);
  if (!astro.locals.tournament) throw new Error('this page is not inside a tournament');
  return { ...page, tournament: astro.locals.tournament };
}
