/** `npm run reset`: gives back the first day. Takes away the database, the inbox and the state; what is built stays. */
import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { LOCAL, STATE_FILE } from './local/paths.mjs';
import { findPostgres, openCluster, stopServer } from './local/postgres.mjs';
import { Session } from './local/session.mjs';
import { Trouble, report } from './local/trouble.mjs';

async function main() {
  const session = new Session('start');
  const other = await session.take();
  if (other) throw new Trouble(`Fairlead is running${other.url ? ` at ${other.url}` : ''}: stop it with Ctrl-C first, then reset.`);
  try {
    await session.clearLeftovers();
    const postgres = findPostgres();
    if (postgres) {
      const cluster = openCluster({ wanted: join(LOCAL, 'pg'), log: join(LOCAL, 'logs', 'postgres.log'), postgres });
      await stopServer(cluster);
      rmSync(cluster.home, { recursive: true, force: true });
    }
    for (const path of [join(LOCAL, 'pg'), join(LOCAL, 'accounts.json'), join(LOCAL, 'mail.jsonl'), STATE_FILE]) {
      rmSync(path, { recursive: true, force: true });
    }
  } finally {
    session.release();
  }
  console.log('Everything is as on the first day. "npm start" makes the database and the demo anew.');
}

await main().catch(report);
