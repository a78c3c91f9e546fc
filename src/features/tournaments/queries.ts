import { and, asc, eq, sql } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { divisions, tournaments } from './tables';
import type { DivisionRow, EventCounts, TournamentCounts, TournamentNavigation } from './types';

/** The whole row of the tournament that the address names. @throws AppError not-found */
export async function getTournament(tx: Tx, scope: Scope): Promise<typeof tournaments.$inferSelect> {
  if (!scope.tournamentId) throw notFound();
  return getTournamentInScope(tx, scope, scope.tournamentId);
}

/** A tournament by id; missing and foreign look alike. @throws AppError not-found */
export async function getTournamentInScope(tx: Tx, scope: Scope, tournamentId: string): Promise<typeof tournaments.$inferSelect> {
  const [row] = await tx.select().from(tournaments).where(and(eq(tournaments.orgId, scope.orgId), eq(tournaments.id, tournamentId)));
  if (!row) throw notFound();
  return row;
}

/** The tournament's divisions in their order. */
export async function listDivisions(tx: Tx, scope: Scope, tournamentId: string): Promise<DivisionRow[]> {
  return tx
    .select({
      id: divisions.id,
      slug: divisions.slug,
      name: divisions.name,
      letter: divisions.letter,
      shape: divisions.shape,
      position: divisions.position,
    })
    .from(divisions)
    .where(and(eq(divisions.orgId, scope.orgId), eq(divisions.tournamentId, tournamentId)))
    .orderBy(asc(divisions.position), asc(divisions.name));
}

/** A division of the tournament by id. @throws AppError not-found */
export async function getDivisionInScope(tx: Tx, scope: Scope, tournamentId: string, divisionId: string): Promise<DivisionRow> {
  const found = (await listDivisions(tx, scope, tournamentId)).find((d) => d.id === divisionId);
  if (!found) throw notFound();
  return found;
}

/** Counts for the rail, in one statement. */
export async function loadNavigation(tx: Tx, scope: Scope): Promise<TournamentNavigation> {
  const t = scope.tournamentId;
  const { rows } = await tx.execute(sql`
    select
      (select count(*)::int from events e where e.org_id = ${scope.orgId} and e.tournament_id = ${t}) as events,
      (select count(*)::int from events e where e.org_id = ${scope.orgId} and e.tournament_id = ${t} and e.state <> 'open') as handed_in,
      (select count(*)::int from teams x where x.org_id = ${scope.orgId} and x.tournament_id = ${t} and x.state = 'confirmed') as teams,
      (select count(*)::int from releases r where r.org_id = ${scope.orgId} and r.tournament_id = ${t}) as releases,
      (select coalesce(json_agg(json_build_object('slug', e.slug, 'name', e.name, 'letter', d.letter) order by e.name, d.position), '[]'::json)
         from memberships m join events e on e.org_id = m.org_id and e.id = m.event_id join divisions d on d.org_id = e.org_id and d.id = e.division_id
        where m.org_id = ${scope.orgId} and m.person_id = ${scope.actor.personId} and m.role = 'leader' and m.state = 'active' and e.tournament_id = ${t}) as mine`);
  const r = rows[0]! as { events: number; handed_in: number; teams: number; releases: number; mine: TournamentNavigation['mine'] };
  return { events: r.events, handedIn: r.handed_in, teams: r.teams, releases: r.releases, mine: r.mine };
}

/** How far every event of a tournament is: two statements, whatever the number of events. Withdrawn teams do not count. */
export async function countsOf(tx: Tx, scope: Scope, tournamentId: string): Promise<TournamentCounts> {
  const [teamRows, eventRows] = await Promise.all([
    tx.execute<{ division: string; confirmed: number; entered: number }>(sql`
      select division_id as division, count(*) filter (where state = 'confirmed')::int as confirmed, count(*)::int as entered
        from teams where org_id = ${scope.orgId} and tournament_id = ${tournamentId} group by division_id`),
    tx.execute<{ event: string; parts: number; out: boolean; teams: number; last: Date | null }>(sql`
      select event_id as event, parts, out, count(*)::int as teams, max(last) as last from (
        select r.event_id, r.team_id,
               count(*) filter (where r.part <> 'status')::int as parts,
               coalesce(bool_or(r.part = 'status' and r.value->>'status' in ('dns', 'dq')), false) as out,
               max(r.kept_at) as last
          from readings r
          join events e on e.org_id = r.org_id and e.id = r.event_id
          join teams t on t.org_id = r.org_id and t.id = r.team_id and t.state = 'confirmed'
         where r.org_id = ${scope.orgId} and e.tournament_id = ${tournamentId}
         group by r.event_id, r.team_id) x
       group by event_id, parts, out`),
  ]);
  const out: TournamentCounts = { confirmed: {}, entered: {}, events: {} };
  for (const r of teamRows.rows) {
    out.confirmed[r.division] = r.confirmed;
    out.entered[r.division] = r.entered;
  }
  for (const r of eventRows.rows) {
    const mine: EventCounts = (out.events[r.event] ??= { kept: 0, out: 0, full: {}, lastKeptAt: null });
    const last = r.last === null ? null : new Date(r.last).toISOString();
    if (last !== null && (mine.lastKeptAt === null || last > mine.lastKeptAt)) mine.lastKeptAt = last;
    if (r.out) {
      mine.out += r.teams;
    } else {
      mine.kept += r.parts * r.teams;
      mine.full[r.parts] = (mine.full[r.parts] ?? 0) + r.teams;
    }
  }
  return out;
}
