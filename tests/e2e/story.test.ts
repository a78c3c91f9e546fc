/**
 * The whole way of one event, in a real browser on a fresh database: from signing up to the coach's CSV. The tests follow each
 * other; each is what one person does.
 */
import { readFileSync } from 'node:fs';
import Papa from 'papaparse';
import pg from 'pg';
import type { BrowserContext, Page } from 'playwright-core';
import { describe, expect, test } from 'vitest';
import { mailLink, useApplication, watchPage } from './application';
import { makeOrganization, makePerson, type TestPerson } from '../factories/world';

const app = useApplication();
const PASSWORD = 'a kettle under seven maples';
const OFFICE = '/thistlemoor-regional';
const T = `${OFFICE}/larkwater`;
const TEAMS = ['=SUM(A1)', ...Array.from({ length: 9 }, (_, i) => `Wrenfield ${i + 1}`)];

interface Actor {
  context: BrowserContext;
  page: Page;
  trouble: string[];
  email: string;
}
const actors: Record<'owner' | 'director' | 'leader' | 'coach', Actor> = {} as never;
let existing: TestPerson;

async function enter(name: keyof typeof actors, email: string, person: TestPerson | null, options = {}): Promise<Actor> {
  const context = await app.visit(person, options);
  const page = await context.newPage();
  return (actors[name] = { context, page, email, trouble: watchPage(page) });
}

async function query<Row extends Record<string, unknown>>(text: string): Promise<Row[]> {
  const client = new pg.Client({ connectionString: app.database.adminUrl });
  await client.connect();
  const { rows } = await client.query(text);
  await client.end();
  return rows as Row[];
}

/** Press a button and wait until what it does has been said or shown. */
async function press(page: Page, name: string | RegExp): Promise<void> {
  await page.getByRole('button', { name, exact: typeof name === 'string' }).click();
}

async function signUp(page: Page, name: string, email: string): Promise<void> {
  await page.getByLabel('Your name').fill(name);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(PASSWORD);
  await press(page, 'Sign up');
  await page.getByRole('heading', { name: 'Look into your mail' }).waitFor();
  await page.goto(await mailLink(app, email, /http:\/\/127\.0\.0\.1:\d+\/verify\/[\w-]+/));
  await press(page, 'Confirm my address');
}

async function invite(email: string, role: string, place?: [label: string, option: string]): Promise<string> {
  const { page } = actors.owner;
  await page.goto(`${OFFICE}/office/people/invite`);
  await page.getByLabel('E-mail', { exact: true }).fill(email);
  await page.getByRole('radio', { name: role, exact: true }).check();
  if (place) {
    const select = page.getByLabel(place[0], { exact: true });
    const value = await select.locator('option', { hasText: place[1] }).first().getAttribute('value');
    await select.selectOption(value);
  }
  await press(page, 'Send the invitation');
  await page.waitForURL('**/office/people*');
  return mailLink(app, email, /http:\/\/127\.0\.0\.1:\d+\/thistlemoor-regional\/join\/[\w-]+/);
}

const box = (page: Page, name: string) => page.getByRole('textbox', { name, exact: true });

/** The form's answer: the page goes where it leads, or is shown afresh. */
async function send(page: Page, button: string | RegExp, path: RegExp): Promise<void> {
  const answer = page.waitForResponse((r) => r.request().method() === 'POST' && path.test(r.url()));
  const shown = page.waitForEvent('load');
  shown.catch(() => undefined);
  await press(page, button);
  expect((await answer).status()).toBe(200);
  await shown;
}

describe('from sign-in to the coach’s CSV', () => {
  test('a stranger signs up, confirms by mail, and starts an organization', async () => {
    const { page } = await enter('owner', 'ilse@office.test', null);
    await page.goto('/sign-up?next=%2Fnew');
    await signUp(page, 'Ilse Varden', 'ilse@office.test');
    await page.getByRole('heading', { name: 'Start an organization' }).waitFor();
    await page.getByLabel('Name', { exact: true }).fill('Thistlemoor Regional');
    await page.getByLabel('Address').fill('thistlemoor-regional');
    await page.getByLabel('Time zone').selectOption('America/Chicago');
    await press(page, 'Start the organization');
    await page.waitForURL(`**${OFFICE}/office`);
  });

  test('the owner adds a tournament and cannot be the last to leave', async () => {
    const { page } = actors.owner;
    await page.goto(`${OFFICE}/office/tournaments/new`);
    await page.getByLabel('Name', { exact: true }).fill('Larkwater Tournament');
    await page.getByLabel('Short name').fill('Larkwater');
    await page.getByLabel('Address').fill('larkwater');
    await page.getByLabel('Day').fill('2027-03-13');
    await press(page, 'Add the tournament');
    await page.waitForURL(`**${T}/settings`);
    await page.goto(`${OFFICE}/office/people`);
    await page.getByRole('link', { name: 'Ilse Varden' }).click();
    await page.getByText('Leave the organization', { exact: true }).click();
    await press(page, 'Leave');
    await page.getByText(/last owner|only owner/i).first().waitFor();
  });

  test('a director with an account accepts by the mailed link, adds divisions, schools, teams and events', async () => {
    existing = await makePerson({ name: 'Noor Asante', email: 'noor@office.test' });
    const link = await invite(existing.email, 'Director', ['Tournament', 'Larkwater']);
    const { page } = await enter('director', existing.email, existing);
    await page.goto(link);
    await press(page, /^Accept/);
    await page.waitForURL(`**${T}/overview`);

    await page.goto(`${T}/settings`);
    for (const [name, letter, shape] of [['Junior', 'J', 'Round'], ['Senior', 'S', 'Square']] as const) {
      const form = page.getByRole('form', { name: 'Add a division' });
      if (!(await form.isVisible())) await page.getByText('Add a division', { exact: true }).first().click();
      await form.getByLabel('Name').fill(name);
      await form.getByLabel('Letter').fill(letter);
      await form.getByRole('radio', { name: shape }).check();
      await send(page, 'Add the division', /divisions$/);
    }
    await send(page, 'Publish the programme', /publish$/);

    await page.goto(`${T}/entries?division=senior`);
    await page.getByRole('form', { name: 'Add a school' }).getByLabel('School’s name').fill('Wrenfield Academy');
    await send(page, 'Add the school', /schools$/);
    for (const name of TEAMS) {
      await page.goto(`${T}/entries?division=senior`);
      await page.getByLabel('School', { exact: true }).selectOption({ label: 'Wrenfield Academy' });
      await page.getByLabel('Team’s name').fill(name);
      await send(page, 'Enter the team', /teams$/);
    }
    await page.goto(`${T}/entries?division=junior`);
    await page.getByLabel('School', { exact: true }).selectOption({ label: 'Wrenfield Academy' });
    await page.getByLabel('Team’s name').fill('Wrenfield Junior');
    await send(page, 'Enter the team', /teams$/);

    for (const [name, kind] of [['Optics Shoot', 'optics-shoot'], ['Pond Life', 'written-test'], ['Heat Loss', 'written-test'], ['Night Charts', 'written-test']] as const) {
      await page.goto(`${T}/events`);
      await page.getByLabel('Name', { exact: true }).fill(name);
      await page.getByLabel('Kind').selectOption(kind);
      await send(page, 'Put it in', /events$/);
    }
    await page.goto(`${T}/events`);
    await page.getByRole('heading', { name: '8 events, 8 without a leader' }).waitFor();
  }, 120_000);

  test('an event leader who is new signs up by the link; the director gives the other events too; a coach joins', async () => {
    const leaderLink = await invite('wim@office.test', 'Event leader', ['Event', 'Optics Shoot']);
    const { page } = await enter('leader', 'wim@office.test', null, { width: 820, height: 1180, touch: true });
    await page.goto(leaderLink);
    await page.getByRole('link', { name: 'I have no account yet' }).click();
    await signUp(page, 'Wim Calder', 'wim@office.test');
    await press(page, /^Accept/);
    await page.waitForURL(`**${T}/events/optics-shoot-*`);

    const director = actors.director.page;
    const slugs = (await query<{ slug: string }>(`select slug from events order by slug`)).map((r) => r.slug);
    for (const slug of slugs) {
      await director.goto(`${T}/events/${slug}/edit`);
      if (await director.getByText('led by Wim Calder').first().isVisible()) continue;
      await director.getByLabel('Somebody of the office').selectOption({ label: 'Wim Calder' });
      await send(director, 'Put in charge', /leaders$/);
    }

    const coachPerson = await makePerson({ name: 'Amara Quist', email: 'amara@school.test' });
    const coachLink = await invite(coachPerson.email, 'Coach', ['School', 'Wrenfield Academy']);
    const coach = await enter('coach', coachPerson.email, coachPerson);
    await coach.page.goto(coachLink);
    await press(coach.page, /^Accept/);
    await coach.page.waitForURL(/account|school/);
  }, 120_000);

  test('the leader sets the scoring profile: weights that do not add up are refused, the effect shows, then it is locked', async () => {
    const { page } = actors.leader;
    for (const division of ['senior', 'junior']) {
      await page.goto(`${T}/events/optics-shoot-${division}/setup`);
      const effect = page.getByRole('region', { name: 'Sample teams' });
      const before = await effect.innerText();
      await box(page, 'Accuracy').fill('60');
      await page.getByText('The weights add up to 110: they must add up to 100.').first().waitFor();
      await press(page, 'Keep the set-up');
      await page.getByRole('alert').getByText('The weights add up to 110').waitFor();
      await box(page, 'Written test').fill('20');
      await page.getByText('The weights add up to 100.').waitFor();
      await effect.getByText(/of 60/).first().waitFor();
      expect(await effect.innerText()).not.toBe(before);
      await press(page, 'Lock and open scoring');
      await page.waitForURL(`**/events/optics-shoot-${division}`);
    }
    for (const event of ['pond-life', 'heat-loss', 'night-charts']) {
      for (const division of ['senior', 'junior']) {
        await page.goto(`${T}/events/${event}-${division}/setup`);
        await press(page, 'Lock and open scoring');
        await page.waitForURL(`**/events/${event}-${division}`);
      }
    }
  }, 120_000);

  const E = `${T}/events/optics-shoot-senior`;

  async function choose(page: Page, label: string): Promise<void> {
    const back = page.getByRole('button', { name: 'All teams' });
    if (await back.isVisible()) await back.click();
    await page.getByRole('button', { name: new RegExp(`^${label} `) }).first().click();
    await page.getByRole('heading', { name: new RegExp(`^${label}`) }).waitFor();
  }
  type Run = { wall?: string; tape?: string; mm?: string; mirrors?: string; barriers?: string };
  async function fillRun(page: Page, run: Run): Promise<void> {
    await page.getByRole('radio', { name: run.wall ? 'Wall and tape' : run.mm ? 'Distance' : 'No spot' }).check();
    if (run.wall) {
      await page.getByRole('radio', { name: run.wall, exact: true }).check();
      await box(page, 'Reading on the tape').fill(run.tape!);
    }
    if (run.mm) await box(page, 'Distance from target to spot').fill(run.mm);
    await box(page, 'Mirrors used').fill(run.mirrors ?? '3');
    await box(page, 'Barriers used').fill(run.barriers ?? '1');
  }

  test('readings on a tablet and a phone: both ways round, the shorter counts', async () => {
    const tablet = actors.leader.page;
    const phone = await (await app.visit({ ...(await leaderPerson()) }, { width: 390, height: 844, touch: true })).newPage();
    const phoneTrouble = watchPage(phone);
    const list: [Run, RegExp][] = [
      [{ wall: 'Back', tape: '612.5' }, /112\.5 mm/],
      // Exact opposite: half way round 3,200 mm, the same both ways.
      [{ wall: 'Front', tape: '500' }, /1,600 mm/],
      // A corner, read on either of its walls.
      [{ wall: 'Back', tape: '1000' }, /500 mm/],
      [{ wall: 'Right', tape: '600' }, /500 mm/],
      [{ wall: 'Left', tape: '100' }, /1,000 mm/],
      [{ mm: '0' }, /0 mm/],
      [{ mm: '87.5', mirrors: '5' }, /87\.5 mm/],
      [{}, /No spot|none/],
      [{ wall: 'Back', tape: '499' }, /1 mm/],
    ];
    for (const page of [tablet, phone]) await page.goto(`${E}/enter`);
    for (const [i, [run, words]] of list.entries()) {
      const page = i % 2 === 0 ? tablet : phone;
      await choose(page, `S${String(i + 1).padStart(2, '0')}`);
      await fillRun(page, run);
      await page.getByText(words).first().waitFor();
      await press(page, 'Keep this reading');
      await page.getByRole('status').filter({ hasText: /Kept at/ }).waitFor();
    }
    expect(phoneTrouble).toEqual([]);
    const kept = await query(`select 1 from readings where part = 'run'`);
    expect(kept).toHaveLength(9);
    await phone.context().close();
  }, 120_000);

  test('what can’t be is refused beside its field before anything is sent, and by the server too', async () => {
    const { page } = actors.leader;
    await page.goto(`${E}/enter`);
    await choose(page, 'S10');
    const sent: string[] = [];
    page.on('request', (r) => r.method() === 'POST' && sent.push(r.url()));
    await fillRun(page, { wall: 'Back', tape: '1000.5', mirrors: '6', barriers: '2' });
    await press(page, 'Keep this reading');
    const summary = page.getByRole('alert');
    await summary.waitFor();
    for (const words of [/The back wall is 1,000 mm long/, /up to 5 mirrors/, /1 barrier stands/]) expect(await summary.innerText()).toMatch(words);
    expect(await page.locator('.field.has-error').count()).toBe(3);
    expect(sent).toEqual([]);
    const answer = await page.evaluate(async (url) => {
      const state = (await (await fetch(url)).json()) as { teams: { id: string; label: string }[] };
      const body = { teamId: state.teams.find((t) => t.label === 'S10')!.id, part: 'run', value: { reading: { kind: 'none' }, mirrorsUsed: 6, barriersUsed: 0 }, baseVersion: 0, setupVersion: 1, key: crypto.randomUUID(), device: crypto.randomUUID(), sequence: 1 };
      const response = await fetch(url, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });
      return { status: response.status, problem: (await response.json()) as { fields: { path: string }[] } };
    }, `/api${E}/readings`);
    expect(answer).toMatchObject({ status: 422, problem: { fields: [{ path: 'value.mirrorsUsed' }] } });
  });

  test('with no network it waits on the device and is sent once', async () => {
    const { page, context, trouble } = actors.leader;
    await page.goto(`${E}/enter`);
    await choose(page, 'S10');
    await fillRun(page, { wall: 'Back', tape: '700' });
    await context.setOffline(true);
    await press(page, 'Keep this reading');
    await page.getByText('One reading is on this device and not yet sent.').waitFor();
    expect(await query(`select 1 from reading_revisions where part = 'run'`)).toHaveLength(9);
    await context.setOffline(false);
    await page.getByText('One reading is on this device and not yet sent.').waitFor({ state: 'detached' });
    expect(await query(`select 1 from reading_revisions where part = 'run'`)).toHaveLength(10);
    trouble.length = 0;
  });

  test('two people type different values: both are shown, one is found right, the other is kept on record', async () => {
    const leader = actors.leader.page;
    const director = actors.director.page;
    await Promise.all([leader.goto(`${E}/enter`), director.goto(`${E}/enter`)]);
    for (const page of [leader, director]) {
      await choose(page, 'S10');
      await press(page, 'Change it');
    }
    // The live stream would show the other's value: it is cut off, as on a bad network.
    await leader.route('**/readings', (route) => (route.request().method() === 'GET' ? route.abort() : route.continue()));
    await box(director, 'Reading on the tape').fill('701');
    await press(director, 'Keep the change');
    await director.getByRole('status').filter({ hasText: /Kept at/ }).waitFor();
    await box(leader, 'Reading on the tape').fill('702');
    await press(leader, 'Keep the change');
    const both = leader.getByRole('alert').filter({ hasText: 'Two people typed different values' });
    await both.waitFor();
    expect(await both.innerText()).toMatch(/701[\s\S]*702/);
    await leader.unroute('**/readings');
    await press(leader, 'Mine is right');
    await leader.getByRole('status').filter({ hasText: /Kept at/ }).waitFor();
    await leader.getByRole('link', { name: 'Everything kept of this team' }).click();
    await leader.getByRole('heading', { name: /2 changes/ }).waitFor();
    expect(await leader.getByRole('table').innerText()).toMatch(/702[\s\S]*701[\s\S]*700/);
    actors.leader.trouble.length = 0;
  });

  test('test points come by form and by file, with a template, a preview and errors by row', async () => {
    const { page } = actors.leader;
    await page.goto(`${E}/enter`);
    await choose(page, 'S01');
    await page.getByRole('tab', { name: /Written test/ }).click();
    await box(page, 'Test points').fill('31');
    await press(page, 'Keep these points');
    await page.getByRole('alert').waitFor();
    await box(page, 'Test points').fill('20');
    await press(page, 'Keep these points');
    await page.getByRole('status').filter({ hasText: /Kept at/ }).waitFor();

    await fileOf(`${E}`, (i) => (i === 2 ? '30.25' : String(10 + i)), async () => {
      await page.getByRole('heading', { name: 'One row needs a look before anything is kept' }).waitFor();
      await page.getByText(/Cell D4/).waitFor();
    });
    // All but the last team, which is left for the director to settle.
    await fileOf(`${E}`, (i) => (i === 9 ? '' : String(10 + i)), async () => {
      await press(page, /^Keep the points of/);
      await page.getByText(/Points of 9 teams are kept/).waitFor();
    });
    for (const event of ['pond-life', 'heat-loss', 'night-charts']) {
      await fileOf(`${T}/events/${event}-senior`, (i) => String(45 - 3 * i), async () => {
        await press(page, 'Keep the points of 10 teams');
        await page.getByText(/Points of 10 teams are kept/).waitFor();
      });
      await fileOf(`${T}/events/${event}-junior`, () => '40', async () => {
        await press(page, 'Keep the points of one team');
        await page.getByText(/Points of one team are kept/).waitFor();
      });
    }
  }, 120_000);

  /** Download the template, write points into it, choose it, and go on. */
  async function fileOf(event: string, points: (row: number) => string, then: () => Promise<void>): Promise<void> {
    const { page } = actors.leader;
    await page.goto(`${event}/points`);
    const coming = page.waitForEvent('download');
    await page.getByRole('link', { name: /Download the file/ }).click();
    const text = readFileSync(await (await coming).path(), 'utf8');
    const { data, meta } = Papa.parse<Record<string, string>>(text.replace(/^\uFEFF/, ''), { header: true, skipEmptyLines: true });
    const filled = data.map((row, i) => ({ ...row, 'Test points': points(i) }));
    // As a spreadsheet in another country would save it.
    const csv = Papa.unparse(filled, { columns: meta.fields ?? [], delimiter: ';' });
    await page.getByLabel('File with points').setInputFiles({ name: 'points.csv', mimeType: 'text/csv', buffer: Buffer.from(csv) });
    await then();
  }

  test('the leader hands in, the director settles with a reason, accepts and releases', async () => {
    const leader = actors.leader.page;
    const junior = `${T}/events/optics-shoot-junior`;
    await leader.goto(`${junior}/enter#J01`);
    await fillRun(leader, { mm: '12' });
    await press(leader, 'Keep this reading');
    await leader.getByRole('status').filter({ hasText: /Kept at/ }).waitFor();
    const slugs = (await query<{ slug: string }>(`select slug from events order by slug`)).map((r) => r.slug);
    for (const slug of slugs) {
      await leader.goto(`${T}/events/${slug}`);
      await leader.getByText('Hand in these scores', { exact: true }).click();
      await send(leader, 'Hand in', /hand-in$/);
    }
    const { page } = actors.director;
    await page.goto(`${T}/release`);
    await page.getByRole('heading', { name: /things? before the first release/ }).waitFor();
    await page.goto(`${T}/scores`);
    await page.getByRole('heading', { name: '8 events wait to be accepted' }).waitFor();
    for (const [slug, label, outcome] of [['optics-shoot-senior', 'S10', 'What is missing counts as nothing'], ['optics-shoot-junior', 'J01', 'What is missing counts as nothing']] as const) {
      await page.goto(`${T}/events/${slug}`);
      await page.locator('details.settle summary').click();
      await page.getByRole('radio', { name: outcome }).check();
      await press(page, `Settle ${label}`);
      await page.getByText('Say why in a few words: the reason is kept.').first().waitFor();
      await page.getByLabel('Why', { exact: true }).first().fill('Handed in a blank sheet.');
      await send(page, `Settle ${label}`, /settle$/);
    }
    await page.goto(`${T}/scores`);
    for (let n = 8; n > 0; n--) {
      const form = page.getByRole('form', { name: /^Accept / });
      await form.first().waitFor();
      const shown = page.waitForEvent('load');
      await form.first().getByRole('button').click();
      await shown;
    }
    await page.getByRole('heading', { name: 'All 8 events are accepted' }).waitFor();
    await page.goto(`${T}/release`);
    await send(page, 'Release the results', /releases$/);
    await page.goto(`${T}/release`);
    await page.getByRole('heading', { name: 'Release 1 is public' }).waitFor();
  }, 180_000);

  test('a correction makes release 2, with a public line', async () => {
    const { page } = actors.director;
    await page.goto(`${T}/events/heat-loss-senior`);
    await page.getByText('Take it back', { exact: true }).first().click();
    await page.getByLabel('Why', { exact: true }).fill('One page was not marked.');
    await page.getByRole('button', { name: 'Take it back' }).click();
    await page.getByRole('heading', { name: /hand it in/ }).waitFor();
    await page.goto(`${T}/events/heat-loss-senior/enter#S10`);
    await press(page, 'Change it');
    await box(page, 'Test points').fill('49.5');
    await page.getByLabel('Why it is changed').fill('Page 4 marked');
    await press(page, 'Keep the change');
    await page.getByRole('status').filter({ hasText: /Kept at/ }).waitFor();
    await page.goto(`${T}/events/heat-loss-senior`);
    await page.getByText('Hand in these scores', { exact: true }).click();
    await send(page, 'Hand in', /hand-in$/);
    await page.goto(`${T}/events/heat-loss-senior`);
    await send(page, 'Accept these scores', /accept$/);
    await page.goto(`${T}/release`);
    await page.getByText('What would change').first().waitFor();
    await press(page, 'Release 2');
    await page.getByText('Say in a line what changed: it stands on the public page.').first().waitFor();
    await page.getByLabel('What changed, in a line').fill('Heat Loss, Senior: one page was marked late.');
    await send(page, 'Release 2', /releases$/);
  });

  test('anybody reads programme and results without sign-in and without script', async () => {
    const context = await app.visit(null, { javaScript: false, width: 390, height: 844 });
    const page = await context.newPage();
    const trouble = watchPage(page);
    await page.goto(T);
    await page.getByRole('heading', { name: 'Larkwater Tournament' }).waitFor();
    await page.getByRole('link', { name: 'Results', exact: true }).click();
    await page.goto(`${T}/results/senior`);
    expect(await page.getByRole('table').first().innerText()).toContain('=SUM(A1)');
    await page.getByText('Heat Loss, Senior: one page was marked late.').waitFor();
    await page.getByRole('link', { name: 'Heat Loss' }).first().click();
    expect(await page.getByRole('table').innerText()).toMatch(/1\s+S10 Wrenfield 9[\s\S]*49.5/);
    expect(trouble).toEqual([]);
  });

  test('the coach sees the school’s teams against the field and downloads the CSV', async () => {
    const { page } = actors.coach;
    await page.goto(`${T}/school`);
    await page.getByRole('heading', { name: /of 10$|of 1$/ }).first().waitFor();
    const coming = page.waitForEvent('download');
    await page.getByRole('link', { name: 'Download CSV' }).click();
    const text = readFileSync(await (await coming).path(), 'utf8');
    expect(text.startsWith('\uFEFF')).toBe(true);
    expect(text.split('\r\n').length).toBeGreaterThan(40);
    const { data, errors } = Papa.parse<Record<string, string>>(text.slice(1), { header: true, skipEmptyLines: true });
    expect(errors).toEqual([]);
    expect(data).toHaveLength(44);
    const shot = data.find((r) => r['Event'] === 'Optics Shoot' && r['Team number'] === 'S01')!;
    // By hand: 112.5 of 600 mm, weight 60: 60 × (1 − 112.5/600) = 48.75; one of one barrier, 20; test 10 of 30, 20/3.
    expect(shot).toMatchObject({ Team: "'=SUM(A1)", 'Distance (mm)': '112.5', 'Mirrors used': '3', Field: '10', 'Test points': '10', Score: '75.42' });
    expect(Number.isFinite(Number(shot['Score']))).toBe(true);
    const blank = data.find((r) => r['Event'] === 'Optics Shoot' && r['Team number'] === 'S10')!;
    expect(blank['Release']).toBe('2');
  });

  test('the owner of another organization sees none of it', async () => {
    const other = await makeOrganization({ name: 'Ambermarsh League' });
    const context = await app.visit(other.owner);
    const page = await context.newPage();
    for (const path of ['/office', '/office/people', '/larkwater/overview', '/larkwater/scores', '/larkwater/entries', '/larkwater/events/optics-shoot-senior', '/larkwater/events/optics-shoot-senior/enter', '/larkwater/school']) {
      const response = await page.goto(`${OFFICE}${path}`);
      expect(response!.status(), path).toBe(404);
      expect(await page.content(), path).not.toMatch(/Wrenfield|Thistlemoor Regional/);
    }
    for (const path of [`${E}/readings`, `${T}/live`, `${T}/readings.csv`, `${T}/releases/1/results.csv`, `${E}/readings/template.csv`]) {
      const response = await context.request.get(`${app.url}/api${path}`);
      expect(response.status(), path).toBe(404);
    }
    const written = await context.request.post(`${app.url}/api${E}/hand-in`, { headers: { origin: app.url, 'content-type': 'application/json' }, data: {} });
    expect(written.status()).toBe(404);
  });

  test('no page said that something in it failed', () => {
    for (const [who, actor] of Object.entries(actors)) expect(actor.trouble, who).toEqual([]);
  });
});

async function leaderPerson(): Promise<TestPerson> {
  const [row] = await query<{ id: string; name: string; email: string }>(`select id, name, email from people where email = 'wim@office.test'`);
  return row!;
}
