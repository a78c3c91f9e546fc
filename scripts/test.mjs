/**
 * `npm test`: every check of the project, on a database cluster, a mail stand-in and a build of its own, beside a running
 * `npm start` and without touching it.
 *
 *   npm test                                  everything
 *   npm test -- --only unit|db|e2e|checks     a part
 *   npm test -- tests/db/tenancy.test.ts      arguments go to vitest
 *
 * The last line is `N passed, N failed` (and `N skipped` if any): vitest's tests, and one for each other check.
 */
import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { environment } from './local/environment.mjs';
import { checkNode, installChromium, installNpmPackages, installPostgres } from './local/packages.mjs';
import { LOCAL, LOGS, ROOT, shown } from './local/paths.mjs';
import {
  adminUrl, connectionUrl, createCluster, ensureDatabase, ensureRoles, openCluster, runningServer, startServer, stopServer,
} from './local/postgres.mjs';
import { freePort, tail } from './local/processes.mjs';
import { Progress } from './local/progress.mjs';
import { Session } from './local/session.mjs';
import { randomSecret } from './local/state.mjs';
import { Trouble, report } from './local/trouble.mjs';

const DIST = '.local/test-dist';
const RESULTS = join(LOCAL, 'test-results.json');
const TEMPLATE = 'fairlead_template';
const PARTS = ['unit', 'db', 'e2e', 'checks'];
/** Nothing in this cluster is worth keeping, so nothing is waited for to be on the disk. */
const THROWAWAY = { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off', max_connections: '200' };

const progress = new Progress();
const session = new Session('test');
/** Each check: `{name, ms, passed, failed, skipped}`. */
const results = [];
let cluster = null;
let clusterWork = Promise.resolve();
let stopping = null;

function readArguments() {
  const forVitest = [];
  let only = null;
  const given = process.argv.slice(2);
  for (let i = 0; i < given.length; i += 1) {
    if (given[i] === '--only') only = given[i += 1];
    else if (given[i].startsWith('--only=')) only = given[i].slice('--only='.length);
    else forVitest.push(given[i]);
  }
  if (only !== null && !PARTS.includes(only)) throw new Trouble(`--only takes one of ${PARTS.join(', ')}.`);
  return { only, forVitest };
}

/** What tests and builds see of the environment: ours, and what belongs to neither a real installation nor npm. */
function testEnvironment(more) {
  const notOurs = /^(npm_|PG|DATABASE_|RESEND_|MAIL_|APP_SECRET$|PORT$|HOST$|PUBLIC_URL$|NODE_ENV$|TEST_|FAIRLEAD_)/;
  const kept = Object.fromEntries(Object.entries(process.env).filter(([key]) => !notOurs.test(key)));
  return { ...kept, ...environment({ FAIRLEAD_OUT_DIR: DIST, FAIRLEAD_VITE_CACHE: '.local/test-vite', ...more }) };
}

const inNode = (...args) => ({ command: process.execPath, args, cwd: ROOT });
const tsx = (...args) => inNode('--import', 'tsx', ...args);

/** Runs one check to its end; a failing one shows its output and the others go on. Answers whether it passed. */
async function check(name, what, { show = 0, ...options }) {
  const began = Date.now();
  const log = join(LOGS, `test-${name}.log`);
  const running = await progress.step(`Checking: ${what}`, '', async () => {
    const started = session.launch({ name, log, env: testEnvironment(), ...options });
    return { ...started, ...(await started.exited) };
  });
  if (stopping) throw new Trouble('Stopped.');
  const passed = running.code === 0;
  const ms = Date.now() - began;
  results.push({ name: what, ms, passed: Number(passed), failed: Number(!passed), skipped: 0 });
  progress.line(`${what}: ${passed ? 'passed' : 'FAILED'}`, ms);
  if (!passed) progress.say(`\n${tail(log, 150).replace(/^/gm, '    ')}\n    (all of it: ${shown(log)})\n`);
  else if (show) progress.say(tail(log, show).replace(/^/gm, '          '));
  return passed;
}

async function prepareCluster() {
  const passwords = { ownerPassword: randomSecret(), appPassword: randomSecret() };
  const database = await progress.step('Starting a database for the tests', 'Throwaway database running', async () => {
    cluster = openCluster({ wanted: join(tmpdir(), `fairlead-test-${randomBytes(6).toString('hex')}`), log: join(LOGS, 'test-postgres.log') });
    session.describe({ home: cluster.home });
    await createCluster(cluster);
    await startServer(cluster, { settings: THROWAWAY });
    await ensureRoles(cluster, passwords);
    await ensureDatabase(cluster, TEMPLATE);
    return {
      TEST_PG_ADMIN_URL: adminUrl(cluster),
      TEST_TEMPLATE_DB: TEMPLATE,
      TEST_OWNER_ROLE: 'fairlead_owner',
      TEST_OWNER_PASSWORD: passwords.ownerPassword,
      TEST_APP_ROLE: 'fairlead_app',
      TEST_APP_PASSWORD: passwords.appPassword,
    };
  });
  await session.run({
    name: 'test-migrate', ...tsx('scripts/migrate.ts'),
    env: testEnvironment({ DATABASE_OWNER_URL: connectionUrl(cluster, 'fairlead_owner', passwords.ownerPassword, TEMPLATE), DATABASE_APP_ROLE: 'fairlead_app' }),
    failed: `The tests’ database could not be migrated; see ${shown(join(LOGS, 'test-migrate.log'))}.`,
  });
  return database;
}

async function startMail() {
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  const mail = session.launch({ name: 'test-mail', ...tsx('fakes/mail/server.ts'), env: testEnvironment({ MAIL_FAKE_PORT: String(port) }) });
  let gone = false;
  void mail.exited.then(() => { gone = true; });
  for (let i = 0; i < 600 && !gone; i += 1) {
    try {
      if ((await fetch(`${url}/_switch`)).ok) return { TEST_MAIL_URL: url };
    } catch {
      // Not listening yet.
    }
    await sleep(50);
  }
  throw new Trouble(`The mail stand-in did not start; see ${shown(mail.log)}.`, { tail: tail(mail.log) });
}

/** Runs the projects of vitest in the terminal and adds up what its report says. */
async function vitest(projects, forVitest, env) {
  rmSync(RESULTS, { force: true });
  const began = Date.now();
  const running = session.launch({
    name: 'vitest', show: true,
    ...inNode('node_modules/vitest/vitest.mjs', 'run', ...projects.flatMap((project) => ['--project', project]),
      '--reporter=default', '--reporter=json', `--outputFile.json=${RESULTS}`, ...forVitest),
    env: testEnvironment(env),
  });
  const { code } = await running.exited;
  if (stopping) throw new Trouble('Stopped.');
  let found = null;
  try {
    found = JSON.parse(readFileSync(RESULTS, 'utf8'));
  } catch {
    // It ended before it could report.
  }
  const passed = found?.numPassedTests ?? 0;
  let failed = found?.numFailedTests ?? 0;
  // A file that fails outside its tests has no failing test to be counted.
  failed += found?.testResults?.filter((file) => file.status === 'failed' && !file.assertionResults.some((one) => one.status === 'failed')).length ?? 0;
  // Nor has an error that no file owns up to.
  if (code !== 0 && failed === 0) failed = 1;
  results.push({ name: `vitest (${projects.join(', ')})`, ms: Date.now() - began, passed, failed, skipped: (found?.numPendingTests ?? 0) + (found?.numTodoTests ?? 0) });
}

async function run({ only, forVitest }) {
  const wants = (part) => only === null ? part === 'checks' ? forVitest.length === 0 : true : only === part;
  const checks = wants('checks');
  const projects = [wants('unit') && ['unit', 'dom'], wants('db') && ['db'], wants('e2e') && ['e2e']].filter(Boolean).flat();
  const needsDatabase = wants('db') || wants('e2e');

  mkdirSync(LOGS, { recursive: true });
  await clearLeftovers();
  if (needsDatabase) await installPostgres(session, progress);
  await installNpmPackages(session, progress);
  const chromium = wants('e2e') ? await installChromium(session, progress) : '';

  // Two processors, two lanes. What a lane needs of the other it awaits.
  const work = needsDatabase ? prepareCluster() : Promise.resolve({});
  clusterWork = work;
  let built = true;
  const pages = async () => {
    if (checks || wants('e2e')) built = await check('build', 'build', inNode('scripts/build.mjs', '--if-changed'));
    if (checks) await check('astro-check', 'astro check', inNode('node_modules/astro/astro.js', 'check'));
  };
  const sources = async () => {
    const database = await work;
    const mail = needsDatabase ? await startMail() : {};
    if (checks) {
      await check('eslint', 'eslint', inNode('node_modules/eslint/bin/eslint.js', '.'));
      if (existsSync(join(ROOT, 'scripts/check-structure.ts'))) await check('structure', 'structure', tsx('scripts/check-structure.ts'));
      await check('reference', 'reference cases', { ...tsx('scripts/reference.ts', 'tests/reference/public-cases.json'), show: 12 });
    }
    return { ...database, ...mail };
  };
  const [env] = await Promise.all([sources(), pages()]);
  if (projects.length === 0) return;
  const able = built ? projects : projects.filter((project) => project !== 'e2e');
  if (!built && wants('e2e')) progress.line('The browser tests can’t run without a build');
  if (able.length) await vitest(able, forVitest, { ...env, TEST_DIST: DIST, CHROMIUM_PATH: chromium });
}

/** Takes away what a test run that was killed left: its processes, its database server, its folder. */
async function clearLeftovers() {
  const { home } = await session.clearLeftovers();
  if (!home || !basename(home).startsWith('fairlead-') || !existsSync(home)) return;
  const old = openCluster({ wanted: home, log: join(LOGS, 'test-postgres.log') });
  await stopServer(old);
  rmSync(old.home, { recursive: true, force: true });
}

function stop() {
  stopping ??= (async () => {
    await session.end({ patience: 15_000 });
    await clusterWork.catch(() => {});
    if (cluster) {
      if (runningServer(cluster)) await stopServer(cluster);
      rmSync(cluster.home, { recursive: true, force: true });
    }
    session.release();
  })();
  return stopping;
}

function summary({ only, forVitest }) {
  const sum = (key) => results.reduce((total, result) => total + result[key], 0);
  const width = Math.max(0, ...results.map(({ name }) => name.length));
  progress.say('');
  for (const { name, ms, passed, failed, skipped } of results) {
    const single = passed + failed + skipped === 1;
    const words = single ? (failed ? 'failed' : 'passed') : `${passed} passed, ${failed} failed${skipped ? `, ${skipped} skipped` : ''}`;
    progress.line(`${name.padEnd(width)}  ${words}`, ms);
  }
  progress.line(`altogether`, Date.now() - progress.began);
  // For `npm run bench`, which does not run the tests itself.
  if (only === null && forVitest.length === 0) writeFileSync(join(LOCAL, 'test-duration.json'), JSON.stringify({ seconds: Math.round((Date.now() - progress.began) / 100) / 10 }));
  progress.say(`\n${sum('passed')} passed, ${sum('failed')} failed${sum('skipped') ? `, ${sum('skipped')} skipped` : ''}`);
  return sum('failed') === 0;
}

async function main() {
  checkNode();
  const wanted = readArguments();
  const other = await session.take();
  if (other) throw new Trouble(`Tests are already running in this checkout (process ${other.pid}).`);
  session.onStop(async (reason) => {
    await stop().catch(report);
    console.error(`Stopped (${reason}).`);
    process.exit(1);
  });
  try {
    await run(wanted);
  } catch (error) {
    if (stopping) return;
    report(error);
    results.push({ name: 'getting ready', ms: Date.now() - progress.began, passed: 0, failed: 1, skipped: 0 });
  }
  await stop().catch(report);
  process.exit(summary(wanted) && !process.exitCode ? 0 : 1);
}

await main().catch(report);
