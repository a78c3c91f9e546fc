import { sql } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import { useTestDatabase } from '../factories/database';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTeam, makeTournament } from '../factories/world';
import { withPerson, withScope } from '~/server/database';
import { newId } from '~/server/ids';

const database = useTestDatabase();

/** Tables outside any organization, and why; every other table must be a guarded tenant table. */
const GLOBAL = ['people', 'sessions', 'one_time_codes', 'throttles', 'addresses'];

describe('every tenant table, read from the catalogue', () => {
  test('has row-level security enabled and forced, a policy with USING and WITH CHECK, and org_id first in its keys', async () => {
    const { rows } = await database.admin.query<{ name: string; enabled: boolean; forced: boolean; owner: string }>(
      `select c.relname as name, c.relrowsecurity as enabled, c.relforcerowsecurity as forced, pg_get_userbyid(c.relowner) as owner
         from pg_class c join pg_namespace n on n.oid = c.relnamespace where n.nspname = 'public' and c.relkind in ('r', 'p')`,
    );
    expect(rows.length).toBeGreaterThan(15);
    for (const table of rows) {
      expect(table.owner, table.name).toBe('fairlead_owner');
      if (GLOBAL.includes(table.name)) continue;
      expect(table, table.name).toMatchObject({ enabled: true, forced: true });
      const policies = await database.admin.query(`select polname, polcmd, polqual is not null as using, polwithcheck is not null as "check" from pg_policy where polrelid = $1::regclass`, [table.name]);
      expect(policies.rows.some((p) => p.polcmd === '*' && p.using && p.check), `${table.name} has a policy for every command`).toBe(true);
      for (const p of policies.rows) if (p.polcmd !== '*') expect(p.polcmd, `${table.name}.${p.polname} only reads`).toBe('r');
      const keys = await database.admin.query(
        `select i.indexrelid::regclass::text as index, a.attname as first from pg_index i join pg_attribute a on a.attrelid = i.indrelid and a.attnum = i.indkey[0]
          where i.indrelid = $1::regclass and (i.indisunique or i.indisprimary)`,
        [table.name],
      );
      expect(keys.rows.length, table.name).toBeGreaterThan(0);
      for (const key of keys.rows) expect(key.first, key.index).toBe('org_id');
    }
  });

  test('points at other tenant tables only by keys that begin with org_id', async () => {
    const { rows } = await database.admin.query<{ name: string; from: string; to: string; first: string }>(
      `select con.conname as name, con.conrelid::regclass::text as "from", con.confrelid::regclass::text as "to", a.attname as first
         from pg_constraint con join pg_attribute a on a.attrelid = con.conrelid and a.attnum = con.conkey[1]
        where con.contype = 'f' and con.connamespace = 'public'::regnamespace`,
    );
    for (const fk of rows) if (!GLOBAL.includes(fk.to)) expect(fk.first, `${fk.from}.${fk.name}`).toBe('org_id');
  });

  test('the application’s role owns nothing, by-passes nothing and cannot change history', async () => {
    const { rows } = await database.admin.query(`select rolsuper, rolbypassrls, rolcreatedb, rolcreaterole from pg_roles where rolname = 'fairlead_app'`);
    expect(rows[0]).toEqual({ rolsuper: false, rolbypassrls: false, rolcreatedb: false, rolcreaterole: false });
    const owned = await database.admin.query(`select count(*)::int as n from pg_class where relowner = 'fairlead_app'::regrole`);
    expect(owned.rows[0].n).toBe(0);
    for (const table of ['audit_entries', 'reading_revisions', 'kept_requests', 'releases']) {
      for (const right of ['UPDATE', 'DELETE', 'TRUNCATE']) {
        const { rows: r } = await database.admin.query(`select has_table_privilege('fairlead_app', $1, $2) as may`, [table, right]);
        expect(r[0].may, `${right} ${table}`).toBe(false);
      }
    }
  });
});

describe('two organizations', () => {
  test('neither sees, changes, nor points at what is the other’s', async () => {
    const a = await makeOrganization();
    const b = await makeOrganization();
    const ta = await makeTournament(a);
    const da = await makeDivision(a, ta.id);
    const sa = await makeSchool(a);
    await makeTeam(a, { tournamentId: ta.id, divisionId: da.id, schoolId: sa.id });
    await makeEvent(a, { tournamentId: ta.id, divisionId: da.id });
    await withScope(b.scope, async (tx) => {
      for (const table of ['tournaments', 'divisions', 'schools', 'teams', 'events', 'memberships', 'organizations', 'audit_entries']) {
        const { rows } = await tx.execute(sql.raw(`select count(*)::int as n from ${table} where org_id = '${a.id}'`));
        expect(rows[0]!['n'], table).toBe(0);
        const changed = table === 'audit_entries' ? { rowCount: 0 } : await tx.execute(sql.raw(`update ${table} set org_id = org_id where org_id = '${a.id}'`));
        expect(changed.rowCount, table).toBe(0);
      }
    });
    // Writing into the other organization is refused by WITH CHECK…
    await expect(
      withScope(b.scope, (tx) => tx.execute(sql`insert into schools (org_id, id, name, created_at) values (${a.id}, ${newId()}, 'Smuggled', now())`)),
    ).rejects.toMatchObject({ cause: { code: '42501' } });
    // …and a child that points at the other's parent by the composite key.
    const tb = await makeTournament(b);
    const db = await makeDivision(b, tb.id);
    await expect(makeTeam(b, { tournamentId: tb.id, divisionId: db.id, schoolId: sa.id })).rejects.toMatchObject({ cause: { code: '23503' } });
  });

  test('without an organization nothing is seen but one’s own memberships', async () => {
    const a = await makeOrganization();
    const b = await makeOrganization();
    const person = await makePerson();
    const t = await makeTournament(a);
    await grant(a, person, 'director', { tournamentId: t.id });
    await grant(b, await makePerson(), 'treasurer');
    await withPerson(person.id, async (tx) => {
      const seen = await tx.execute(sql`select org_id, person_id from memberships`);
      expect(seen.rows).toEqual([{ org_id: a.id, person_id: person.id }]);
      const orgs = await tx.execute(sql`select org_id from organizations`);
      expect(orgs.rows).toEqual([{ org_id: a.id }]);
      const tournaments = await tx.execute(sql`select id from tournaments`);
      expect(tournaments.rows).toEqual([]);
    });
    await withPerson(null, async (tx) => {
      const seen = await tx.execute(sql`select 1 from memberships`);
      expect(seen.rows).toEqual([]);
    });
  });

  test('a scope ends with its transaction: the next user of the connection sees nothing of it', async () => {
    const a = await makeOrganization();
    await withScope(a.scope, (tx) => tx.execute(sql`select 1`));
    await expect(withScope(a.scope, () => Promise.reject(new Error('halfway')))).rejects.toThrow('halfway');
    for (let i = 0; i < 25; i++) {
      await withPerson(null, async (tx) => {
        const { rows } = await tx.execute(sql`select count(*)::int as n from organizations`);
        expect(rows[0]!['n']).toBe(0);
      });
    }
  });

  test('a command that fails in the middle leaves nothing', async () => {
    const a = await makeOrganization();
    await expect(
      withScope(a.scope, async (tx) => {
        await tx.execute(sql`insert into schools (org_id, id, name, created_at) values (${a.id}, ${newId()}, 'Half done', now())`);
        throw new Error('killed');
      }),
    ).rejects.toThrow('killed');
    const { rows } = await database.admin.query('select count(*)::int as n from schools where org_id = $1', [a.id]);
    expect(rows[0].n).toBe(0);
  });
});
