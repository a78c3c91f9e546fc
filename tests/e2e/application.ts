/**
 * A built application of one test file's own, on its own database, and browsers signed in to it.
 */
import { spawn, type ChildProcess } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import { createServer } from 'node:net';
import { fileURLToPath } from 'node:url';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, expect } from 'vitest';
import { createTestDatabase, dropTestDatabase, testEnvironment, type TestDatabase } from '../factories/database';
import type { TestPerson } from '../factories/world';

const root = fileURLToPath(new URL('../..', import.meta.url));

export interface Application {
  /** Without a trailing slash. */
  url: string;
  database: TestDatabase;
  mailUrl: string;
  /** What the server wrote to its log so far. */
  log(): string;
  /** Stop it by force and start it again on the same port and database. */
  crash(): Promise<void>;
  browser: Browser;
  /** A fresh browser context; signed in when a person is given. */
  visit(person?: TestPerson | null, options?: { width?: number; height?: number; touch?: boolean; javaScript?: boolean }): Promise<BrowserContext>;
  /** The Cookie header of a new session. */
  cookieFor(person: TestPerson): Promise<string>;
}

async function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.on('error', reject);
    server.listen(0, '127.0.0.1', () => {
      const address = server.address();
      server.close(() => resolve(typeof address === 'object' && address ? address.port : 0));
    });
  });
}

async function until(what: string, check: () => Promise<boolean>, ms = 20_000): Promise<void> {
  const end = Date.now() + ms;
  for (;;) {
    if (await check().catch(() => false)) return;
    if (Date.now() > end) throw new Error(`${what} did not come in ${ms} ms`);
    await new Promise((r) => setTimeout(r, 80));
  }
}

/** Launch Debian's Chromium. */
export function launchBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
  });
}

/**
 * Run the built application for this test file. Also points the application's own modules in the
 * test process at the same database, so that factories and commands can be used directly.
 */
export function useApplication(over: Record<string, string> = {}): Application {
  const app = {} as Application;
  let child: ChildProcess | null = null;
  let mail: ChildProcess | null = null;
  let log = '';
  const open: BrowserContext[] = [];

  beforeAll(async () => {
    const database = await createTestDatabase();
    const port = await freePort();
    const mailPort = await freePort();
    const env = {
      ...testEnvironment(database),
      NODE_ENV: 'production',
      LOG_LEVEL: 'info',
      HOST: '127.0.0.1',
      PORT: String(port),
      PUBLIC_URL: `http://127.0.0.1:${port}`,
      RESEND_BASE_URL: `http://127.0.0.1:${mailPort}`,
      DATABASE_POOL: '8',
      ...over,
    };
    Object.assign(process.env, env, { NODE_ENV: 'test', LOG_LEVEL: 'silent' });
    mail = spawn(process.execPath, ['--import', 'tsx', 'fakes/mail/server.ts'], {
      cwd: root,
      env: { ...process.env, MAIL_FAKE_PORT: String(mailPort) },
      stdio: 'ignore',
    });
    const start = async () => {
      const dist = process.env.TEST_DIST ?? 'dist';
      child = spawn(process.execPath, [`${dist}/main.mjs`], { cwd: root, env: { ...process.env, ...env }, stdio: ['ignore', 'pipe', 'pipe'] });
      child.stdout!.on('data', (d) => (log += String(d)));
      child.stderr!.on('data', (d) => (log += String(d)));
      await until('the application', async () => {
        if (child!.exitCode !== null) throw new Error(`the application ended:\n${log.slice(-4000)}`);
        return (await fetch(`${env.PUBLIC_URL}/readyz`)).ok;
      }).catch((e: unknown) => {
        throw new Error(`${String(e)}\n${log.slice(-4000)}`);
      });
    };
    await start();
    await until('the mail fake', async () => (await fetch(`http://127.0.0.1:${mailPort}/_mail`)).ok);
    const browser = await launchBrowser();
    const cookieFor = async (person: TestPerson) => {
      const { createSession } = await import('~/server/authentication');
      const { cookie } = await createSession(person.id, 'test browser');
      return cookie.split(';')[0]!;
    };
    Object.assign(app, {
      url: env.PUBLIC_URL,
      database,
      mailUrl: `http://127.0.0.1:${mailPort}`,
      browser,
      log: () => log,
      crash: async () => {
        child!.kill('SIGKILL');
        await new Promise((r) => child!.once('exit', r));
        await start();
      },
      cookieFor,
      visit: async (person, options = {}) => {
        const context = await browser.newContext({
          viewport: { width: options.width ?? 1360, height: options.height ?? 900 },
          hasTouch: options.touch ?? false,
          javaScriptEnabled: options.javaScript ?? true,
          baseURL: env.PUBLIC_URL,
          acceptDownloads: true,
        });
        context.setDefaultTimeout(15_000);
        if (person) {
          const [name, value] = (await cookieFor(person)).split('=') as [string, string];
          await context.addCookies([{ name, value, url: env.PUBLIC_URL, httpOnly: true, sameSite: 'Lax' }]);
        }
        open.push(context);
        return context;
      },
    } satisfies Application);
  });

  // A picture of every open page when a test fails.
  afterEach(async (context) => {
    if (context.task.result?.state === 'fail') {
      mkdirSync(`${root}tests/e2e/failures`, { recursive: true });
      let n = 0;
      for (const c of open) {
        for (const page of c.pages()) {
          const name = context.task.name.replace(/[^a-z0-9]+/gi, '-').slice(0, 60);
          await page.screenshot({ path: `${root}tests/e2e/failures/${name}-${n++}.png`, fullPage: true }).catch(() => undefined);
        }
      }
    }
  });

  afterAll(async () => {
    await app.browser?.close();
    const stop = async (p: ChildProcess | null) => {
      if (!p || p.exitCode !== null || p.signalCode !== null) return;
      const gone = new Promise((r) => p.once('exit', r));
      p.kill('SIGTERM');
      await Promise.race([gone, new Promise((r) => setTimeout(r, 8_000)).then(() => p.kill('SIGKILL'))]);
    };
    await Promise.all([stop(child), stop(mail)]);
    const { closeDatabase } = await import('~/server/database');
    await closeDatabase();
    if (app.database) await dropTestDatabase(app.database);
  });
  return app;
}

/** Fail on anything the page says it could not do: script errors, refused inline code, missing files. */
export function watchPage(page: Page): string[] {
  const trouble: string[] = [];
  page.on('pageerror', (e) => trouble.push(`error: ${e.message}`));
  page.on('console', (m) => {
    if (m.type() === 'error' && !/status of (401|403|404|409|410|413|422|429)/.test(m.text())) trouble.push(`console: ${m.text()}`);
  });
  return trouble;
}

/** axe-core over the page as it stands: no violation of the WCAG 2.2 A and AA rules. */
export async function expectAccessible(page: Page, what: string): Promise<void> {
  const { default: axe } = await import('axe-core');
  await page.evaluate(axe.source);
  const found = await page.evaluate(async () => {
    const run = (globalThis as unknown as { axe: { run: (o: unknown, c: unknown) => Promise<{ violations: { id: string; nodes: { html: string; failureSummary?: string }[] }[] }> } }).axe;
    const result = await run.run(document, { runOnly: { type: 'tag', values: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] } });
    return result.violations.map((v) => `${v.id}: ${v.nodes.map((n) => `${n.html.slice(0, 160)} (${n.failureSummary ?? ''})`).join(' | ')}`);
  });
  expect(found, what).toEqual([]);
}

/** Wait for a mail to somebody in the fake's inbox; gives its first link into the application. */
export async function mailLink(app: Application, to: string, pattern: RegExp): Promise<string> {
  let link: string | undefined;
  await until(`a mail to ${to}`, async () => {
    const mails = (await (await fetch(`${app.mailUrl}/_mail?to=${encodeURIComponent(to)}`)).json()) as unknown;
    const text = JSON.stringify(mails);
    link = pattern.exec(text.replaceAll('\\/', '/'))?.[0];
    return link !== undefined;
  });
  return link!;
}
