/**
 * Before the database and browser tests: a migrated template database to clone from. `npm test`
 * brings its own throwaway cluster; run by hand, the checkout's development cluster serves.
 */
import { execFileSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import pg from 'pg';

const root = fileURLToPath(new URL('../..', import.meta.url));

export default async function setup(): Promise<void> {
  if (process.env.TEST_PG_ADMIN_URL) return;
  const out = execFileSync(process.execPath, ['scripts/cluster.mjs', 'ensure'], { cwd: root, encoding: 'utf8' });
  const { adminUrl, ownerUrl, appUrl } = JSON.parse(out.trim().split('\n').at(-1)!) as Record<'adminUrl' | 'ownerUrl' | 'appUrl', string>;
  const template = 'fairlead_template';
  const admin = new pg.Client({ connectionString: adminUrl });
  await admin.connect();
  const { rowCount } = await admin.query('select 1 from pg_database where datname = $1', [template]);
  if (!rowCount) await admin.query(`create database ${template} owner fairlead_owner`).catch(() => undefined);
  await admin.end();
  execFileSync(process.execPath, ['node_modules/tsx/dist/cli.mjs', 'scripts/migrate.ts'], {
    cwd: root,
    env: { ...process.env, DATABASE_OWNER_URL: withDatabase(ownerUrl, template) },
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  process.env.TEST_PG_ADMIN_URL = adminUrl;
  process.env.TEST_TEMPLATE_DB = template;
  process.env.TEST_APP_PASSWORD = decodeURIComponent(new URL(appUrl).password);
  process.env.TEST_OWNER_PASSWORD = decodeURIComponent(new URL(ownerUrl).password);
}

function withDatabase(url: string, name: string): string {
  const u = new URL(url);
  u.pathname = `/${name}`;
  return u.href;
}
