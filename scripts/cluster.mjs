/**
 * The development cluster by itself, for working on the database without the application.
 *
 *   node scripts/cluster.mjs ensure   makes and starts it, prints {"port", "ownerUrl", "appUrl", "adminUrl"}
 *   node scripts/cluster.mjs stop     stops it
 */
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { LOCAL, LOGS } from './local/paths.mjs';
import { adminUrl, connectionUrl, createCluster, ensureDatabase, ensureRoles, openCluster, startServer, stopServer } from './local/postgres.mjs';
import { Session } from './local/session.mjs';
import { readState, secrets, updateState } from './local/state.mjs';
import { Trouble, report } from './local/trouble.mjs';

/** The handle on the checkout's cluster; see `openCluster`. */
export function developmentCluster() {
  return openCluster({ wanted: join(LOCAL, 'pg'), log: join(LOGS, 'postgres.log') });
}

/**
 * Makes what is missing of the development cluster, its roles and its database, and has its server running.
 * Gives `{cluster, created, port, ownerUrl, appUrl, adminUrl}`.
 */
export async function ensureDevelopmentCluster(cluster = developmentCluster()) {
  const turn = new Session('cluster');
  while (await turn.take()) await sleep(100);
  try {
    const created = await createCluster(cluster);
    await startServer(cluster, { port: readState().clusterPort });
    updateState((state) => { state.clusterPort = cluster.port; });
    const { ownerPassword, appPassword } = secrets();
    await ensureRoles(cluster, { ownerPassword, appPassword });
    await ensureDatabase(cluster, 'fairlead');
    return {
      cluster,
      created,
      port: cluster.port,
      ownerUrl: connectionUrl(cluster, 'fairlead_owner', ownerPassword, 'fairlead'),
      appUrl: connectionUrl(cluster, 'fairlead_app', appPassword, 'fairlead'),
      adminUrl: adminUrl(cluster),
    };
  } finally {
    turn.release();
  }
}

async function main(verb) {
  if (verb === 'ensure') {
    const { port, ownerUrl, appUrl, adminUrl: admin } = await ensureDevelopmentCluster();
    console.log(JSON.stringify({ port, ownerUrl, appUrl, adminUrl: admin }));
  } else if (verb === 'stop') {
    await stopServer(developmentCluster());
  } else {
    throw new Trouble('Say what to do: node scripts/cluster.mjs ensure, or node scripts/cluster.mjs stop.');
  }
}

if (import.meta.url === `file://${process.argv[1]}`) await main(process.argv[2]).catch(report);
