import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import type { Tx } from '~/server/database';
import { notFound } from '~/server/errors';
import type { Scope } from '~/server/scope';
import { schools } from './tables';
import type { SchoolRow } from './types';

/** The organization's schools by name, with how many teams and coaches each has. */
export async function listSchools(tx: Tx, scope: Scope): Promise<SchoolRow[]> {
  const { rows } = await tx.execute(sql`
    select s.id, s.name, s.town,
      (select count(*)::int from teams t where t.org_id = s.org_id and t.school_id = s.id and t.state <> 'withdrawn') as teams,
      (select count(*)::int from memberships m where m.org_id = s.org_id and m.school_id = s.id and m.role = 'coach' and m.state = 'active') as coaches
    from schools s where s.org_id = ${scope.orgId} order by lower(s.name)`);
  return rows as unknown as SchoolRow[];
}

/** A school by id; missing and foreign look alike. @throws AppError not-found */
export async function getSchoolInScope(tx: Tx, scope: Scope, id: string): Promise<typeof schools.$inferSelect> {
  const [row] = await tx.select().from(schools).where(and(eq(schools.orgId, scope.orgId), eq(schools.id, id)));
  if (!row) throw notFound();
  return row;
}

/** Names of schools by id. */
export async function schoolNames(tx: Tx, scope: Scope, ids: string[]): Promise<{ id: string; name: string }[]> {
  if (ids.length === 0) return [];
  return tx
    .select({ id: schools.id, name: schools.name })
    .from(schools)
    .where(and(eq(schools.orgId, scope.orgId), inArray(schools.id, ids)))
    .orderBy(asc(schools.name));
}
