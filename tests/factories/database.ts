import pg from 'pg';
import { randomBytes } from 'node:crypto';
import { afterAll, beforeAll } from 'vitest';

/** A database of one test file's own, cloned from the migrated template. */
export interface TestDatabase {
  name: string;
  /** As the application's role: row-level security applies. */
  appUrl: string;
  /** As the role that owns the tables. */
  ownerUrl: string;
  /** As the cluster's superuser: sees everything; for checking only. */
  adminUrl: string;
}

function urlFor(database: string, user?: string, password?: string): string {
  const u = new URL(process.env.TEST_PG_ADMIN_URL!);
  u.pathname = `/${database}`;
  if (user !== undefined) u.username = user;
  if (password !== undefined) u.password = encodeURIComponent(password);
  return u.href;
}

/** Clone the template. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const name = `t_${randomBytes(6).toString('hex')}`;
  const admin = new pg.Client({ connectionString: process.env.TEST_PG_ADMIN_URL! });
  await admin.connect();
  try {
    for (let attempt = 1; ; attempt++) {
      try {
        await admin.query(`create database ${name} template ${process.env.TEST_TEMPLATE_DB!} owner fairlead_owner`);
        break;
      } catch (error) {
        // Another file is cloning the same template at this moment.
        if ((error as { code?: string }).code !== '55006' || attempt > 100) throw error;
        await new Promise((r) => setTimeout(r, 50 + Math.random() * 100));
      }
    }
  } finally {
    await admin.end();
  }
  return {
    name,
    appUrl: urlFor(name, 'fairlead_app', process.env.TEST_APP_PASSWORD!),
    ownerUrl: urlFor(name, 'fairlead_owner', process.env.TEST_OWNER_PASSWORD!),
    adminUrl: urlFor(name),
  };
}

export async function dropTestDatabase(database: TestDatabase): Promise<void> {
  const admin = new pg.Client({ connectionString: process.env.TEST_PG_ADMIN_URL! });
  await admin.connect();
  await admin.query(`drop database if exists ${database.name} with (force)`);
  await admin.end();
}

/** The environment the application needs on a test database. */
export function testEnvironment(database: TestDatabase): Record<string, string> {
  return {
    NODE_ENV: 'test',
    PUBLIC_URL: 'http://127.0.0.1:4999',
    DATABASE_URL: database.appUrl,
    DATABASE_POOL: '20',
    APP_SECRET: 'only-for-tests-only-for-tests-only-for-tests',
    RESEND_API_KEY: 're_test',
    RESEND_BASE_URL: process.env.TEST_MAIL_URL ?? 'http://127.0.0.1:1',
    MAIL_FROM: 'Fairlead <office@fairlead.test>',
    LOG_LEVEL: 'silent',
  };
}

/**
 * Give this test file its own database, and point the application's modules at it. Call at the top
 * of the file. The returned object is filled before the first test.
 */
export function useTestDatabase(): TestDatabase & { admin: pg.Client } {
  const out = {} as TestDatabase & { admin: pg.Client };
  beforeAll(async () => {
    const database = await createTestDatabase();
    Object.assign(process.env, testEnvironment(database));
    const admin = new pg.Client({ connectionString: database.adminUrl });
    await admin.connect();
    Object.assign(out, database, { admin });
  });
  afterAll(async () => {
    const { closeDatabase } = await import('~/server/database');
    await closeDatabase();
    await out.admin.end();
    await dropTestDatabase(out);
  });
  return out;
}
