/**
 * Bring a database up to date: Drizzle's migrations, then the job queue's own tables and queues,
 * all as the role that owns them. Safe to run again and beside another run.
 *
 * Reads DATABASE_OWNER_URL. Prints one line.
 */
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';
import PgBoss from 'pg-boss';
import { fileURLToPath } from 'node:url';
import { JOB_SCHEMA, QUEUES, type QueueName } from '../src/server/jobs';

const url = process.env.DATABASE_OWNER_URL;
if (!url) {
  console.error('DATABASE_OWNER_URL is not set: migrations run as the role that owns the tables.');
  process.exit(1);
}

const began = Date.now();
const client = new pg.Client({ connectionString: url, application_name: 'fairlead-migrate' });
await client.connect();
try {
  await client.query("select pg_advisory_lock(hashtextextended('fairlead-migrate', 0))");
  // Never stand in front of a working day's traffic: give up on a lock after a second, and try again.
  await client.query("set lock_timeout = '1s'");
  for (let attempt = 1; ; attempt++) {
    try {
      await migrate(drizzle(client), { migrationsFolder: fileURLToPath(new URL('../drizzle', import.meta.url)) });
      break;
    } catch (error) {
      const code = (error as { code?: string; cause?: { code?: string } }).cause?.code ?? (error as { code?: string }).code;
      if (code !== '55P03' || attempt >= 20) throw error;
      await new Promise((r) => setTimeout(r, 500 * attempt));
    }
  }
  await client.query('set lock_timeout = 0');
  const boss = new PgBoss({ connectionString: url, schema: JOB_SCHEMA, migrate: true, supervise: false, schedule: false, max: 2 });
  boss.on('error', (e) => console.error(e.message));
  await boss.start();
  const existing = new Set((await boss.getQueues()).map((q) => q.name));
  for (const queue of Object.keys(QUEUES) as QueueName[]) {
    if (!existing.has(queue)) await boss.createQueue(queue, { name: queue, policy: 'standard', ...QUEUES[queue] });
  }
  await boss.stop({ graceful: false });
  await client.query(`grant usage on schema ${JOB_SCHEMA} to fairlead_app`);
  await client.query(`grant select, insert, update, delete on all tables in schema ${JOB_SCHEMA} to fairlead_app`);
  await client.query(`grant execute on all functions in schema ${JOB_SCHEMA} to fairlead_app`);
} finally {
  await client.end();
}
console.log(`migrated in ${((Date.now() - began) / 1000).toFixed(1)} s`);
process.exit(0);
