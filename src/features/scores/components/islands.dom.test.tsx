import { cleanup, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { http, HttpResponse } from 'msw';
import { setupServer } from 'msw/node';
import { afterAll, afterEach, beforeAll, beforeEach, expect, it, vi } from 'vitest';
import { queryClient } from '~/client/query';
import { getEventModule } from '~/event-modules/registry';
import type { EntryState } from '../types';
import EntryForm from './EntryForm';
import PointsImport from './PointsImport';

const URL_ = 'http://localhost:3000/api/o/t/events/e/readings';
const sent: Record<string, unknown>[] = [];
let answer: () => Response;
let state: EntryState;
const server = setupServer(
  http.get(URL_, () => HttpResponse.json(state as never)),
  http.post(URL_, async ({ request }) => {
    sent.push((await request.json()) as Record<string, unknown>);
    return answer();
  }),
  http.post(`${URL_}/import`, async ({ request }) => {
    sent.push((await request.json()) as Record<string, unknown>);
    return HttpResponse.json({ kept: 1 });
  }),
);

beforeAll(() => {
  // jsdom has neither; a browser without a database for this site keeps what waits in memory.
  vi.stubGlobal('EventSource', class { onmessage = null; close() {} });
  server.listen({ onUnhandledRequest: 'error' });
});
afterAll(() => server.close());
beforeEach(() => {
  sent.length = 0;
  sessionStorage.clear();
  location.hash = '';
  queryClient().clear();
  answer = () => HttpResponse.json({ version: 1, keptAt: '2027-03-13T17:32:00Z' });
  state = {
    event: { slug: 'e', name: 'Optics Shoot', moduleKey: 'optics-shoot', state: 'open', room: '', division: { name: 'Senior', letter: 'S', shape: 'square' } },
    setup: getEventModule('optics-shoot').setup.defaults(),
    setupVersion: 4,
    locked: true,
    teams: [
      { id: '018f0000-0000-7000-8000-000000000001', number: 1, label: 'S01', name: 'Wrenfield 1', schoolName: 'Wrenfield', kept: {} },
      { id: '018f0000-0000-7000-8000-000000000002', number: 2, label: 'S02', name: 'Wrenfield 2', schoolName: 'Wrenfield', kept: {} },
    ],
    asOf: '2027-03-13T17:30:00Z',
  };
});
afterEach(cleanup);

const form = () => render(<EntryForm initial={state} endpoint="/api/o/t/events/e/readings" liveUrl="/api/o/t/live" base="/o/t/events/e" person={{ id: 'p', name: 'Wim' }} zone="America/Chicago" />);

async function typeRun(user: ReturnType<typeof userEvent.setup>, tape: string, mirrors: string) {
  await user.click(await screen.findByRole('button', { name: /S01/ }));
  await user.click(await screen.findByRole('radio', { name: 'Wall and tape' }));
  await user.click(screen.getByRole('radio', { name: 'Back' }));
  await user.type(screen.getByRole('textbox', { name: 'Reading on the tape' }), tape);
  await user.type(screen.getByRole('textbox', { name: 'Mirrors used' }), mirrors);
  await user.type(screen.getByRole('textbox', { name: 'Barriers used' }), '1');
}

it('keeps a run with a key, the set-up it was typed under and the version it was typed against', async () => {
  const user = userEvent.setup();
  form();
  await typeRun(user, '612.5', '3');
  screen.getByText('112.5 mm', { selector: 'b' });
  await user.click(screen.getByRole('button', { name: 'Keep this reading' }));
  await screen.findByText('Kept at 11:32');
  expect(sent).toHaveLength(1);
  expect(sent[0]).toMatchObject({ part: 'run', baseVersion: 0, setupVersion: 4, sequence: 1, value: { reading: { kind: 'tape', wall: 'back', tape: '612.5' }, mirrorsUsed: 3, barriersUsed: 1 } });
  expect(sent[0]!['key']).toMatch(/^[0-9a-f-]{36}$/);
});

it('sends nothing that can’t be, and says so beside the field', async () => {
  const user = userEvent.setup();
  form();
  await typeRun(user, '1000.5', '6');
  await user.click(screen.getByRole('button', { name: 'Keep this reading' }));
  const summary = await screen.findByRole('alert');
  expect(summary.textContent).toMatch(/1,000 mm long.*up to 5 mirrors/s);
  expect(screen.getByRole('textbox', { name: 'Mirrors used' }).getAttribute('aria-invalid')).toBe('true');
  expect(sent).toEqual([]);
});

it('puts both values to a person when somebody else kept another, and keeps the one found right against theirs', async () => {
  const user = userEvent.setup();
  const theirs = { reading: { kind: 'tape', wall: 'back', tape: '700' }, mirrorsUsed: 2, barriersUsed: 1 };
  answer = () => HttpResponse.json({ code: 'stale', title: 'x', detail: 'y', current: { version: 3, value: theirs, keptAt: '2027-03-13T17:31:00Z', keptBy: 'Noor' } }, { status: 409 });
  form();
  await typeRun(user, '612.5', '3');
  await user.click(screen.getByRole('button', { name: 'Keep this reading' }));
  const both = await screen.findByText('Two people typed different values. Which is right?');
  expect(both.parentElement!.textContent).toMatch(/Noor.*200 mm.*You.*112.5 mm/s);
  answer = () => HttpResponse.json({ version: 4, keptAt: '2027-03-13T17:32:00Z' });
  await user.click(screen.getByRole('button', { name: 'Mine is right' }));
  await screen.findByText('Kept at 11:32');
  expect(sent[1]).toMatchObject({ baseVersion: 3, value: { reading: { tape: '612.5' } } });
  expect(sent[1]!['key']).not.toBe(sent[0]!['key']);
});

it('holds on to it while there is no network, and sends the same key again', async () => {
  const user = userEvent.setup();
  answer = () => HttpResponse.error();
  form();
  await typeRun(user, '612.5', '3');
  await user.click(screen.getByRole('button', { name: 'Keep this reading' }));
  await screen.findByText(/One reading is on this device and not yet sent/);
  answer = () => HttpResponse.json({ version: 1, keptAt: '2027-03-13T17:32:00Z' });
  await user.click(screen.getByRole('button', { name: 'Send now' }));
  await waitFor(() => expect(screen.queryByText(/on this device and not yet sent/)).toBeNull());
  expect(new Set(sent.map((s) => s['key'])).size).toBe(1);
});

it('reads a file of points, names the cell that is wrong, and keeps nothing until all is right', async () => {
  const user = userEvent.setup();
  render(<PointsImport initial={state} endpoint="/api/o/t/events/e/readings" base="/o/t/events/e" />);
  // jsdom's files can't be read as bytes.
  const file = (text: string) => Object.assign(new File([text], 'points.csv', { type: 'text/csv' }), { arrayBuffer: async () => new TextEncoder().encode(text).buffer });
  await user.upload(screen.getByLabelText('File with points'), file('Team number;Team;Test points\r\nS01;Wrenfield 1;12,5\r\nS02;Wrenfield 2;31\r\n'));
  await screen.findByText('One row needs a look before anything is kept');
  screen.getByText(/Cell C3:/);
  expect(screen.queryByRole('button', { name: /Keep the points/ })).toBeNull();
  await user.upload(screen.getByLabelText('File with points'), file('Team number;Team;Test points\r\nS01;Wrenfield 1;12,5\r\nS02;Wrenfield 2;\r\n'));
  await user.click(await screen.findByRole('button', { name: 'Keep the points of one team' }));
  await screen.findByText('Points of one team are kept.');
  expect(sent[0]).toMatchObject({ part: 'test', rows: [{ baseVersion: 0, value: { points: '12.5' } }] });
});
