/**
 * Figures, never verdicts: `npm run bench` builds the application, makes a database of its own, measures each work beside its
 * limit in the same run, alternating, and writes results.json and RESULTS.md. Everything stays on 127.0.0.1 and is bounded.
 */
import autocannon from 'autocannon';
import { build } from 'esbuild';
import { execFileSync, spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { Agent, request } from 'node:http';
import { cpus, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { brotliCompressSync } from 'node:zlib';
import { chromium } from 'playwright-core';
import setup from '../setup/database';
import { createTestDatabase, dropTestDatabase, testEnvironment } from '../factories/database';

const root = fileURLToPath(new URL('../..', import.meta.url));
const folder = fileURLToPath(new URL('.', import.meta.url));
const ROUNDS = 3;
const SECONDS = 4;

interface Figure {
  id: string;
  what: string;
  value: number | null;
  unit: string;
  limit: number | null;
  ratio: number | null;
  goal: string;
  met: boolean | null;
  n: number;
}
const figures: Figure[] = [];
const round = (x: number, places = 2) => Number(x.toFixed(places));
const median = (list: number[]) => [...list].sort((a, b) => a - b)[Math.floor(list.length / 2)]!;

/** A figure against a limit: `least` when the ratio should be that or more, `most` when that or less. */
function put(id: string, what: string, unit: string, values: number[], limits: number[], goal: { least?: number; most?: number }): void {
  const value = median(values);
  const limit = median(limits);
  const ratio = value / limit;
  const met = goal.least !== undefined ? ratio >= goal.least : ratio <= goal.most!;
  figures.push({ id, what, value: round(value), unit, limit: round(limit), ratio: round(ratio), goal: goal.least !== undefined ? `≥ ${goal.least}×` : `≤ ${goal.most}×`, met, n: values.length });
  console.log(`${id} ${what}: ${round(value)} ${unit} against ${round(limit)}: ${round(ratio)}×`);
}

async function ready(url: string): Promise<void> {
  for (let i = 0; i < 200; i++) {
    if (await fetch(url).then((r) => r.ok).catch(() => false)) return;
    await new Promise((r) => setTimeout(r, 100));
  }
  throw new Error(`${url} did not come`);
}

console.log('building');
execFileSync(process.execPath, ['scripts/build.mjs'], { cwd: root, stdio: 'ignore', env: { ...process.env, FAIRLEAD_OUT_DIR: 'dist' } });
await setup();
const database = await createTestDatabase();
const port = 4790 + Math.floor(Math.random() * 100);
const url = `http://127.0.0.1:${port}`;
const env = { ...testEnvironment(database), NODE_ENV: 'production', LOG_LEVEL: 'info', HOST: '127.0.0.1', PORT: String(port), PUBLIC_URL: url, DATABASE_POOL: '12' };
Object.assign(process.env, env, { NODE_ENV: 'test', LOG_LEVEL: 'silent' });

const world = await import('../factories/world');
const { importPart } = await import('~/features/scores/commands/keep-reading');
const { handIn, acceptEvent } = await import('~/features/results/commands/hand-in');
const { releaseResults } = await import('~/features/results/commands/release-results');
const { loadReleasePage } = await import('~/features/results/loaders');
const { createSession } = await import('~/server/authentication');
const { closeDatabase, withScope } = await import('~/server/database');
const { teams: teamTable } = await import('~/features/entries/tables');
const { newId } = await import('~/server/ids');

console.log('a tournament of 60 teams and 24 events');
const org = await world.makeOrganization({ slug: 'bench' });
const t = await world.makeTournament(org, { slug: 'cup' });
const d = await world.makeDivision(org, t.id);
const school = await world.makeSchool(org);
const teams: string[] = [];
for (let n = 0; n < 60; n++) {
  // Ids that pgbench can make from a number.
  const id = `00000000-0000-7000-8000-${String(n).padStart(12, '0')}`;
  await withScope(org.scope, (tx) => tx.insert(teamTable).values({ orgId: org.id, id, tournamentId: t.id, divisionId: d.id, schoolId: school.id, number: n + 1, name: `Wrenfield Academy ${n + 1}`, state: 'confirmed', createdAt: new Date() }));
  teams.push(id);
}
const events: { id: string; slug: string }[] = [];
for (let e = 0; e < 24; e++) events.push(await world.makeEvent(org, { tournamentId: t.id, divisionId: d.id, setup: { max: '100', groups: [], tieBreak: [] }, locked: true, name: `Event ${e + 1}`, isTrial: false }));
for (const [e, event] of events.entries()) {
  await importPart(t.scope, event.slug, { part: 'test', setupVersion: 1, device: newId(), rows: teams.map((teamId, i) => ({ teamId, value: { points: String(((i * 37 + e * 17) % 200) / 2) }, baseVersion: 0, key: newId(), sequence: i + 1 })) });
  await handIn(t.scope, event.slug);
  await acceptEvent(t.scope, event.slug);
}
const admin = new (await import('pg')).default.Client({ connectionString: database.adminUrl });
await admin.connect();
const began = performance.now();
const { mark } = await loadReleasePage(t.scope);
await releaseResults(t.scope, 'America/Chicago', { publicLine: '', when: 'now', at: '', seen: mark });
console.log(`looked at and released in ${Math.round(performance.now() - began)} ms`);
// Two more events for P3, which the release does not hold.
const spare: { id: string; slug: string }[] = [];
for (const name of ['Kept', 'Compared']) spare.push(await world.makeEvent(org, { tournamentId: t.id, divisionId: d.id, setup: { max: '100', groups: [], tieBreak: [] }, locked: true, name }));

const children: ChildProcess[] = [];
const app = spawn(process.execPath, ['dist/main.mjs'], { cwd: root, env: { ...process.env, ...env }, stdio: 'ignore' });
children.push(app);
await ready(`${url}/readyz`);

try {
  // ── P1: the released page ──────────────────────────────────────────────────────────────────
  const page = '/bench/cup/results/senior';
  const raw = await new Promise<{ headers: Record<string, string>; body: string }>((resolve, reject) => {
    const get = (again: boolean) =>
      request(`${url}${page}`, { headers: { 'accept-encoding': 'br' } }, (res) => {
        const chunks: Buffer[] = [];
        res.on('data', (c: Buffer) => chunks.push(c));
        res.on('end', () => {
          if (again) return void get(false);
          const { date: _date, connection: _connection, 'keep-alive': _keep, ...headers } = res.headers as Record<string, string>;
          resolve({ headers, body: Buffer.concat(chunks).toString('base64') });
        });
      })
        .on('error', reject)
        .end();
    get(true);
  });
  const scratch = mkdtempSync(join(tmpdir(), 'fairlead-bench-'));
  writeFileSync(join(scratch, 'answer.json'), JSON.stringify(raw));
  const bare = spawn(process.execPath, [join(folder, 'bare.mjs'), join(scratch, 'answer.json')], { stdio: ['ignore', 'pipe', 'inherit'] });
  children.push(bare);
  const barePort = await new Promise<string>((resolve) => bare.stdout!.once('data', (x) => resolve(String(x).trim())));
  const load = async (base: string, headers: Record<string, string>) => {
    const r = await autocannon({ url: `${base}${page}`, connections: 32, duration: SECONDS, headers });
    if (r.errors > 0 || r.non2xx > 0 && !headers['if-none-match']) throw new Error(`${base}: ${r.errors} errors, ${r.non2xx} not 2xx`);
    return { rate: r.requests.average, p99: r.latency.p99 };
  };
  for (const [what, headers] of [['200', { 'accept-encoding': 'br' }], ['304', { 'accept-encoding': 'br', 'if-none-match': raw.headers['etag']! }]] as const) {
    const ours: { rate: number; p99: number }[] = [];
    const theirs: { rate: number; p99: number }[] = [];
    await load(url, headers);
    for (let i = 0; i < ROUNDS; i++) {
      ours.push(await load(url, headers));
      theirs.push(await load(`http://127.0.0.1:${barePort}`, headers));
    }
    put('P1', `released results page, 60 teams × 24 events, 32 connections: ${what}`, 'requests/s', ours.map((x) => x.rate), theirs.map((x) => x.rate), { least: 0.9 });
    put('P1', `the same, ${what}: p99`, 'ms', ours.map((x) => Math.max(1, x.p99)), theirs.map((x) => Math.max(1, x.p99)), { most: 1.2 });
  }
  bare.kill();

  // ── P3: keep one reading ───────────────────────────────────────────────────────────────────
  const { id: sessionId, cookie } = await createSession(org.owner.id, 'bench');
  const { hashToken } = await import('~/server/authentication');
  const agent = new Agent({ keepAlive: true, maxSockets: 8 });
  const versions = new Map<string, number>();
  const post = (body: string) =>
    new Promise<number>((resolve, reject) => {
      const req = request(
        `${url}/api/bench/cup/events/${spare[0]!.slug}/readings`,
        { method: 'POST', agent, headers: { cookie: cookie.split(';')[0]!, origin: url, 'content-type': 'application/json', 'content-length': Buffer.byteLength(body) } },
        (res) => {
          let text = '';
          res.on('data', (c) => (text += String(c)));
          res.on('end', () => (res.statusCode === 200 ? resolve(JSON.parse(text).version as number) : reject(new Error(text))));
        },
      );
      req.on('error', reject);
      req.end(body);
    });
  const keepAll = async () => {
    const times: number[] = [];
    const end = performance.now() + SECONDS * 1000;
    await Promise.all(
      teams.slice(0, 8).map(async (teamId, c) => {
        while (performance.now() < end) {
          const base = versions.get(teamId) ?? 0;
          const from = performance.now();
          const version = await post(JSON.stringify({ teamId, part: 'test', value: { points: String(base % 2 === 0 ? 40 : 41) }, baseVersion: base, setupVersion: 1, key: newId(), device: '00000000-0000-7000-8000-00000000000' + c, sequence: base + 1, reason: '' }));
          times.push(performance.now() - from);
          versions.set(teamId, version);
        }
      }),
    );
    times.sort((a, b) => a - b);
    return { rate: times.length / SECONDS, p99: times[Math.floor(times.length * 0.99)]! };
  };
  const script = join(scratch, 'keep.sql');
  writeFileSync(
    script,
    `\\set v :v + 1
select s.person_id, s.expires_at, s.created_at, s.last_used_at, s.device, p.name, p.email, p.email_verified_at, p.is_operator from sessions s join people p on p.id = s.person_id where s.id = '${hashToken(sessionId)}';
select resolve_scope('bench', 'cup', '${org.owner.id}');
select keep_reading('${org.id}', '${org.owner.id}', '${spare[1]!.id}', 1, ('00000000-0000-7000-8000-' || lpad((:client_id)::text, 12, '0'))::uuid, 'test', json_build_object('points', (40 + :v % 2)::text)::jsonb, :v - 1, gen_random_uuid(), md5((:v)::text), gen_random_uuid(), :v, '', gen_random_uuid(), now());
`,
  );
  const appUrl = new URL(database.appUrl);
  const pgbenchPath = process.env['PGBENCH'] ?? '/usr/lib/postgresql/15/bin/pgbench';
  let runs = 0;
  const bench = () => {
    const prefix = join(scratch, `log${(runs += 1)}`);
    const out = execFileSync(pgbenchPath, ['-n', '-M', 'prepared', '-c', '8', '-j', '2', '-T', String(SECONDS), '-f', script, '-D', 'v=0', '-l', '--log-prefix', prefix, '-h', appUrl.hostname, '-p', appUrl.port, '-U', appUrl.username, appUrl.pathname.slice(1)], {
      env: { ...process.env, PGPASSWORD: decodeURIComponent(appUrl.password) },
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'ignore'],
    });
    const times = readdirSync(scratch)
      .filter((f) => join(scratch, f).startsWith(`${prefix}.`))
      .flatMap((f) => readFileSync(join(scratch, f), 'utf8').trim().split('\n').map((l) => Number(l.split(' ')[2]) / 1000))
      .sort((a, b) => a - b);
    return { rate: Number(/tps = ([\d.]+)/.exec(out)![1]), p99: times[Math.floor(times.length * 0.99)]! };
  };
  await keepAll();
  const ours: { rate: number; p99: number }[] = [];
  const theirs: { rate: number; p99: number }[] = [];
  for (let i = 0; i < ROUNDS; i++) {
    ours.push(await keepAll());
    // Each round begins with rows of its own, so that its versions begin at 0.
    await admin.query('delete from readings where event_id = $1', [spare[1]!.id]);
    await admin.query('delete from reading_revisions where event_id = $1', [spare[1]!.id]);
    theirs.push(bench());
  }
  put('P3', 'keep one reading over HTTP, 8 connections', 'readings/s', ours.map((x) => x.rate), theirs.map((x) => x.rate), { least: 0.65 });
  put('P3', 'the same: p99', 'ms', ours.map((x) => x.p99), theirs.map((x) => x.p99), { most: 3 });

  // ── P7: script before the first touch ──────────────────────────────────────────────────────
  const base = await build({
    stdin: { contents: `import { createRoot } from 'react-dom/client'; import { QueryClient, QueryClientProvider } from '@tanstack/react-query'; import { Button } from 'react-aria-components/Button'; import { createElement as h } from 'react'; createRoot(document.body).render(h(QueryClientProvider, { client: new QueryClient() }, h(Button, null, 'x')));`, resolveDir: root },
    bundle: true, minify: true, format: 'esm', write: false, define: { 'process.env.NODE_ENV': '"production"' },
  });
  const baseKb = brotliCompressSync(base.outputFiles[0]!.contents).byteLength / 1000;
  const browser = await chromium.launch({ executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu'] });
  const [name, value] = cookie.split(';')[0]!.split('=') as [string, string];
  await admin.query(`update events set setup_locked_at = null where id = $1`, [spare[1]!.id]);
  const scripts = async (path: string) => {
    // A context of its own: nothing is in the cache.
    const context = await browser.newContext({ baseURL: url });
    await context.addCookies([{ name, value, url }]);
    const p = await context.newPage();
    let bytes = 0;
    const waiting: Promise<void>[] = [];
    p.on('requestfinished', (r) => {
      if (r.resourceType() === 'script') waiting.push(r.sizes().then((s) => void (bytes += s.responseBodySize)));
    });
    await p.goto(path);
    await p.waitForFunction(() => !document.querySelector('astro-island[ssr]') && !document.body.innerText.includes('Loading the form…'));
    await p.waitForTimeout(500);
    await Promise.all(waiting);
    await context.close();
    return bytes / 1000;
  };
  const shot = await world.makeEvent(org, { tournamentId: t.id, divisionId: d.id, moduleKey: 'optics-shoot', setup: (await import('~/event-modules/optics-shoot/module')).opticsShoot.setup.defaults(), locked: true, name: 'Shoot' });
  for (const [what, path, most] of [
    ['public programme', '/bench/cup', 0],
    ['public results', page, 0],
    ['entry form (seed of the run desk)', `/bench/cup/events/${shot.slug}/enter`, 120],
    ['set-up', `/bench/cup/events/${spare[1]!.slug}/setup`, 105],
    ['points from a file', `/bench/cup/events/${spare[0]!.slug}/points`, 105],
  ] as const) {
    const kb = await scripts(path);
    figures.push({ id: 'P7', what: `script before the first touch, compressed: ${what}`, value: round(kb, 1), unit: 'kB', limit: round(baseKb, 1), ratio: null, goal: most === 0 ? '0' : `≤ ${most} kB`, met: kb <= most, n: 1 });
    console.log(`P7 ${what}: ${round(kb, 1)} kB (base ${round(baseKb, 1)})`);
  }
  await browser.close();
} finally {
  for (const child of children) child.kill();
  await admin.end();
  await closeDatabase();
  await dropTestDatabase(database);
}

// ── P10: starting again ──────────────────────────────────────────────────────────────────────
const seconds = await new Promise<number | null>((resolve) => {
  const start = spawn(process.execPath, ['scripts/start.mjs'], { cwd: root, stdio: ['ignore', 'pipe', 'ignore'], env: Object.fromEntries(Object.entries(process.env).filter(([k]) => !(k in env) && !k.startsWith('TEST_'))) });
  let out = '';
  let found: number | null = null;
  start.stdout.on('data', (c) => {
    out += String(c);
    const m = /Ready in ([\d.]+) s/.exec(out);
    if (m && found === null) {
      found = Number(m[1]);
      start.kill('SIGINT');
    }
  });
  start.on('exit', () => resolve(found));
});
figures.push({ id: 'P10', what: 'npm start, with the database and the demo there already', value: seconds, unit: 's', limit: null, ratio: null, goal: '≤ 8 s', met: seconds === null ? null : seconds <= 8, n: 1 });
try {
  const test = JSON.parse(readFileSync(join(root, '.local/test-duration.json'), 'utf8')) as { seconds: number };
  figures.push({ id: 'P10', what: 'npm test, as it last ran here', value: test.seconds, unit: 's', limit: null, ratio: null, goal: '≤ 720 s', met: test.seconds <= 720, n: 1 });
} catch {
  console.log('P10 npm test has not run here yet');
}

writeFileSync(join(folder, 'results.json'), `${JSON.stringify(figures, null, 2)}\n`);
const version = (command: string, ...args: string[]) => execFileSync(command, args, { encoding: 'utf8' }).trim();
writeFileSync(
  join(folder, 'RESULTS.md'),
  `# Measured

Made by \`npm run bench\`: medians of ${ROUNDS} alternating rounds of ${SECONDS} s, on ${cpus().length} cores shared by server, client and database. Node ${process.version}, ${version('/usr/lib/postgresql/15/bin/postgres', '--version')}.

| id | work | value | limit, same run | ratio | goal | met |
| --- | --- | --- | --- | --- | --- | --- |
${figures.map((f) => `| ${f.id} | ${f.what} | ${f.value ?? '–'} ${f.unit} | ${f.limit ?? '–'} | ${f.ratio === null ? '–' : `${f.ratio}×`} | ${f.goal} | ${f.met === null ? 'not measured' : f.met ? 'yes' : 'no'} |`).join('\n')}

P1's limit is \`tests/bench/bare.mjs\`: node:http sending the same bytes. P3's is pgbench running the same three statements, prepared;
it is a client in C that shares the cores with PostgreSQL alone, while the product's server and its client are Node.
P7's is React, the query client and one accessible button, bundled and brotli-compressed.
`,
);
console.log('written to tests/bench/RESULTS.md');
process.exit(0);
