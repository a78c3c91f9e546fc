import { sql, type SQL } from 'drizzle-orm';
import { dayOf, momentAt } from '~/domain/time';
import { now } from '~/server/clock';
import type { Tx } from '~/server/database';
import { newId } from '~/server/ids';
import type { Scope } from '~/server/scope';
import { actionsSaying } from './assembly';
import { AUDIT_KINDS } from './constants';
import { auditEntries } from './tables';
import type { AuditCursor, AuditFilter, AuditRow } from './types';

/** What an audit row tells. */
export interface AuditNote {
  /** The command's noun and verb: `tournament.created`. */
  action: string;
  subjectType: string;
  subjectId: string | null;
  tournamentId?: string | null;
  /** Before and after or whatever tells the story; no secrets, no students' data. */
  detail?: Record<string, unknown>;
}

/** Write the audit row of a command, in the command's own transaction. */
export async function writeAudit(tx: Tx, scope: Scope, note: AuditNote): Promise<void> {
  await tx.insert(auditEntries).values({
    orgId: scope.orgId,
    id: newId(),
    at: now(),
    actorId: scope.actor.personId,
    action: note.action,
    subjectType: note.subjectType,
    subjectId: note.subjectId,
    tournamentId: note.tournamentId ?? null,
    detail: note.detail ?? {},
  });
}

function conditions(scope: Scope, filter: AuditFilter, zone: string): SQL {
  const kind = AUDIT_KINDS.find((k) => k.value === filter.kind);
  const parts: SQL[] = [sql`a.org_id = ${scope.orgId}`];
  if (filter.person) parts.push(sql`a.actor_id = ${filter.person}::uuid`);
  if (filter.kind) parts.push(kind ? sql`split_part(a.action, '.', 1) = any(${sql.param([...kind.nouns])}::text[])` : sql`false`);
  if (filter.tournament) parts.push(sql`a.tournament_id = ${filter.tournament}::uuid`);
  if (filter.from) parts.push(sql`a.at >= ${momentAt(filter.from, '00:00', zone).toISOString()}::timestamptz`);
  if (filter.to) {
    const after = dayOf(new Date(Date.parse(`${filter.to}T12:00:00Z`) + 86_400_000), 'UTC');
    parts.push(sql`a.at < ${momentAt(after, '00:00', zone).toISOString()}::timestamptz`);
  }
  if (filter.text) {
    const has = (column: SQL) => sql`strpos(lower(${column}), lower(${filter.text})) > 0`;
    parts.push(sql`(a.action = any(${sql.param(actionsSaying(filter.text))}::text[])
      or ${has(sql`a.detail::text`)}
      or a.actor_id in (select p.id from people p where ${has(sql`p.name`)})
      or a.tournament_id in (select t.id from tournaments t where t.org_id = a.org_id and ${has(sql`t.name`)})
      or a.subject_id in (
        select e.id from events e where e.org_id = ${scope.orgId} and ${has(sql`e.name`)}
        union all select m.id from teams m where m.org_id = ${scope.orgId} and ${has(sql`m.name`)}
        union all select s.id from schools s where s.org_id = ${scope.orgId} and ${has(sql`s.name`)})
      or a.detail->>'team' in (select m.id::text from teams m where m.org_id = ${scope.orgId} and ${has(sql`m.name`)}))`);
  }
  return sql.join(parts, sql` and `);
}

/** The latest entries that fit, from the cursor on, with the names that their ids stand for. */
export async function listAudit(tx: Tx, scope: Scope, filter: AuditFilter, zone: string, cursor: AuditCursor | null, most: number): Promise<AuditRow[]> {
  const after = cursor ? sql`and (a.at, a.id) < (${cursor.at.toISOString()}::timestamptz, ${cursor.id}::uuid)` : sql``;
  const { rows } = await tx.execute(sql`
    with page as (select a.* from audit_entries a where ${conditions(scope, filter, zone)} ${after} order by a.at desc, a.id desc limit ${most})
    select a.id, a.at, a.action, a.subject_type as "subjectType", a.detail, p.name as actor, t.short_name as tournament,
      case a.subject_type when 'event' then e.name || ' (' || ed.name || ')' when 'team' then td.letter || lpad(m.number::text, 2, '0') || ' ' || m.name
        when 'school' then s.name when 'tournament' then st.name when 'person' then sp.name when 'division' then dv.name end as subject,
      nd.letter || lpad(n.number::text, 2, '0') || ' ' || n.name as team, np.name as person
    from page a
      left join people p on p.id = a.actor_id
      left join tournaments t on t.org_id = a.org_id and t.id = a.tournament_id
      left join events e on a.subject_type = 'event' and e.org_id = a.org_id and e.id = a.subject_id
      left join divisions ed on ed.org_id = e.org_id and ed.id = e.division_id
      left join teams m on a.subject_type = 'team' and m.org_id = a.org_id and m.id = a.subject_id
      left join divisions td on td.org_id = m.org_id and td.id = m.division_id
      left join schools s on a.subject_type = 'school' and s.org_id = a.org_id and s.id = a.subject_id
      left join tournaments st on a.subject_type = 'tournament' and st.org_id = a.org_id and st.id = a.subject_id
      left join divisions dv on a.subject_type = 'division' and dv.org_id = a.org_id and dv.id = a.subject_id
      left join people sp on a.subject_type = 'person' and sp.id = a.subject_id
      left join teams n on n.org_id = a.org_id and n.id = case when a.detail->>'team' ~ '^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$' then (a.detail->>'team')::uuid end
      left join divisions nd on nd.org_id = n.org_id and nd.id = n.division_id
      left join people np on np.id = case when a.detail->>'person' ~ '^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$' then (a.detail->>'person')::uuid end
    order by a.at desc, a.id desc`);
  return (rows as unknown as (Omit<AuditRow, 'at'> & { at: string | Date })[]).map((r) => ({ ...r, at: new Date(r.at) }));
}

/** How many entries fit, counted up to a limit. */
export async function countAudit(tx: Tx, scope: Scope, filter: AuditFilter, zone: string, most: number): Promise<number> {
  const { rows } = await tx.execute<{ n: number }>(sql`select count(*)::int as n from (select 1 from audit_entries a where ${conditions(scope, filter, zone)} limit ${most}) x`);
  return rows[0]!.n;
}

/** Whoever has done something here, and the tournaments it was done in, by name. */
export async function listAuditChoices(tx: Tx, scope: Scope): Promise<{ people: { value: string; label: string }[]; tournaments: { value: string; label: string }[] }> {
  const { rows: people } = await tx.execute<{ value: string; label: string }>(
    sql`select p.id as value, p.name as label from (select distinct actor_id from audit_entries where org_id = ${scope.orgId}) a join people p on p.id = a.actor_id order by lower(p.name)`,
  );
  const { rows: tournaments } = await tx.execute<{ value: string; label: string }>(sql`select id as value, name as label from tournaments where org_id = ${scope.orgId} order by day desc, lower(name)`);
  return { people, tournaments };
}
