import { and, desc, eq, sql } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import type { Scope } from '~/server/scope';
import { people } from '../accounts/tables';
import { readingRevisions } from './tables';
import type { KeptParts, Revision, SettlementRow } from './types';

/**
 * What stands in an event, or in every event of a tournament: event → team → part. One statement, gathered as JSON, because
 * thousands of rows are slow to take apart one by one.
 */
export async function keptReadings(tx: Tx, scope: Scope, where: { eventId: string } | { tournamentId: string }): Promise<Map<string, Map<string, KeptParts>>> {
  const one = 'eventId' in where;
  const { rows } = await tx.execute<{ event: string; teams: Record<string, KeptParts> }>(sql`
    select x.event_id as event, json_object_agg(x.team_id, x.parts) as teams from (
      select r.event_id, r.team_id, json_object_agg(r.part, json_build_object('value', r.value, 'version', r.version, 'keptAt', r.kept_at, 'keptBy', p.name)) as parts
        from readings r
        join people p on p.id = r.kept_by
        ${one ? sql`where r.org_id = ${scope.orgId} and r.event_id = ${where.eventId}` : sql`join events e on e.org_id = r.org_id and e.id = r.event_id where r.org_id = ${scope.orgId} and e.tournament_id = ${where.tournamentId}`}
       group by r.event_id, r.team_id) x
     group by x.event_id`);
  return new Map(rows.map((r) => [r.event, new Map(Object.entries(r.teams))]));
}

/** Settled findings of an event, or of every event of a tournament. */
export async function listSettlements(tx: Tx, scope: Scope, where: { eventId: string } | { tournamentId: string }): Promise<SettlementRow[]> {
  const { rows } = await tx.execute(sql`
    select s.id, s.event_id as "eventId", s.team_id as "teamId", s.kind, s.fingerprint, s.outcome, s.reason, s.settled_at as "settledAt", p.name as "settledBy"
      from settlements s join people p on p.id = s.settled_by
      ${'eventId' in where ? sql`where s.org_id = ${scope.orgId} and s.event_id = ${where.eventId}` : sql`join events e on e.org_id = s.org_id and e.id = s.event_id where s.org_id = ${scope.orgId} and e.tournament_id = ${where.tournamentId}`}`);
  return rows as unknown as SettlementRow[];
}

/** Every value ever kept of a team in an event, newest first. */
export async function listRevisions(tx: Tx, scope: Scope, eventId: string, teamId: string): Promise<Revision[]> {
  const rows = await tx
    .select({
      part: readingRevisions.part,
      version: readingRevisions.version,
      value: readingRevisions.value,
      reason: readingRevisions.reason,
      keptAt: readingRevisions.keptAt,
      keptBy: people.name,
    })
    .from(readingRevisions)
    .innerJoin(people, eq(people.id, readingRevisions.keptBy))
    .where(and(eq(readingRevisions.orgId, scope.orgId), eq(readingRevisions.eventId, eventId), eq(readingRevisions.teamId, teamId)))
    .orderBy(desc(readingRevisions.keptAt), desc(readingRevisions.version));
  return rows.map((r) => ({ ...r, keptAt: r.keptAt.toISOString() }));
}

/** Every value ever kept in a tournament, by event, team and part, oldest first. */
export async function everyRevision(
  tx: Tx,
  scope: Scope,
  tournamentId: string,
): Promise<{ eventId: string; teamId: string; part: string; version: number; value: unknown; reason: string; keptAt: string; keptBy: string; stands: boolean }[]> {
  const { rows } = await tx.execute(sql`
    select v.event_id as "eventId", v.team_id as "teamId", v.part, v.version, v.value, v.reason, to_char(v.kept_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"') as "keptAt",
           p.name as "keptBy", r.version = v.version as stands
      from reading_revisions v
      join events e on e.org_id = v.org_id and e.id = v.event_id
      join people p on p.id = v.kept_by
      join readings r on r.org_id = v.org_id and r.event_id = v.event_id and r.team_id = v.team_id and r.part = v.part
     where v.org_id = ${scope.orgId} and e.tournament_id = ${tournamentId}
     order by e.name, v.event_id, v.team_id, v.part, v.version`);
  return rows as never;
}
