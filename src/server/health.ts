import { readFileSync } from 'node:fs';
import { pool } from './database';
import { JOB_SCHEMA } from './jobs';
import { singleton } from './singleton';

export interface Readiness {
  ready: boolean;
  database: boolean;
  migrations: boolean;
  queue: boolean;
}

/** How many migrations this build knows; counted when it is built or, from source, read from the journal. */
declare const __MIGRATIONS__: number | undefined;

function knownMigrations(): number {
  return singleton('known-migrations', () => {
    if (typeof __MIGRATIONS__ === 'number') return __MIGRATIONS__;
    const journal = JSON.parse(readFileSync(new URL('../../drizzle/meta/_journal.json', import.meta.url), 'utf8')) as { entries: unknown[] };
    return journal.entries.length;
  });
}

/** Whether the database answers, is migrated as far as this build needs, and the job queue is there. */
export async function readiness(stopping: boolean): Promise<Readiness> {
  const out: Readiness = { ready: false, database: false, migrations: false, queue: false };
  try {
    const { rows } = await pool().query(
      `select schema_is_migrated($1) as migrated, (select count(*) from ${JOB_SCHEMA}.version) as queue`,
      [knownMigrations()],
    );
    out.database = true;
    out.migrations = rows[0]?.migrated === true;
    out.queue = Number(rows[0]?.queue) > 0;
  } catch {
    // Not ready says it all.
  }
  out.ready = !stopping && out.database && out.migrations && out.queue;
  return out;
}
