/**
 * Keeps a staff page fresh without a reload: hears that something changed in the tournament, fetches
 * the page again and swaps its `[data-live]` regions. Typing, focus and scroll stay as they are. It
 * can be paused, says when it last updated, and says plainly when it can't.
 *
 * Markup: `<p data-live-state data-live-url="/api/org/tournament/live" data-zone="…">` and any number of
 * `<section data-live="name">`.
 */
const state = document.querySelector<HTMLElement>('[data-live-state]');
const url = state?.dataset['liveUrl'];

if (state && url) {
  let paused = false;
  let pending = false;
  let connected = false;
  let updated = new Date();
  let busy: Promise<void> | null = null;
  const words = document.createElement('span');
  words.setAttribute('role', 'status');
  const toggle = document.createElement('button');
  toggle.type = 'button';
  toggle.className = 'btn quiet small';
  state.replaceChildren(words, ' ', toggle);

  const clock = new Intl.DateTimeFormat('en-GB', {
    hour: 'numeric',
    minute: '2-digit',
    second: '2-digit',
    ...(state.dataset['zone'] ? { timeZone: state.dataset['zone'] } : {}),
  });

  const say = () => {
    const at = clock.format(updated);
    words.textContent = paused ? `Paused, as of ${at}` : connected ? `Live, updated ${at}` : `Not live, as of ${at}`;
    toggle.textContent = paused ? 'Go on' : 'Pause';
  };

  /** True while somebody is typing inside the region: it is left alone until they leave it. */
  const inUse = (region: Element) => {
    const active = document.activeElement;
    return active !== null && region.contains(active) && active.matches('input, textarea, select, dialog *');
  };

  const swap = async () => {
    const response = await fetch(location.href, { headers: { accept: 'text/html' } });
    if (!response.ok || response.redirected) return;
    const fresh = new DOMParser().parseFromString(await response.text(), 'text/html');
    for (const region of document.querySelectorAll('[data-live]')) {
      const name = region.getAttribute('data-live')!;
      const next = fresh.querySelector(`[data-live="${CSS.escape(name)}"]`);
      if (!next || next.innerHTML === region.innerHTML) continue;
      if (inUse(region)) {
        pending = true;
        continue;
      }
      const open = [...region.querySelectorAll('details[open][id]')].map((d) => d.id);
      const focused = document.activeElement instanceof HTMLElement && region.contains(document.activeElement) ? document.activeElement : null;
      const again = focused?.id ? `#${CSS.escape(focused.id)}` : focused instanceof HTMLAnchorElement ? `a[href="${CSS.escape(focused.getAttribute('href') ?? '')}"]` : null;
      region.replaceChildren(...[...next.childNodes].map((n) => document.importNode(n, true)));
      for (const id of open) region.querySelector(`#${CSS.escape(id)}`)?.setAttribute('open', '');
      if (again) region.querySelector<HTMLElement>(again)?.focus({ preventScroll: true });
    }
    updated = new Date();
  };

  const refresh = () => {
    if (paused || document.hidden) {
      pending = true;
      return;
    }
    pending = false;
    busy ??= swap()
      .catch(() => undefined)
      .then(() => {
        busy = null;
        say();
        if (pending) setTimeout(refresh, 1_000);
      });
  };

  const source = new EventSource(url);
  source.addEventListener('open', () => {
    connected = true;
    say();
  });
  source.addEventListener('error', () => {
    connected = false;
    say();
  });
  source.addEventListener('message', (event) => {
    if (event.data === 'changed') refresh();
    // Back after an interruption: whatever happened meanwhile was not heard.
    else if (Date.now() - updated.getTime() > 5_000) refresh();
  });
  document.addEventListener('visibilitychange', () => {
    if (!document.hidden && pending) refresh();
  });
  document.addEventListener('focusout', () => {
    if (pending) setTimeout(refresh, 100);
  });
  toggle.addEventListener('click', () => {
    paused = !paused;
    say();
    if (!paused && pending) refresh();
  });
  addEventListener('pagehide', () => source.close());
  say();
}
