/**
 * Sends `<form data-enhance>` as JSON and says what became of it, beside the fields and in words.
 * Without this script the same forms post to the same endpoints.
 *
 * The form: `data-done` reload | event; the button: `data-busy`; a control: `data-type` number | boolean |
 * list | file-text, `data-empty` omit | null, `data-maxlength`, `data-message-<reason>`.
 * Events, bubbling: `fairlead:done` (detail: the answer), `fairlead:refused` (detail: the problem).
 */
interface Problem {
  title?: string;
  detail?: string;
  code?: string;
  fields?: { path: string; message: string }[];
}
interface Answer {
  goTo?: string;
  message?: string;
}
type Control = HTMLInputElement | HTMLSelectElement | HTMLTextAreaElement;

const KEPT = 'fairlead:message';
const TITLE = document.title;

function controls(form: HTMLFormElement): Control[] {
  return ([...form.elements] as Control[]).filter((c) => c.name && !c.disabled && /^(INPUT|SELECT|TEXTAREA)$/.test(c.tagName));
}

function element(tag: string, className: string, text = ''): HTMLElement {
  const made = document.createElement(tag);
  made.className = className;
  made.textContent = text;
  return made;
}

/** The value to send, or undefined when the control sends none. */
async function valueOf(control: Control): Promise<unknown> {
  const { type, empty } = control.dataset;
  const { value } = control;
  if (control instanceof HTMLInputElement) {
    if (control.type === 'checkbox' && type === 'boolean') return control.checked;
    if ((control.type === 'checkbox' || control.type === 'radio') && !control.checked) return undefined;
    if (control.type === 'file') return control.files?.[0] ? await control.files[0].text() : undefined;
  }
  if (type !== 'list' && value === '' && (empty || type === 'number')) return empty === 'omit' ? undefined : empty === 'text' ? '' : null;
  if (type === 'number') return Number.isFinite(Number(value)) ? Number(value) : value;
  if (type === 'boolean') return value === 'true';
  if (type === 'list') {
    if (control instanceof HTMLSelectElement) return [...control.selectedOptions].map((option) => option.value);
    if (control.type !== 'checkbox') return value.split(/[\n,]/).map((part) => part.trim()).filter(Boolean);
  }
  return value;
}

/** The form as an object: names with dots nest, numbered parts make lists. */
export async function formValues(form: HTMLFormElement, submitter?: HTMLElement | null): Promise<Record<string, unknown>> {
  const root: Record<string, unknown> = {};
  const put = (name: string, value: unknown, list: boolean) => {
    const path = name.split('.');
    const last = path.pop() as string;
    let at = root;
    path.forEach((part, i) => {
      at = (at[part] ??= /^\d+$/.test(path[i + 1] ?? last) ? [] : {}) as Record<string, unknown>;
    });
    if (list) at[last] = [...((at[last] as unknown[]) ?? []), ...(value === undefined ? [] : [value].flat())];
    else if (value !== undefined) at[last] = value;
  };
  for (const control of controls(form)) {
    if (/^(submit|button|image|reset)$/.test(control.type)) continue;
    put(control.name, await valueOf(control), control.dataset['type'] === 'list');
  }
  if (submitter instanceof HTMLButtonElement && submitter.name) put(submitter.name, submitter.value, false);
  return root;
}

/** What can be told before sending, each once, in the words of the control. */
function findings(form: HTMLFormElement): { path: string; message: string }[] {
  const found = new Map<string, string>();
  for (const c of controls(form)) {
    const v = c.validity;
    const most = Number(c.dataset['maxlength'] ?? ('maxLength' in c && c.maxLength >= 0 ? c.maxLength : Infinity));
    const reason = v.valueMissing
      ? 'required'
      : v.badInput || v.typeMismatch
        ? 'type'
        : v.patternMismatch
          ? 'pattern'
          : v.rangeUnderflow
            ? 'min'
            : v.rangeOverflow
              ? 'max'
              : c.dataset['type'] === 'number' && c.value !== '' && !Number.isFinite(Number(c.value))
                ? 'type'
                : c.value.length > most
                  ? 'maxlength'
                  : v.stepMismatch
                    ? 'type'
                    : '';
    if (reason && !found.has(c.name)) {
      found.set(c.name, c.getAttribute(`data-message-${reason}`) ?? (c.validationMessage || 'Look at this again.'));
    }
  }
  return [...found].map(([path, message]) => ({ path, message }));
}

function clear(form: HTMLFormElement): void {
  form.querySelectorAll('.error-summary, .field-error').forEach((e) => e.remove());
  form.querySelectorAll('.has-error').forEach((e) => e.classList.remove('has-error'));
  form.querySelectorAll('[aria-invalid]').forEach((e) => e.removeAttribute('aria-invalid'));
  form.querySelectorAll('[aria-describedby*="-error"]').forEach((e) => {
    const rest = (e.getAttribute('aria-describedby') as string).split(' ').filter((id) => !id.endsWith('-error'));
    if (rest.length) e.setAttribute('aria-describedby', rest.join(' '));
    else e.removeAttribute('aria-describedby');
  });
  document.title = TITLE;
}

/** Puts the message beside its control and returns the control's id, if there is one. */
function besideField(form: HTMLFormElement, path: string, message: string): string {
  const all = controls(form);
  const control = all.find((c) => c.name === path && c.type !== 'hidden') ?? all.find((c) => path.startsWith(`${c.name}.`) && c.type !== 'hidden');
  if (!control) return '';
  control.id ||= `f-${path.replace(/\W+/g, '-')}`;
  const id = `${control.id}-error`;
  if (document.getElementById(id)) return control.id;
  const error = element('p', 'field-error', message);
  error.id = id;
  const field = control.closest<HTMLElement>('.field');
  field?.classList.add('has-error');
  if (field) {
    const before = field.querySelector(':scope > .hint') ?? field.querySelector(':scope > .label');
    if (before) before.after(error);
    else field.prepend(error);
  } else control.before(error);
  const described = field?.tagName === 'FIELDSET' ? field : control;
  described.setAttribute('aria-describedby', [id, described.getAttribute('aria-describedby')].filter(Boolean).join(' '));
  all.filter((c) => c.name === control.name).forEach((c) => c.setAttribute('aria-invalid', 'true'));
  return control.id;
}

/** The summary at the top: focused, linked, the same words as beside the fields. */
export function showProblem(form: HTMLFormElement, problem: Problem): void {
  clear(form);
  const box = element('div', 'error-summary');
  box.setAttribute('role', 'alert');
  box.tabIndex = -1;
  const fields = problem.fields ?? [];
  box.append(element('h2', '', 'There is a problem'));
  const list = element('ul', '');
  for (const { path, message } of fields) {
    const item = element('li', '');
    const id = besideField(form, path, message);
    const words = element(id ? 'a' : 'span', '', message);
    if (id) {
      (words as HTMLAnchorElement).href = `#${id}`;
      words.addEventListener('click', (event) => {
        event.preventDefault();
        document.getElementById(id)?.focus();
      });
    }
    item.append(words);
    list.append(item);
  }
  if (fields.length) box.append(list);
  else box.append(element('p', '', problem.detail ?? problem.title ?? 'That did not work. Try again in a moment.'));
  form.prepend(box);
  document.title = `Error: ${TITLE}`;
  box.focus();
  form.dispatchEvent(new CustomEvent('fairlead:refused', { bubbles: true, detail: problem }));
}

/** 'Kept at 11:32', in the zone of the page. */
function keptNow(): string {
  const timeZone = document.documentElement.dataset['zone'] || undefined;
  return `Kept at ${new Intl.DateTimeFormat('en-GB', { hour: 'numeric', minute: '2-digit', timeZone }).format(new Date())}`;
}

/** Shows what was just done, until it has been read. */
function flash(text: string): void {
  let region = document.querySelector('[data-flash]');
  if (!region) {
    region = element('div', 'flash');
    region.setAttribute('role', 'status');
    (document.querySelector('main') ?? document.body).prepend(region);
  }
  const bar = element('div', '');
  const close = element('button', 'btn quiet', 'Close');
  close.addEventListener('click', () => bar.remove());
  bar.append(element('span', '', text), close);
  region.replaceChildren(bar);
}

function keep(text: string): void {
  try {
    sessionStorage.setItem(KEPT, text);
  } catch {
    // Storage is closed to this page: the next one does without the message.
  }
}

function leave(form: HTMLFormElement, answer: Answer): boolean {
  const { goTo } = answer;
  const message = answer.message ?? keptNow();
  // Only paths of this site: an answer never sends anyone elsewhere.
  if (goTo && /^\/(?![/\\])/.test(goTo)) {
    if (answer.message) keep(answer.message);
    if (goTo.split('#')[0] === location.pathname + location.search) {
      history.replaceState(null, '', goTo);
      location.reload();
    } else location.assign(goTo);
    return true;
  }
  if (form.dataset['done'] === 'reload') {
    keep(message);
    location.reload();
    return true;
  }
  const status = form.querySelector('[data-form-status]');
  if (status) status.textContent = message;
  form.dispatchEvent(new CustomEvent('fairlead:done', { bubbles: true, detail: answer }));
  return false;
}

async function send(form: HTMLFormElement, submitter: HTMLElement | null): Promise<void> {
  if (form.ariaBusy === 'true') return;
  const found = findings(form);
  if (found.length) return showProblem(form, { fields: found });

  const button = submitter ?? form.querySelector<HTMLElement>('[type=submit]');
  const label = [...(button?.childNodes ?? [])];
  form.ariaBusy = 'true';
  button?.setAttribute('aria-disabled', 'true');
  button?.replaceChildren(button.dataset['busy'] ?? 'Keeping…');
  const rest = () => {
    form.ariaBusy = null;
    button?.removeAttribute('aria-disabled');
    button?.replaceChildren(...label);
  };
  const status = form.querySelector('[data-form-status]');
  if (status) status.textContent = '';
  // Left busy while the next page comes; coming back finds the form ready again.
  addEventListener('pageshow', (event) => event.persisted && rest(), { once: true });
  let leaving = false;
  try {
    const response = await fetch(form.getAttribute('action') ?? '', {
      method: 'POST',
      headers: { accept: 'application/json, application/problem+json', 'content-type': 'application/json' },
      credentials: 'same-origin',
      body: JSON.stringify(await formValues(form, submitter)),
    });
    const body: unknown = await response.json().catch(() => null);
    if (response.ok) {
      clear(form);
      leaving = leave(form, (body ?? {}) as Answer);
    } else {
      showProblem(form, (body ?? { detail: 'Fairlead did not answer as it should. What you typed is still here: try again in a moment.' }) as Problem);
    }
  } catch {
    showProblem(form, { code: 'offline', detail: 'Fairlead can’t be reached: the network is away. What you typed is still here; try again when it is back.' });
  } finally {
    if (!leaving) rest();
  }
}

/** Takes over the forms now in the document and what closes a question. Calling it twice changes nothing. */
export function enhanceForms(root: ParentNode = document): void {
  for (const form of root.querySelectorAll<HTMLFormElement>('form[data-enhance]')) {
    if (form.noValidate) continue;
    form.noValidate = true;
    form.addEventListener('submit', (event) => {
      event.preventDefault();
      void send(form, event.submitter);
    });
  }
  for (const details of root.querySelectorAll<HTMLDetailsElement>('details.confirm')) {
    const shut = () => {
      details.open = false;
      details.querySelector('summary')?.focus();
    };
    details.querySelectorAll<HTMLElement>('[data-close]').forEach((close) => {
      close.hidden = false;
      close.onclick = shut;
    });
    details.onkeydown = (event) => {
      if (event.key === 'Escape') shut();
    };
  }
}

enhanceForms();
try {
  const kept = sessionStorage.getItem(KEPT);
  sessionStorage.removeItem(KEPT);
  // A moment later, so that the change is announced.
  if (kept) setTimeout(() => flash(kept), 150);
} catch {
  // No storage, no message.
}
