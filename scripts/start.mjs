/**
 * `npm start`: everything from a bare checkout to a running application with its demo, on this machine only, and all of it
 * gone again at Ctrl-C. `npm run dev` (`--dev`) does the same with Astro's development server in place of the built one.
 *
 * Needs Node.js only. PORT and MAIL_FAKE_PORT choose the ports; LOG_LEVEL how much the application logs.
 */
import { chmodSync, existsSync, mkdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { developmentCluster, ensureDevelopmentCluster } from './cluster.mjs';
import { isBuilt, outDir, sourcesHash } from './local/build.mjs';
import { environment } from './local/environment.mjs';
import { checkNode, installNpmPackages, installPostgres } from './local/packages.mjs';
import { LOCAL, LOGS, ROOT, shown } from './local/paths.mjs';
import { dropDatabase, runningServer, startServer, stopServer } from './local/postgres.mjs';
import { freePort, tail, tryPort } from './local/processes.mjs';
import { Progress, table } from './local/progress.mjs';
import { Session } from './local/session.mjs';
import { readState, secrets, updateState } from './local/state.mjs';
import { Trouble, report } from './local/trouble.mjs';

const ACCOUNTS_FILE = join(LOCAL, 'accounts.json');
const MAIL_STORE = join(LOCAL, 'mail.jsonl');
const APP_PORT = 4321;
const MAIL_PORT = 4325;
const READY_WITHIN_MS = 90_000;

const dev = process.argv.includes('--dev');
const progress = new Progress();
const session = new Session('start');
let cluster = null;
let databaseWork = Promise.resolve();
let stopping = null;

/** A port to listen on: the one asked for by a variable, which must be free, or the usual one or the next free one. */
async function choosePort(variable, usual, avoid = []) {
  const asked = process.env[variable];
  if (!asked) {
    const port = await freePort(usual, avoid);
    if (port !== usual) progress.line(`Port ${usual} is taken; using ${port}`);
    return port;
  }
  const port = Number(asked);
  if (!Number.isInteger(port) || port < 1 || port > 65_535) throw new Trouble(`${variable} is "${asked}", and a port is a whole number from 1 to 65535.`);
  if (!(await tryPort(port))) throw new Trouble(`Port ${port} can't be used, most likely because another program has it: set ${variable} to another one, or leave it unset.`);
  return port;
}

const tsx = (file) => ({ command: process.execPath, args: ['--import', 'tsx', file], cwd: ROOT });

async function waitUntil(running, answers, what) {
  let over = null;
  void running.exited.then((result) => { over = result; });
  const until = Date.now() + READY_WITHIN_MS;
  while (Date.now() < until) {
    if (over || stopping) break;
    if (await answers()) return;
    await sleep(50);
  }
  if (stopping) throw new Trouble('Stopped.');
  throw new Trouble(
    over ? `${what} stopped while it was starting; see ${shown(running.log)}.` : `${what} did not answer in ${READY_WITHIN_MS / 1000} s; see ${shown(running.log)}.`,
    { tail: tail(running.log) },
  );
}

async function answered(url, good) {
  try {
    const response = await fetch(url, { redirect: 'manual', signal: AbortSignal.timeout(dev ? 60_000 : 5000) });
    await response.arrayBuffer();
    return good(response.status);
  } catch {
    return false;
  }
}

function readAccounts() {
  try {
    const accounts = JSON.parse(readFileSync(ACCOUNTS_FILE, 'utf8'));
    return Array.isArray(accounts) ? accounts : accounts.accounts ?? [];
  } catch {
    return [];
  }
}

/** Shows the accounts with whatever the demo says of them, one column for each. */
function accountsTable(accounts) {
  const keys = [...new Set(accounts.flatMap((account) => Object.keys(account)))];
  return table(accounts, keys.map((key) => [key, key[0].toUpperCase() + key.slice(1)]));
}

/** Database, migrations, demo. Gives the database's addresses. */
async function prepareDatabase(appEnvironment) {
  cluster = developmentCluster();
  const database = await progress.step('Starting the database', ({ created, port }) =>
    `Database ${created ? 'made and ' : ''}running on port ${port}`, async () => {
    if (readState().demo === 'begun' && existsSync(join(cluster.data, 'PG_VERSION'))) {
      // A first start that was cut off left half a demo, and nothing of anybody's yet.
      await startServer(cluster, { port: readState().clusterPort });
      await dropDatabase(cluster, 'fairlead');
    }
    return ensureDevelopmentCluster(cluster);
  });
  if (stopping) throw new Trouble('Stopped.');
  const first = readState().demo !== 'done';
  if (first) updateState((state) => { state.demo = 'begun'; });
  await progress.step('Bringing the database up to date', 'Database up to date', () => session.run({
    name: 'migrate', ...tsx('scripts/migrate.ts'),
    env: environment({ DATABASE_OWNER_URL: database.ownerUrl, DATABASE_APP_ROLE: 'fairlead_app' }),
    failed: `The database could not be brought up to date; see ${shown(join(LOGS, 'migrate.log'))}. "npm run reset" begins again with an empty one.`,
  }));
  const app = { ...appEnvironment, DATABASE_URL: database.appUrl };
  if (first || !existsSync(ACCOUNTS_FILE)) {
    await progress.step('Filling in the demo', 'Demo filled in', () => session.run({
      name: 'seed', ...tsx('seed/run.ts'),
      env: environment({ ...app, FAIRLEAD_ACCOUNTS_FILE: ACCOUNTS_FILE }),
      failed: `The demo could not be filled in; see ${shown(join(LOGS, 'seed.log'))}. "npm run reset" begins again.`,
    }));
    if (existsSync(ACCOUNTS_FILE)) chmodSync(ACCOUNTS_FILE, 0o600);
    updateState((state) => { state.demo = 'done'; });
  }
  return app;
}

async function startMail(port) {
  const url = `http://127.0.0.1:${port}`;
  const mail = session.launch({
    name: 'mail', ...tsx('fakes/mail/server.ts'), env: environment({ MAIL_FAKE_PORT: String(port), MAIL_FAKE_STORE: MAIL_STORE }),
  });
  await progress.step('Starting the mail inbox', '', () => waitUntil(mail, () => answered(`${url}/_switch`, (status) => status === 200), 'The mail inbox'));
  return mail;
}

async function build() {
  if (dev || isBuilt(outDir(), sourcesHash())) return;
  await progress.step('Building the application', 'Application built', () => session.run({
    name: 'build', command: process.execPath, args: ['scripts/build.mjs'], cwd: ROOT, env: environment({ FAIRLEAD_OUT_DIR: outDir() }), lines: 30,
    failed: `The application could not be built; see ${shown(join(LOGS, 'build.log'))}.`,
  }));
}

async function startApplication(port, env) {
  const app = session.launch({
    name: 'app', cwd: ROOT, env: environment(env), command: process.execPath,
    args: dev ? ['node_modules/astro/astro.js', 'dev', '--host', '127.0.0.1', '--port', String(port)] : ['--enable-source-maps', join(outDir(), 'main.mjs')],
  });
  const url = `http://127.0.0.1:${port}`;
  // The development server has no health address of its own: any answer of a page that is no failure will do.
  const ready = dev ? () => answered(url, (status) => status < 500) : () => answered(`${url}/readyz`, (status) => status === 200);
  await progress.step('Starting the application', 'Application running', () => waitUntil(app, ready, 'The application'));
  return app;
}

/** Stops all of it in order, once; everybody who asks waits for the same end. */
function stop() {
  stopping ??= (async () => {
    await progress.step('Stopping', '', async () => {
      await session.end();
      // A server that is just coming up can only be stopped when it is up.
      await databaseWork.catch(() => {});
      if (cluster && runningServer(cluster)) await stopServer(cluster);
      session.release();
    });
  })();
  return stopping;
}

async function main() {
  checkNode();
  const other = await session.take();
  if (other) {
    console.log(other.url
      ? `Fairlead is already running at ${other.url} (mail inbox: ${other.inbox}). Press Ctrl-C where it was started to stop it.`
      : `Fairlead is already being started by process ${other.pid}. Wait for it, or press Ctrl-C where it was started.`);
    return;
  }
  session.onStop(async (reason) => {
    if (reason === 'SIGINT') progress.say('');
    await stop().catch(report);
    progress.line('Stopped; the data is kept');
    process.exit(process.exitCode ?? 0);
  });
  try {
    await run();
  } catch (error) {
    if (!stopping) {
      report(error);
      await stop();
      process.exit(1);
    }
    // Cut off by our own stopping, which ends the process when it is done.
  }
}

async function run() {
  mkdirSync(LOGS, { recursive: true });
  const left = await session.clearLeftovers();
  if (left.children?.length) progress.line('Cleared away what a start that was cut off had left');

  const port = await choosePort('PORT', APP_PORT);
  const mailPort = await choosePort('MAIL_FAKE_PORT', MAIL_PORT, [port]);
  const url = `http://127.0.0.1:${port}`;
  const inbox = `http://127.0.0.1:${mailPort}`;

  await installPostgres(session, progress);
  await installNpmPackages(session, progress);

  const appEnvironment = {
    NODE_ENV: dev ? 'development' : 'production',
    HOST: '127.0.0.1',
    PORT: String(port),
    PUBLIC_URL: url,
    APP_SECRET: secrets().appSecret,
    RESEND_API_KEY: 're_local_demo',
    RESEND_BASE_URL: inbox,
    MAIL_FROM: 'Fairlead <mail@fairlead.example>',
    MAIL_INBOX_URL: inbox,
    TRUSTED_PROXY_HOPS: '0',
    FAIRLEAD_DEMO: '1',
    ...(process.env.LOG_LEVEL ? { LOG_LEVEL: process.env.LOG_LEVEL } : {}),
  };
  // Building keeps one processor busy and the database the other; a failure of either is told at once.
  const work = prepareDatabase(appEnvironment);
  databaseWork = work;
  const [env, mail] = await Promise.all([work, startMail(mailPort), build()]);
  const app = await startApplication(port, env);
  session.describe({ url, inbox });

  const accounts = readAccounts();
  progress.say(`
  Fairlead     ${url}
  Mail inbox   ${inbox}   (nothing leaves this machine)
  Logs         ${shown(LOGS)}
${accounts.length ? `\n${accountsTable(accounts)}\n` : ''}
Ready in ${((Date.now() - progress.began) / 1000).toFixed(1)} s. Press Ctrl-C to stop.`);

  const first = await Promise.race([
    app.exited.then(() => ({ what: 'The application', running: app })),
    mail.exited.then(() => ({ what: 'The mail inbox', running: mail })),
    databaseGone().then(() => ({ what: 'The database', running: { log: cluster.log } })),
  ]);
  if (!stopping) throw new Trouble(`${first.what} stopped by itself; see ${shown(first.running.log)}.`, { tail: tail(first.running.log) });
}

/** Resolves when the cluster's server is no longer there. It is not our child, so it has to be looked for. */
async function databaseGone() {
  while (stopping || runningServer(cluster)) await sleep(2000, undefined, { ref: false });
}

await main().catch(report);
