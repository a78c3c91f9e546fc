/**
 * Every page of the demo under axe-core (WCAG 2.2 A and AA), at a phone's and a desk's width, and that none is wider than its
 * window, down to 320 px (WCAG 1.4.10).
 */
import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import pg from 'pg';
import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, test } from 'vitest';
import { expectAccessible, useApplication, watchPage } from './application';
import type { TestPerson } from '../factories/world';

const app = useApplication();
const root = fileURLToPath(new URL('../..', import.meta.url));
const people: Record<string, TestPerson> = {};
const L = '/thistlemoor/larkwater';
const F = '/thistlemoor/fernhollow';
let teamId = '';
let schoolId = '';

beforeAll(async () => {
  await promisify(execFile)(process.execPath, ['--import', 'tsx', 'seed/run.ts'], { cwd: root, env: { ...process.env, DATABASE_URL: app.database.appUrl, FAIRLEAD_ACCOUNTS_FILE: '' } });
  const client = new pg.Client({ connectionString: app.database.adminUrl });
  await client.connect();
  for (const row of (await client.query('select id, name, email from people')).rows as TestPerson[]) people[row.email.split('@')[0]!] = row;
  teamId = ((await client.query(`select t.id from teams t join tournaments x on x.id = t.tournament_id and x.slug = 'larkwater' join divisions d on d.id = t.division_id and d.letter = 'S' where t.number = 5`)).rows[0] as { id: string }).id;
  schoolId = ((await client.query('select id from schools limit 1')).rows[0] as { id: string }).id;
  await client.end();
}, 90_000);

const PAGES: [who: string | null, paths: (() => string)[]][] = [
  [null, ['/', '/sign-in', '/sign-up', '/check-mail', '/reset', '/reset/no-such-code', '/verify/no-such-code', '/nowhere', '/thistlemoor', '/thistlemoor/join/no-such-token', L, `${L}/results`, `${F}/results`, `${F}/results/senior`, `${F}/results/senior/optics-shoot-senior`].map((p) => () => p)],
  ['ilse', ['/account', '/new', '/thistlemoor/office', '/thistlemoor/office/people', '/thistlemoor/office/people/invite', '/thistlemoor/office/schools', '/thistlemoor/office/settings', '/thistlemoor/office/audit', '/thistlemoor/office/tournaments/new'].map((p) => () => p)],
  [
    'noor',
    [
      ...[`${L}/overview`, `${L}/scores`, `${L}/release`, `${F}/release`, `${L}/entries`, `${L}/events`, `${L}/settings`, `${L}/events/pond-life-senior`, `${L}/events/signal-codes-junior`, `${L}/events/signal-codes-junior/edit`, `${L}/events/signal-codes-junior/setup`, `${F}/events/optics-shoot-senior`].map((p) => () => p),
      () => `${L}/entries/${teamId}`,
      () => `/thistlemoor/office/schools/${schoolId}`,
    ],
  ],
  ['wim', [...[`${L}/events/optics-shoot-senior`, `${L}/events/optics-shoot-senior/setup`, `${L}/events/optics-shoot-senior/enter`, `${L}/events/optics-shoot-senior/enter#S16`, `${L}/events/optics-shoot-senior/points`, `${L}/scores`].map((p) => () => p), () => `${L}/events/optics-shoot-senior/history/${teamId}`]],
  ['bea', [() => `${L}/events/seed-lines-senior/setup`]],
  ['amara', [`${F}/school`, `${L}/school`].map((p) => () => p)],
];

/** Islands are there, and nothing says that it is loading. */
async function settled(page: Page): Promise<void> {
  await page.waitForLoadState('load');
  await page.waitForFunction(() => document.querySelectorAll('astro-island[ssr]').length === 0 && !document.body.innerText.includes('Loading the form…'));
}

async function expectFits(page: Page, what: string): Promise<void> {
  const over = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
  expect(over, `${what} is wider than its window`).toBeLessThanOrEqual(0);
}

describe.each([390, 1360])('at %i px', (width) => {
  for (const [who, paths] of PAGES) {
    test(
      `pages of ${who ?? 'anybody'}`,
      async () => {
        const context = await app.visit(who ? people[who] : null, { width });
        const page = await context.newPage();
        const trouble = watchPage(page);
        for (const path of paths) {
          await page.goto(path());
          await settled(page);
          await expectAccessible(page, `${path()} at ${width}`);
          await expectFits(page, `${path()} at ${width}`);
          if (width === 390) {
            await page.setViewportSize({ width: 320, height: 640 });
            await expectFits(page, `${path()} at 320`);
            await page.setViewportSize({ width, height: 844 });
          }
        }
        expect(trouble).toEqual([]);
        await context.close();
      },
      120_000,
    );
  }

  test('states: a refused form, a question asked, a run with errors, both ways round', async () => {
    const context = await app.visit(people['noor']!, { width });
    const page = await context.newPage();
    await page.goto(`${L}/entries`);
    await page.getByRole('button', { name: 'Enter the team' }).click();
    await page.getByRole('alert').waitFor();
    await expectAccessible(page, 'a refused form');
    await page.getByText('Withdraw', { exact: true }).first().click();
    await expectAccessible(page, 'a question asked');
    await page.goto(`${L}/events/pond-life-senior`);
    await page.locator('details.settle summary').first().click();
    await expectAccessible(page, 'settling');
    await page.goto(`${L}/events/optics-shoot-senior/enter#S20`);
    await page.getByRole('radio', { name: 'Wall and tape' }).check();
    await page.getByRole('radio', { name: 'Back', exact: true }).check();
    await page.getByRole('textbox', { name: 'Reading on the tape' }).fill('1200');
    await page.getByRole('button', { name: 'Keep this reading' }).click();
    await page.getByRole('alert').waitFor();
    await expectAccessible(page, 'a run with errors');
    await page.getByRole('textbox', { name: 'Reading on the tape' }).fill('612.5');
    await page.getByText('112.5 mm').first().waitFor();
    await expectAccessible(page, 'both ways round');
    await expectFits(page, 'the entry form');
    await context.close();
  });
});
