import type { IncomingMessage, Server, ServerResponse } from 'node:http';
import { createServer } from 'node:http';
import { Inbox } from './inbox';
import type { InboxOptions } from './inbox';
import { MAIL_POLICY, PAGE_POLICY, STYLE, frameDocument, inboxPage, mailPage, notFoundPage } from './pages';
import type { Answer, Failure } from './service';
import { FAILURES, MailService } from './service';

const LARGEST_BODY = 40 * 1024 * 1024;
const LONGEST_WAIT_MS = 30_000;

class TooLarge extends Error {}

async function readBody(request: IncomingMessage): Promise<string> {
  const chunks: Buffer[] = [];
  let size = 0;
  for await (const chunk of request as AsyncIterable<Buffer>) {
    size += chunk.length;
    if (size > LARGEST_BODY) throw new TooLarge();
    chunks.push(chunk);
  }
  return Buffer.concat(chunks).toString('utf8');
}

function send(response: ServerResponse, status: number, type: string, body: string, headers: Record<string, string> = {}): void {
  response.writeHead(status, {
    'content-type': type,
    'content-length': Buffer.byteLength(body),
    'cache-control': 'no-store',
    'x-content-type-options': 'nosniff',
    'referrer-policy': 'no-referrer',
    'cross-origin-resource-policy': 'same-origin',
    ...headers,
  });
  response.end(body);
}

const json = (response: ServerResponse, { status, body, headers }: Answer): void =>
  send(response, status, 'application/json; charset=utf-8', JSON.stringify(body), headers);

const html = (response: ServerResponse, status: number, body: string, policy = PAGE_POLICY): void =>
  send(response, status, 'text/html; charset=utf-8', body, { 'content-security-policy': policy });

/** Only this machine's own names: a page elsewhere can make its name lead here, and would then read the inbox. */
function isOurName(host: string | undefined): boolean {
  return /^(?:localhost|127\.0\.0\.1|\[::1\])(?::\d+)?$/i.test(host ?? '');
}

/**
 * The stand-in for the hosted mail service: its API, an inbox to read by eye (`/`, `/mail/:id`), and an API for tests
 * (`/_mail`, `/_switch`). It captures and never delivers.
 *
 * - `GET /_mail?to=&since=&after=&wait=`: `{count, mails}`, newest first; `since` is an ISO time or milliseconds, `after` a mail's
 *   `seq`; with `wait` (milliseconds, at most 30,000) the answer comes when a mail matches or the time is over.
 * - `DELETE /_mail`: forgets mails and idempotency keys, switches failures off.
 * - `GET /_switch`, `POST /_switch {fail, times?}`: see `FAILURES`; without `times` it holds until switched off.
 */
export function createMailFake(options: InboxOptions & { clock?: () => Date } = {}): { server: Server; service: MailService } {
  const service = new MailService(new Inbox(options), options.clock);
  const server = createServer((request, response) => {
    handle(service, request, response).catch((error: unknown) => {
      if (error instanceof TooLarge) json(response, service.tooLarge());
      else if (!response.headersSent && !request.destroyed) {
        console.error(error);
        send(response, 500, 'text/plain; charset=utf-8', 'The mail stand-in failed.\n');
      } else response.destroy();
    });
  });
  return { server, service };
}

async function handle(service: MailService, request: IncomingMessage, response: ServerResponse): Promise<void> {
  if (!isOurName(request.headers.host)) {
    send(response, 421, 'text/plain; charset=utf-8', 'Open this by 127.0.0.1 or localhost.\n');
    return;
  }
  const url = new URL(request.url ?? '/', 'http://127.0.0.1');
  const { pathname } = url;
  if (pathname === '/emails' || pathname.startsWith('/emails/')) return api(service, request, response, pathname);
  if (pathname === '/_mail') return mailForTests(service, request, response, url);
  if (pathname === '/_switch') return switchForTests(service, request, response);
  if (request.method !== 'GET' && request.method !== 'HEAD') {
    send(response, 405, 'text/plain; charset=utf-8', 'Only reading here.\n', { allow: 'GET' });
    return;
  }
  if (pathname === '/style.css') return send(response, 200, 'text/css; charset=utf-8', STYLE);
  if (pathname === '/') {
    const to = (url.searchParams.get('to') ?? '').trim();
    const from = Math.max(0, Math.trunc(Number(url.searchParams.get('from')) || 0));
    return html(response, 200, inboxPage({ mails: service.inbox.find({ to }), to, from, recipients: service.inbox.recipients() }));
  }
  const [, id, part] = /^\/mail\/([0-9a-f-]{36})(\/html)?$/.exec(pathname) ?? [];
  const mail = id ? service.inbox.get(id) : undefined;
  if (!mail || (part && !mail.html)) return html(response, 404, notFoundPage());
  if (part) return html(response, 200, frameDocument(mail.html ?? ''), `${MAIL_POLICY}; frame-ancestors 'self'`);
  return html(response, 200, mailPage(mail));
}

async function api(service: MailService, request: IncomingMessage, response: ServerResponse, pathname: string): Promise<void> {
  const sending = pathname === '/emails' || pathname === '/emails/batch';
  const refusal = service.refusal(request.headers.authorization, sending);
  if (refusal) return json(response, refusal);
  if (!sending) {
    const id = /^\/emails\/([^/]+)$/.exec(pathname)?.[1];
    if (!id) return json(response, service.notFound());
    return json(response, request.method === 'GET' ? service.retrieve(id) : service.methodNotAllowed());
  }
  if (request.method !== 'POST') return json(response, service.methodNotAllowed());
  const body = await readBody(request);
  const key = request.headers['idempotency-key'];
  const outcome = await service.send(pathname, body, {
    idempotencyKey: Array.isArray(key) ? key[0] : key,
    permissive: request.headers['x-batch-validation'] === 'permissive',
    gone: new Promise((resolve) => response.once('close', resolve)),
  });
  if (outcome === 'hang') return;
  if (outcome === 'reset') {
    request.socket.resetAndDestroy();
    return;
  }
  json(response, outcome);
}

async function mailForTests(service: MailService, request: IncomingMessage, response: ServerResponse, url: URL): Promise<void> {
  if (request.method === 'DELETE') {
    service.clear();
    return json(response, { status: 200, body: { cleared: true } });
  }
  if (request.method !== 'GET') return json(response, service.methodNotAllowed());
  const given = (name: string) => url.searchParams.get(name) || undefined;
  const since = given('since');
  const sinceDate = since === undefined ? undefined : new Date(/^\d+$/.test(since) ? Number(since) : since);
  if (sinceDate && Number.isNaN(sinceDate.getTime())) {
    return json(response, { status: 400, body: { error: '`since` is an ISO time or milliseconds since 1970.' } });
  }
  const after = given('after');
  const filter = { to: given('to'), since: sinceDate, after: after === undefined ? undefined : Number(after) };
  const until = Date.now() + Math.min(Number(given('wait')) || 0, LONGEST_WAIT_MS);
  let mails = service.inbox.find(filter);
  while (mails.length === 0 && Date.now() < until && !request.destroyed) {
    await service.inbox.next(until - Date.now());
    mails = service.inbox.find(filter);
  }
  json(response, { status: 200, body: { count: mails.length, mails } });
}

async function switchForTests(service: MailService, request: IncomingMessage, response: ServerResponse): Promise<void> {
  if (request.method === 'POST') {
    // A page elsewhere can post a form here but can't claim that it is JSON.
    const isJson = /^application\/json\b/i.test(request.headers['content-type'] ?? '');
    let wanted: { fail?: unknown; times?: unknown } = {};
    try {
      wanted = JSON.parse(isJson ? await readBody(request) : '') as typeof wanted;
    } catch {
      wanted = {};
    }
    const { fail, times = null } = wanted ?? {};
    if (!FAILURES.includes(fail as Failure) || !(times === null || (Number.isInteger(times) && (times as number) > 0))) {
      return json(response, { status: 422, body: { error: `Send JSON: {"fail": ${FAILURES.map((name) => `"${name}"`).join(' | ')}, "times": a whole number above 0, or nothing}.` } });
    }
    service.switch = { fail: fail as Failure, times: times as number | null };
  } else if (request.method !== 'GET') return json(response, service.methodNotAllowed());
  json(response, { status: 200, body: service.switch });
}
