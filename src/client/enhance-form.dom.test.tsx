import userEvent from '@testing-library/user-event';
import { waitFor } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';

document.title = 'Teams – Fairlead';
const { enhanceForms, formValues, showProblem } = await import('./enhance-form');

const fetchMock = vi.fn<typeof fetch>();
const answer = (status: number, body: unknown, type = 'application/json') =>
  new Response(JSON.stringify(body), { status, headers: { 'content-type': type } });

function page(fields: string, attributes = ''): HTMLFormElement {
  document.body.innerHTML = `<main><form data-enhance action="/api/teams" method="post" ${attributes}>${fields}
    <div class="form-foot"><button type="submit" data-busy="Adding…">Add the team</button><p data-form-status role="status"></p></div></form></main>`;
  enhanceForms();
  return document.querySelector('form') as HTMLFormElement;
}
const NAME = `<div class="field" data-field="name"><label class="label" for="f-name">Name</label><p class="hint" id="f-name-hint">As printed</p>
  <input id="f-name" name="name" required aria-describedby="f-name-hint" data-maxlength="10" data-message-required="Give the team a name." data-message-maxlength="At most 10 letters." /></div>`;
const button = () => document.querySelector('[type=submit]') as HTMLButtonElement;
const input = (name: string) => document.querySelector(`[name="${name}"]`) as HTMLInputElement;
const summary = () => document.querySelector('.error-summary');

beforeEach(() => {
  fetchMock.mockReset();
  vi.stubGlobal('fetch', fetchMock);
  document.title = 'Teams – Fairlead';
});
afterEach(() => vi.unstubAllGlobals());

describe('formValues', () => {
  it('nests by dots, converts by data-type and counts what is not ticked', async () => {
    const form = page(`
      <input name="weights.accuracy" value="60" data-type="number" /><input name="weights.test" value="" data-type="number" />
      <input name="points" value="12.5x" data-type="number" /><input name="limit" value="" data-type="number" data-empty="omit" />
      <input name="rows.0.team" value="S01" /><input name="rows.1.team" value="S02" />
      <input type="checkbox" name="open" value="true" data-type="boolean" /><input type="checkbox" name="trial" value="true" data-type="boolean" checked />
      <input type="checkbox" name="events" value="a" data-type="list" checked /><input type="checkbox" name="events" value="b" data-type="list" />
      <input type="checkbox" name="none" value="a" data-type="list" />
      <input type="radio" name="side" value="left" /><input type="radio" name="side" value="right" checked />
      <input name="order" value="accuracy, barriers" data-type="list" /><input name="text" value="" /><input name="day" value="" data-empty="null" />
      <select name="division"><option value="j">J</option><option value="s" selected>S</option></select>
      <input name="off" value="x" disabled />`);
    expect(await formValues(form)).toEqual({
      weights: { accuracy: 60, test: null },
      points: '12.5x',
      rows: [{ team: 'S01' }, { team: 'S02' }],
      open: false,
      trial: true,
      events: ['a'],
      none: [],
      side: 'right',
      order: ['accuracy', 'barriers'],
      text: '',
      day: null,
      division: 's',
    });
  });
});

describe('before sending', () => {
  it('says what is missing beside the field and at the top, and sends nothing', async () => {
    const user = userEvent.setup();
    page(NAME);
    await user.click(button());
    expect(fetchMock).not.toHaveBeenCalled();
    expect(document.activeElement).toBe(summary());
    expect(summary()?.getAttribute('role')).toBe('alert');
    expect(summary()?.querySelector('h2')?.textContent).toBe('There is a problem');
    expect(summary()?.querySelector('a')?.getAttribute('href')).toBe('#f-name');
    expect(document.getElementById('f-name-error')?.textContent).toBe('Give the team a name.');
    expect(input('name').getAttribute('aria-describedby')).toBe('f-name-error f-name-hint');
    expect(input('name').getAttribute('aria-invalid')).toBe('true');
    expect(document.title).toBe('Error: Teams – Fairlead');
    await user.click(summary()?.querySelector('a') as Element);
    expect(document.activeElement).toBe(input('name'));
  });

  it('does not cut what is too long, it says so; trying again clears what was said', async () => {
    const user = userEvent.setup();
    page(NAME, 'data-done="event"');
    await user.type(input('name'), 'Wrenfield Academy');
    await user.click(button());
    expect(summary()?.textContent).toContain('At most 10 letters.');
    expect(input('name').value).toBe('Wrenfield Academy');
    await user.clear(input('name'));
    await user.type(input('name'), 'Wrenfield');
    fetchMock.mockResolvedValue(answer(200, { message: 'Wrenfield is in.' }));
    await user.click(button());
    await waitFor(() => expect(document.querySelector('[data-form-status]')?.textContent).toBe('Wrenfield is in.'));
    expect(summary()).toBeNull();
    expect(document.querySelector('.field-error')).toBeNull();
    expect(input('name').getAttribute('aria-describedby')).toBe('f-name-hint');
    expect(input('name').hasAttribute('aria-invalid')).toBe(false);
    expect(document.title).toBe('Teams – Fairlead');
  });
});

describe('sending', () => {
  it('sends JSON once, however often the button is touched, and says that it is busy', async () => {
    const user = userEvent.setup();
    const form = page(NAME);
    const done = vi.fn();
    form.addEventListener('fairlead:done', (event) => done((event as CustomEvent).detail));
    let finish: (response: Response) => void = () => undefined;
    fetchMock.mockReturnValue(new Promise((resolve) => (finish = resolve)));
    await user.type(input('name'), 'Ossler');
    await user.click(button());
    await user.click(button());
    await waitFor(() => expect(button().textContent).toBe('Adding…'));
    expect(button().getAttribute('aria-disabled')).toBe('true');
    finish(answer(200, { id: 7 }));
    await waitFor(() => expect(done).toHaveBeenCalledWith({ id: 7 }));
    expect(fetchMock).toHaveBeenCalledTimes(1);
    const [url, init] = fetchMock.mock.calls[0] as [string, RequestInit];
    expect(url).toBe('/api/teams');
    expect(init).toMatchObject({ method: 'POST', credentials: 'same-origin', body: '{"name":"Ossler"}' });
    expect(button().textContent).toBe('Add the team');
    expect(button().hasAttribute('aria-disabled')).toBe(false);
    expect(document.querySelector('[data-form-status]')?.textContent).toMatch(/^Kept at \d+:\d\d$/);
  });

  it('puts the server’s words beside their fields and keeps what was typed', async () => {
    const user = userEvent.setup();
    const form = page(`${NAME}<input type="hidden" name="division" value="s" />`);
    const refused = vi.fn();
    form.addEventListener('fairlead:refused', refused);
    fetchMock.mockResolvedValue(
      answer(
        422,
        {
          status: 422,
          title: 'There is a problem',
          detail: 'x',
          code: 'bad-input',
          fields: [
            { path: 'name', message: 'There is an Ossler already.' },
            { path: 'division', message: 'Senior is full. <b>' },
          ],
        },
        'application/problem+json',
      ),
    );
    await user.type(input('name'), 'Ossler');
    await user.click(button());
    await waitFor(() => expect(summary()).not.toBeNull());
    const items = [...(summary()?.querySelectorAll('li') ?? [])].map((item) => item.textContent);
    expect(items).toEqual(['There is an Ossler already.', 'Senior is full. <b>']);
    expect(summary()?.querySelectorAll('a')).toHaveLength(1);
    expect(document.getElementById('f-name-error')?.textContent).toBe('There is an Ossler already.');
    expect(input('name').value).toBe('Ossler');
    expect(refused).toHaveBeenCalledTimes(1);
  });

  it('says in words that the network is away, and that nothing is lost', async () => {
    const user = userEvent.setup();
    page(NAME);
    fetchMock.mockRejectedValue(new TypeError('Failed to fetch'));
    await user.type(input('name'), 'Ossler');
    await user.click(button());
    await waitFor(() => expect(summary()?.textContent).toContain('What you typed is still here'));
    expect(input('name').value).toBe('Ossler');
    expect(button().hasAttribute('aria-disabled')).toBe(false);
  });

  it('says so when the answer is no problem document', async () => {
    const user = userEvent.setup();
    page(NAME);
    fetchMock.mockResolvedValue(new Response('<html>Bad gateway</html>', { status: 502 }));
    await user.type(input('name'), 'Ossler');
    await user.click(button());
    await waitFor(() => expect(summary()?.textContent).toContain('did not answer as it should'));
  });

  it('never follows an answer to another site', async () => {
    const user = userEvent.setup();
    const form = page(NAME);
    const done = vi.fn();
    form.addEventListener('fairlead:done', done);
    await user.type(input('name'), 'Ossler');
    for (const goTo of ['//elsewhere.example', 'https://elsewhere.example', '/\\elsewhere.example', 'javascript:alert(1)']) {
      fetchMock.mockResolvedValueOnce(answer(200, { goTo }));
      done.mockClear();
      await user.click(button());
      await waitFor(() => expect(done).toHaveBeenCalledTimes(1));
    }
  });

  it('includes the button that was pressed', async () => {
    const user = userEvent.setup();
    page(`${NAME}<button type="submit" name="then" value="another">Add and go on</button>`);
    fetchMock.mockResolvedValue(answer(200, {}));
    await user.type(input('name'), 'Ossler');
    await user.click(document.querySelector('[name=then]') as Element);
    await waitFor(() => expect(fetchMock).toHaveBeenCalled());
    expect(JSON.parse(fetchMock.mock.calls[0]?.[1]?.body as string)).toEqual({ name: 'Ossler', then: 'another' });
  });
});

describe('showProblem', () => {
  it('marks a group of choices as one', () => {
    const form = page(`<fieldset class="field" data-field="side"><legend class="label">Side</legend>
      <input type="radio" id="f-side" name="side" value="l" /><input type="radio" id="f-side-1" name="side" value="r" /></fieldset>`);
    showProblem(form, { fields: [{ path: 'side', message: 'Side: choose one.' }] });
    const group = document.querySelector('fieldset') as HTMLElement;
    expect(group.getAttribute('aria-describedby')).toBe('f-side-error');
    expect(group.querySelectorAll('[aria-invalid=true]')).toHaveLength(2);
    expect(group.querySelectorAll('.field-error')).toHaveLength(1);
    expect(group.classList.contains('has-error')).toBe(true);
  });

  it('puts a member’s message beside the list it belongs to', () => {
    const form = page(`<div class="field"><label class="label" for="f-order">Order</label><input id="f-order" name="order" data-type="list" /></div>`);
    showProblem(form, { fields: [{ path: 'order.1', message: 'There is no tie-break ‘luck’.' }] });
    expect(document.getElementById('f-order-error')?.textContent).toBe('There is no tie-break ‘luck’.');
  });
});

describe('a question asked once', () => {
  it('closes with Escape and gives the focus back', async () => {
    const user = userEvent.setup();
    document.body.innerHTML = `<details class="confirm" open><summary>Withdraw</summary><div><button type="button" data-close hidden>Leave it</button></div></details>`;
    enhanceForms();
    const details = document.querySelector('details') as HTMLDetailsElement;
    const close = document.querySelector('[data-close]') as HTMLElement;
    expect(close.hidden).toBe(false);
    await user.click(close);
    expect(details.open).toBe(false);
    details.open = true;
    close.focus();
    await user.keyboard('{Escape}');
    expect(details.open).toBe(false);
    expect(document.activeElement).toBe(document.querySelector('summary'));
  });
});
