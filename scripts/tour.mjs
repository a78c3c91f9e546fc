/**
 * Takes the README's pictures from a running `npm start`, signed in as the demo's people.
 *
 *   npm run tour [address]     http://127.0.0.1:4321 unless another is given
 */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { chromium } from 'playwright-core';
import { ROOT, LOCAL } from './local/paths.mjs';

const base = process.argv[2] ?? 'http://127.0.0.1:4321';
const folder = join(ROOT, 'scripts', 'tour');
const accounts = JSON.parse(readFileSync(join(LOCAL, 'accounts.json'), 'utf8'));
const account = (who) => accounts.find((a) => a.who.startsWith(who));

const L = '/thistlemoor/larkwater';
const F = '/thistlemoor/fernhollow';
/** Name, who, width, height, where, what to do first. */
const PICTURES = [
  ['programme', null, 1180, 900, L],
  ['results', null, 1180, 900, `${F}/results/senior`],
  ['overview', 'director', 1280, 900, `${L}/overview`],
  ['set-up', 'owner', 1280, 900, `${L}/events/seed-lines-senior/setup`],
  ['enter-phone', 'event leader, Optics', 390, 844, `${L}/events/optics-shoot-senior/enter#S21`, enterRun],
  ['enter-tablet', 'event leader, Optics', 820, 1100, `${L}/events/optics-shoot-senior/enter#S22`, enterRun],
  ['settle', 'director', 1280, 900, `${L}/events/pond-life-senior`, (page) => page.locator('details.settle summary').first().click()],
  ['release', 'director', 1280, 900, `${F}/release`],
  ['school', 'coach, Wrenfield', 1280, 900, `${F}/school`],
];

async function enterRun(page) {
  await page.getByRole('radio', { name: 'Wall and tape' }).check();
  await page.getByRole('radio', { name: 'Back', exact: true }).check();
  await page.getByRole('textbox', { name: 'Reading on the tape' }).fill('587');
  await page.getByRole('textbox', { name: 'Mirrors used' }).fill('3');
  await page.getByRole('textbox', { name: 'Barriers used' }).fill('2');
}

async function signIn(page, { email, password }) {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}

const browser = await chromium.launch({
  executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
  args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
});
for (const [name, who, width, height, path, first] of PICTURES) {
  const context = await browser.newContext({ baseURL: base, viewport: { width, height }, reducedMotion: 'reduce' });
  const page = await context.newPage();
  if (who) await signIn(page, account(who));
  await page.goto(path);
  await page.waitForFunction(() => !document.querySelector('astro-island[ssr]') && !document.body.innerText.includes('Loading the form…'));
  await first?.(page);
  await page.screenshot({ path: join(folder, `${name}.png`) });
  console.log(`${name}.png`);
  await context.close();
}
await browser.close();
