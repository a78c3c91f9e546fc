import type { Mail } from './inbox';
import { TEXT_LINK } from './inbox';

/**
 * The inbox as pages. They have no script and allow none. A mail's own HTML comes from whoever wrote the mail, so it is shown in
 * a frame without an origin, under a policy that loads nothing from elsewhere.
 */

/** For every page of the inbox; the frame is its own. */
export const PAGE_POLICY = "default-src 'none'; style-src 'self'; frame-src 'self'; img-src data:; form-action 'self'; base-uri 'none'; frame-ancestors 'none'";

/** For the mail inside the frame: inline styles are how mails are made; a link opens in a tab of its own, free of the sandbox. */
export const MAIL_POLICY = "default-src 'none'; style-src 'unsafe-inline'; img-src data:; base-uri 'none'; form-action 'none'; sandbox allow-popups allow-popups-to-escape-sandbox";

export function escapeHtml(text: string): string {
  const entities: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };
  return text.replace(/[&<>"']/g, (character) => entities[character] ?? character);
}

export const STYLE = `
:root { --paper:#faf8f3; --surface:#fff; --ink:#17212b; --ink-2:#465361; --rule:#d9d5ca; --rule-strong:#a9a69b; --spruce:#15564a; --wash:#e3efeb; }
* { box-sizing: border-box; }
html { background: var(--paper); color: var(--ink); font: 1rem/1.5 "Work Sans", system-ui, sans-serif; -webkit-text-size-adjust: 100%; }
body { margin: 0 auto; max-width: 60rem; padding: 0 1.25rem 4rem; }
a { color: var(--spruce); text-underline-offset: .18em; }
a:hover { text-decoration-thickness: 2px; }
:focus-visible { outline: 2px solid var(--spruce); outline-offset: 2px; }
header { display: flex; flex-wrap: wrap; justify-content: space-between; gap: .25rem 2rem; padding: 1rem 0; border-bottom: 1px solid var(--ink); }
header p { margin: 0; }
header strong { letter-spacing: .01em; }
.quiet, time { color: var(--ink-2); }
h1 { font-size: 1.875rem; line-height: 1.15; font-weight: 600; letter-spacing: -.01em; margin: 2rem 0 1.25rem; overflow-wrap: anywhere; }
h2 { font-size: 1.0625rem; font-weight: 600; margin: 2rem 0 .5rem; }
form { display: flex; flex-wrap: wrap; align-items: end; gap: .75rem 1rem; margin: 0 0 1.5rem; }
form div { flex: 1 1 16rem; max-width: 28rem; }
label { display: block; font-size: .9375rem; font-weight: 500; margin-bottom: .25rem; }
input, button { font: inherit; min-height: 44px; border-radius: 3px; padding: .375rem .75rem; }
input { width: 100%; color: inherit; background: var(--surface); border: 1px solid var(--ink-2); }
button { color: #fff; background: var(--spruce); border: 1px solid var(--spruce); font-weight: 500; cursor: pointer; }
form > a { min-height: 44px; display: inline-flex; align-items: center; }
ol.mails { list-style: none; margin: 0; padding: 0; border-top: 1px solid var(--rule); }
ol.mails li { display: grid; grid-template-columns: minmax(0, 1fr) auto; gap: 0 1.5rem; padding: .75rem 0; border-bottom: 1px solid var(--rule); }
ol.mails a { font-weight: 500; overflow-wrap: anywhere; }
ol.mails .quiet { grid-column: 1; overflow-wrap: anywhere; }
time { font-variant-numeric: tabular-nums lining-nums; font-size: .9375rem; white-space: nowrap; }
dl { display: grid; grid-template-columns: max-content minmax(0, 1fr); gap: .25rem 1.5rem; margin: 0; padding: .75rem 0; border-block: 1px solid var(--rule); }
dt { color: var(--ink-2); }
dd { margin: 0; overflow-wrap: anywhere; }
ul { margin: 0; padding-left: 1.25rem; }
ul a { overflow-wrap: anywhere; }
pre { margin: 0; padding: 1rem; background: var(--surface); border: 1px solid var(--rule); border-radius: 3px; font: .9375rem/1.6 ui-monospace, monospace; white-space: pre-wrap; overflow-wrap: anywhere; }
iframe { display: block; width: 100%; height: 38rem; background: #fff; border: 1px solid var(--rule-strong); border-radius: 3px; }
.empty { padding: 2rem 0; border-block: 1px solid var(--rule); max-width: 40rem; }
@media (max-width: 34rem) { ol.mails li, dl { grid-template-columns: minmax(0, 1fr); } ol.mails time { grid-row: 3; } dd { margin-bottom: .5rem; } }
`;

function page(title: string, body: string): string {
  return `<!doctype html>
<html lang="en-GB">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeHtml(title)}</title>
<link rel="icon" href="data:,">
<link rel="stylesheet" href="/style.css">
</head>
<body>
<header>
<p><strong>Mail</strong> for this machine’s Fairlead</p>
<p class="quiet">Nothing here leaves this machine.</p>
</header>
<main>
${body}
</main>
</body>
</html>
`;
}

const moment = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', hour: '2-digit', minute: '2-digit', second: '2-digit' });

function time(iso: string): string {
  return `<time datetime="${escapeHtml(iso)}">${escapeHtml(moment.format(new Date(iso)))}</time>`;
}

const people = (list: string[]): string => list.map(escapeHtml).join(', ');

/** How many mails a page of the list shows. */
export const PAGE_SIZE = 100;

/** The list, newest first. `mails` are all that match; `from` is the first one shown. */
export function inboxPage({ mails, to, from, recipients }: { mails: Mail[]; to: string; from: number; recipients: string[] }): string {
  const shown = mails.slice(from, from + PAGE_SIZE);
  const count = mails.length === 1 ? 'One mail' : `${mails.length} mails`;
  const heading = to ? `${mails.length ? count : 'No mail'} to ${to}` : mails.length ? count : 'No mail yet';
  const link = (start: number) => `/?${new URLSearchParams({ ...(to ? { to } : {}), ...(start ? { from: String(start) } : {}) })}`;
  const rows = shown.map((mail) => `<li>
<a href="/mail/${mail.id}">${escapeHtml(mail.subject) || '(no subject)'}</a>
${time(mail.createdAt)}
<span class="quiet">to ${people(mail.to)}</span>
</li>`).join('\n');
  const list = shown.length
    ? `<ol class="mails">\n${rows}\n</ol>`
    : `<p class="empty">${to ? 'Nothing was sent to this address.' : 'When the application sends a mail, to verify an address or to invite somebody, it appears here. Load this page again to see it.'}</p>`;
  const older = from + PAGE_SIZE < mails.length ? `<a href="${escapeHtml(link(from + PAGE_SIZE))}">Older mails</a>` : '';
  const newer = from > 0 ? `<a href="${escapeHtml(link(Math.max(0, from - PAGE_SIZE)))}">Newer mails</a>` : '';
  return page(`${heading} – Mail`, `<h1>${escapeHtml(heading)}</h1>
<form method="get" action="/" role="search">
<div><label for="to">Sent to</label>
<input id="to" name="to" type="text" inputmode="email" autocomplete="off" spellcheck="false" list="recipients" value="${escapeHtml(to)}"></div>
<datalist id="recipients">${recipients.map((address) => `<option value="${escapeHtml(address)}"></option>`).join('')}</datalist>
<button type="submit">Show</button>
${to ? '<a href="/">Show all</a>' : ''}
</form>
${list}
${older || newer ? `<p>${[newer, older].filter(Boolean).join(' · ')}</p>` : ''}`);
}

/** Text with its http(s) addresses as links. */
function linked(text: string): string {
  let out = '';
  let done = 0;
  for (const match of text.matchAll(TEXT_LINK)) {
    const address = escapeHtml(match[0]);
    out += `${escapeHtml(text.slice(done, match.index))}<a href="${address}" rel="noopener noreferrer">${address}</a>`;
    done = match.index + match[0].length;
  }
  return out + escapeHtml(text.slice(done));
}

/** One mail: what is on it, the links in it, how it looks, its text. */
export function mailPage(mail: Mail): string {
  const rows: [string, string][] = [
    ['From', people([mail.from])],
    ['To', people(mail.to)],
    ['Copy to', people(mail.cc)],
    ['Blind copy to', people(mail.bcc)],
    ['Reply to', people(mail.replyTo)],
    ['Sent', time(mail.createdAt)],
    ['Scheduled for', escapeHtml(mail.scheduledAt ?? '')],
    ...Object.entries(mail.headers).map(([name, value]): [string, string] => [escapeHtml(name), escapeHtml(value)]),
    ['Tags', people(mail.tags.map(({ name, value }) => `${name}: ${value}`))],
    ['Attached', people(mail.attachments.map(({ filename, bytes }) => `${filename} (${bytes.toLocaleString('en-GB')} bytes)`))],
    ['Idempotency key', escapeHtml(mail.request?.key ?? '')],
  ];
  const subject = mail.subject || '(no subject)';
  return page(`${subject} – Mail`, `<p><a href="/">All mail</a></p>
<h1>${escapeHtml(subject)}</h1>
<dl>
${rows.filter(([, value]) => value).map(([name, value]) => `<dt>${name}</dt><dd>${value}</dd>`).join('\n')}
</dl>
${mail.links.length ? `<h2>Links in it</h2>
<ul>
${mail.links.map((link) => `<li><a href="${escapeHtml(link)}" rel="noopener noreferrer">${escapeHtml(link)}</a></li>`).join('\n')}
</ul>` : ''}
${mail.html ? `<h2>As it looks</h2>
<iframe src="/mail/${mail.id}/html" title="The mail as it looks" sandbox="allow-popups allow-popups-to-escape-sandbox" referrerpolicy="no-referrer"></iframe>` : ''}
${mail.text ? `<h2>As plain text</h2>
<pre>${linked(mail.text)}</pre>` : ''}`);
}

/** The mail's own HTML for the frame, its links opening outside it. */
export function frameDocument(html: string): string {
  const base = '<base target="_blank">';
  const head = /<head\b[^>]*>/i.exec(html);
  if (head) return html.slice(0, head.index + head[0].length) + base + html.slice(head.index + head[0].length);
  const root = /<html\b[^>]*>/i.exec(html);
  if (root) return html.slice(0, root.index + root[0].length) + base + html.slice(root.index + root[0].length);
  return `<!doctype html><meta charset="utf-8">${base}${html}`;
}

export function notFoundPage(): string {
  return page('Not here – Mail', `<h1>That mail is not here</h1>
<p>It may have been cleared, or pushed out by newer ones. <a href="/">See all mail.</a></p>`);
}
