import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { environment } from './environment';
import { logger, errorForLog } from './logger';
import type { Scope } from './scope';
import { singleton } from './singleton';

/** A transaction's handle: Drizzle on one connection, and the connection for the job queue and prepared names. */
export interface Tx extends NodePgDatabase {
  readonly client: pg.ClientBase;
}

// bigint columns (device sequences, counts) are well below 2^53 here.
pg.types.setTypeParser(pg.types.builtins.INT8, (v) => Number(v));

/** The application's pool. Queries of one connection are pipelined, so a scope costs no extra round trip. */
export function pool(): pg.Pool {
  return singleton('pool', () => {
    const made = new pg.Pool({
      connectionString: environment().DATABASE_URL,
      max: environment().DATABASE_POOL,
      idleTimeoutMillis: 30_000,
      connectionTimeoutMillis: 10_000,
      application_name: 'fairlead',
      pipeline: true,
    } as pg.PoolConfig);
    made.on('error', (error) => logger().warn({ error: errorForLog(error) }, 'idle connection lost'));
    return made;
  });
}

/** A named prepared statement, unless names are switched off (see DATABASE_PREPARED_NAMES). */
export function prepared(name: string, text: string, values: unknown[]): pg.QueryConfig {
  return environment().DATABASE_PREPARED_NAMES ? { name, text, values } : { text, values };
}

function asTx(client: pg.PoolClient): Tx {
  return Object.assign(drizzle(client), { client }) as unknown as Tx;
}

async function inTransaction<T>(orgId: string, actorId: string, work: (tx: Tx) => Promise<T>): Promise<T> {
  const client = await pool().connect();
  let broken: Error | undefined;
  // Both are on the wire before the first statement of `work`; nobody waits for them alone.
  const begun = Promise.all([
    client.query('begin'),
    client.query(
      prepared('scope', "select set_config('app.org_id', $1, true), set_config('app.actor_id', $2, true)", [orgId, actorId]),
    ),
  ]);
  begun.catch(() => undefined);
  try {
    const result = await work(asTx(client));
    await begun;
    await client.query('commit');
    return result;
  } catch (error) {
    try {
      await client.query('rollback');
    } catch (e) {
      broken = e as Error;
    }
    throw error;
  } finally {
    client.release(broken);
  }
}

/**
 * The only way to a tenant table: one transaction in which row-level security lets through the
 * scope's organization and no other.
 */
export function withScope<T>(scope: Scope, work: (tx: Tx) => Promise<T>): Promise<T> {
  return inTransaction(scope.orgId, scope.actor.personId ?? '', work);
}

/**
 * One SQL function as a transaction of its own, in one round trip. The function's first two parameters are the organization and
 * the person, and it sets the scope from them itself, as `withScope` does for a transaction of several statements.
 *
 * @param call 'keep_reading($1, $2, $3)': the whole call; $1 and $2 are supplied from the scope, `values` follow
 */
export async function callInScope<T>(scope: Scope, name: string, call: string, values: unknown[]): Promise<T> {
  const { rows } = await pool().query(prepared(name, `select ${call} as r`, [scope.orgId, scope.actor.personId, ...values]));
  return rows[0]!.r as T;
}

/**
 * A transaction for one person outside any organization: their own memberships and invitations,
 * and the tables that belong to no organization.
 */
export function withPerson<T>(personId: string | null, work: (tx: Tx) => Promise<T>): Promise<T> {
  return inTransaction('', personId ?? '', work);
}

/** Close the pool once running queries have finished. */
export async function closeDatabase(): Promise<void> {
  await pool().end();
}
