import { mkdtempSync, rmSync, writeFileSync, readFileSync } from 'node:fs';
import type { Server } from 'node:http';
import { request } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Resend } from 'resend';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { createMailFake } from '../../fakes/mail/app';
import { bareAddress, linksOf } from '../../fakes/mail/inbox';
import type { Mail } from '../../fakes/mail/inbox';

let now = new Date('2027-03-13T09:00:00Z');
let server: Server;
let url: string;
let resend: Resend;
const folder = mkdtempSync(join(tmpdir(), 'mail-fake-'));

async function start(options: Parameters<typeof createMailFake>[0] = {}) {
  ({ server } = createMailFake({ clock: () => now, ...options }));
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  resend = new Resend('re_local_demo', { baseUrl: url });
}

function stop() {
  server.closeAllConnections();
  return new Promise((resolve) => server.close(resolve));
}

const mail = {
  from: 'Thistlemoor Regional <office@thistlemoor.example>',
  to: 'Ola Finch <ola@larkwater.example>',
  subject: 'Verify your address',
  text: 'Open http://127.0.0.1:4321/verify?code=abc.\nIt works for one hour.',
};

async function captured(query = ''): Promise<Mail[]> {
  const answer = await (await fetch(`${url}/_mail${query}`)).json() as { count: number; mails: Mail[] };
  expect(answer.count).toBe(answer.mails.length);
  return answer.mails;
}

async function fail(fail: string, times?: number) {
  return fetch(`${url}/_switch`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify({ fail, times }) });
}

beforeEach(async () => {
  now = new Date('2027-03-13T09:00:00Z');
  await start();
});
afterEach(stop);

describe('sending', () => {
  it('takes a mail with everything the SDK can put on it, and gives it back by id', async () => {
    const sent = await resend.emails.send({
      ...mail,
      to: [mail.to, 'second@larkwater.example'], cc: 'copy@larkwater.example', bcc: ['blind@larkwater.example'],
      replyTo: 'desk@thistlemoor.example', headers: { 'X-Entity-Ref-ID': '17' }, tags: [{ name: 'kind', value: 'verify' }],
      html: '<p>Open <a href="http://127.0.0.1:4321/verify?code=abc&amp;next=1">this</a></p>',
      attachments: [{ filename: 'sheet.pdf', content: Buffer.from('0123456789') }],
    });
    expect(sent.error).toBeNull();
    const got = await resend.emails.get(sent.data!.id);
    expect(got.data).toMatchObject({
      object: 'email', id: sent.data!.id, from: mail.from, to: [mail.to, 'second@larkwater.example'], subject: mail.subject,
      cc: ['copy@larkwater.example'], bcc: ['blind@larkwater.example'], reply_to: ['desk@thistlemoor.example'], last_event: 'delivered',
    });
    const [kept] = await captured();
    expect(kept).toMatchObject({
      headers: { 'X-Entity-Ref-ID': '17' }, tags: [{ name: 'kind', value: 'verify' }],
      attachments: [{ filename: 'sheet.pdf', bytes: 10 }],
      links: ['http://127.0.0.1:4321/verify?code=abc&next=1', 'http://127.0.0.1:4321/verify?code=abc'],
    });
  });

  it('takes a batch in order, refuses a wrong one whole, and names the wrong mail when told to be lenient', async () => {
    const good = await resend.batch.send([mail, { ...mail, to: 'second@larkwater.example' }]);
    expect(good.data?.data).toHaveLength(2);
    expect((await captured()).map((m) => m.to[0])).toEqual(['second@larkwater.example', mail.to]);

    const strict = await resend.batch.send([mail, { ...mail, to: 'nobody' }]);
    expect(strict.error).toMatchObject({ statusCode: 422, name: 'validation_error' });
    expect(await captured()).toHaveLength(2);

    const lenient = await resend.batch.send([mail, { ...mail, to: 'nobody' }], { batchValidation: 'permissive' });
    expect(lenient.data?.data).toHaveLength(1);
    expect(lenient.data).toMatchObject({ errors: [{ index: 1 }] });
  });

  it.each([
    ['no sender', { from: '' }, 422, 'missing_required_field'],
    ['nobody to send to', { to: [] }, 422, 'missing_required_field'],
    ['an address that is none', { to: 'ola(at)larkwater.example' }, 422, 'validation_error'],
    ['a line break in an address', { to: 'Ola\r\nBcc: x@y.example <ola@larkwater.example>' }, 422, 'validation_error'],
    ['a line break in the subject', { subject: 'Hello\nBcc: x@y.example' }, 422, 'validation_error'],
    ['no text at all', { text: '' }, 422, 'validation_error'],
    ['a tag with a space', { tags: [{ name: 'a b', value: 'c' }] }, 422, 'validation_error'],
    ['more than fifty people', { to: Array.from({ length: 51 }, (_, i) => `p${i}@larkwater.example`) }, 422, 'validation_error'],
  ])('refuses %s', async (_what, change, statusCode, name) => {
    const { data, error } = await resend.emails.send({ ...mail, ...change });
    expect(data).toBeNull();
    expect(error).toMatchObject({ statusCode, name });
    expect(await captured()).toEqual([]);
  });

  it('wants a key', async () => {
    const without = await fetch(`${url}/emails`, { method: 'POST', body: JSON.stringify(mail) });
    expect(without.status).toBe(401);
    expect(await without.json()).toMatchObject({ statusCode: 401, name: 'missing_api_key' });
    const wrong = await new Resend('sk_other', { baseUrl: url }).emails.send(mail);
    expect(wrong.error).toMatchObject({ statusCode: 401, name: 'validation_error' });
    expect(await captured()).toEqual([]);
  });

  it('answers what it does not know like the service', async () => {
    const headers = { authorization: 'Bearer re_local_demo' };
    expect((await resend.emails.get('00000000-0000-4000-8000-000000000000')).error).toMatchObject({ statusCode: 404, name: 'not_found' });
    expect((await resend.emails.get('17')).error).toMatchObject({ statusCode: 422, name: 'invalid_parameter' });
    expect((await fetch(`${url}/emails`, { method: 'PUT', headers })).status).toBe(405);
    expect((await fetch(`${url}/emails`, { method: 'POST', headers, body: '{' })).status).toBe(400);
  });
});

describe('an idempotency key', () => {
  it('sends once and answers the same, for a day', async () => {
    const first = await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    now = new Date(now.getTime() + 24 * 3600_000 - 1);
    const again = await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    expect(again.data).toEqual(first.data);
    expect(await captured()).toHaveLength(1);
    now = new Date(now.getTime() + 1);
    const nextDay = await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    expect(nextDay.data!.id).not.toBe(first.data!.id);
    expect(await captured()).toHaveLength(2);
  });

  it('is refused for another mail, and for nothing or too much', async () => {
    await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    const other = await resend.emails.send({ ...mail, subject: 'Another' }, { idempotencyKey: 'verify/1' });
    expect(other.error).toMatchObject({ statusCode: 409, name: 'invalid_idempotent_request' });
    const long = await resend.emails.send(mail, { idempotencyKey: 'x'.repeat(257) });
    expect(long.error).toMatchObject({ statusCode: 400, name: 'invalid_idempotency_key' });
    expect(await captured()).toHaveLength(1);
  });

  it('covers a batch as one', async () => {
    const batch = [mail, { ...mail, to: 'second@larkwater.example' }];
    const first = await resend.batch.send(batch, { idempotencyKey: 'batch/1' });
    const again = await resend.batch.send(batch, { idempotencyKey: 'batch/1' });
    expect(again.data).toEqual(first.data);
    expect(await captured()).toHaveLength(2);
  });

  it('is free again after a refused or failed request', async () => {
    await resend.emails.send({ ...mail, to: 'nobody' }, { idempotencyKey: 'verify/1' });
    await fail('500', 1);
    await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    expect((await resend.emails.send(mail, { idempotencyKey: 'verify/1' })).error).toBeNull();
    expect(await captured()).toHaveLength(1);
  });

  it('is refused while the first request with it is under way', async () => {
    await fail('hang', 1);
    const leave = new AbortController();
    const body = JSON.stringify(mail);
    const headers = { 'authorization': 'Bearer re_local_demo', 'content-type': 'application/json', 'idempotency-key': 'verify/1' };
    const hanging = fetch(`${url}/emails`, { method: 'POST', headers, body, signal: leave.signal });
    hanging.catch(() => {});
    await expect.poll(async () => (await (await fetch(`${url}/_switch`)).json() as { fail: string }).fail).toBe('none');
    const meanwhile = await fetch(`${url}/emails`, { method: 'POST', headers, body });
    expect(meanwhile.status).toBe(409);
    expect(await meanwhile.json()).toMatchObject({ name: 'concurrent_idempotent_requests' });
    leave.abort();
    await expect(hanging).rejects.toThrow();
    await expect.poll(async () => (await fetch(`${url}/emails`, { method: 'POST', headers, body })).status).toBe(200);
    expect(await captured()).toHaveLength(1);
  });
});

describe('the failure switch', () => {
  it.each([
    ['500', { statusCode: 500, name: 'internal_server_error' }, 0],
    ['429', { statusCode: 429, name: 'rate_limit_exceeded' }, 0],
    ['reset', { statusCode: null, name: 'application_error' }, 0],
    ['500-after-accept', { statusCode: 500, name: 'internal_server_error' }, 1],
  ])('%s', async (kind, error, taken) => {
    expect(await (await fail(kind, 2)).json()).toEqual({ fail: kind, times: 2 });
    const attempt = () => resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    expect((await attempt()).error).toMatchObject(error);
    expect(await captured()).toHaveLength(taken);
    expect((await attempt()).error).toMatchObject(error);
    const third = await attempt();
    expect(third.error).toBeNull();
    expect((await captured()).map((m) => m.id)).toEqual([third.data!.id]);
    if (kind === '429') {
      await fail('429', 1);
      expect((await resend.emails.send(mail)).headers).toMatchObject({ 'retry-after': '1' });
    }
  });

  it('holds until it is switched off, and refuses what it does not know', async () => {
    await fail('500');
    for (let i = 0; i < 3; i += 1) expect((await resend.emails.send(mail)).error?.statusCode).toBe(500);
    await fail('none');
    expect((await resend.emails.send(mail)).error).toBeNull();
    expect((await fail('flood')).status).toBe(422);
    expect((await fail('500', 0)).status).toBe(422);
    const asForm = await fetch(`${url}/_switch`, { method: 'POST', headers: { 'content-type': 'text/plain' }, body: '{"fail":"500"}' });
    expect(asForm.status).toBe(422);
  });
});

describe('the inbox', () => {
  it('finds mails by recipient, by time and by what came before, newest first, and forgets on demand', async () => {
    await resend.emails.send(mail);
    now = new Date('2027-03-13T10:00:00Z');
    await resend.emails.send({ ...mail, subject: 'Second', to: 'OLA@larkwater.example' });
    await resend.emails.send({ ...mail, to: 'finn@larkwater.example' });
    const toOla = await captured('?to=ola@larkwater.example');
    expect(toOla.map((m) => m.subject)).toEqual(['Second', mail.subject]);
    expect(await captured(`?since=${encodeURIComponent('2027-03-13T09:30:00Z')}`)).toHaveLength(2);
    expect(await captured(`?since=${now.getTime()}&to=ola@larkwater.example`)).toHaveLength(1);
    expect(await captured(`?after=${toOla[0]!.seq}`)).toHaveLength(1);
    expect((await fetch(`${url}/_mail?since=soon`)).status).toBe(400);
    await fetch(`${url}/_mail`, { method: 'DELETE' });
    expect(await captured()).toEqual([]);
  });

  it('waits for a mail when asked to', async () => {
    const waiting = captured('?to=ola@larkwater.example&wait=5000');
    await resend.emails.send({ ...mail, to: 'finn@larkwater.example' });
    await resend.emails.send(mail);
    expect(await waiting).toHaveLength(1);
    expect(await captured('?to=nobody@larkwater.example&wait=30')).toEqual([]);
  });

  it('shows nothing of a mail as markup of its own', async () => {
    const attack = '"><script>alert(1)</script><img src=x onerror=alert(1)>';
    const sent = await resend.emails.send({
      ...mail, subject: attack, text: `${attack} http://x.example/"><script>alert(1)</script>`, headers: { 'X-Note': attack },
      html: `<html><head><title>x</title></head><body>${attack}<a href="javascript:alert(1)">a</a><a href="https://ok.example/?a=1&amp;b=2">b</a></body></html>`,
    });
    const id = sent.data!.id;
    for (const path of ['/', `/?to=${encodeURIComponent(attack)}`, `/mail/${id}`]) {
      const page = await fetch(url + path);
      expect(page.headers.get('content-security-policy')).toContain("default-src 'none'");
      const body = await page.text();
      expect(body).not.toMatch(/<script|<img|onerror=alert\(1\)>|href="javascript/i);
      expect(body).toContain('Nothing here leaves this machine');
    }
    const page = await (await fetch(`${url}/mail/${id}`)).text();
    expect(page).toContain('<iframe');
    expect(page).not.toMatch(/allow-scripts|allow-same-origin/);
    expect(page).toContain('href="https://ok.example/?a=1&amp;b=2"');

    const frame = await fetch(`${url}/mail/${id}/html`);
    const policy = frame.headers.get('content-security-policy') ?? '';
    expect(policy).toMatch(/default-src 'none'.*sandbox/);
    expect(policy).not.toMatch(/script-src|allow-scripts|allow-same-origin/);
    expect(await frame.text()).toContain('<head><base target="_blank">');
  });

  it('answers only to this machine’s own names', async () => {
    const { port } = server.address() as AddressInfo;
    const status = await new Promise((resolve) => {
      request({ port, host: '127.0.0.1', headers: { host: `inbox.example:${port}` } }, (r) => resolve(r.statusCode)).end();
    });
    expect(status).toBe(421);
  });

  it('keeps a bounded number', async () => {
    await stop();
    await start({ limit: 3 });
    for (let i = 1; i <= 5; i += 1) await resend.emails.send({ ...mail, subject: `No ${i}` });
    expect((await captured()).map((m) => m.subject)).toEqual(['No 5', 'No 4', 'No 3']);
  });

  it('outlives a restart and a half-written line, keys included', async () => {
    const file = join(folder, 'store', 'mail.jsonl');
    await stop();
    await start({ file });
    const first = await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    await resend.emails.send({ ...mail, subject: 'Second' });
    await stop();
    writeFileSync(file, `${readFileSync(file, 'utf8')}{"id":"cut o`);
    await start({ file });
    expect((await captured()).map((m) => m.subject)).toEqual(['Second', mail.subject]);
    const again = await resend.emails.send(mail, { idempotencyKey: 'verify/1' });
    expect(again.data).toEqual(first.data);
    await resend.emails.send({ ...mail, subject: 'Third' });
    expect((await captured()).map((m) => m.seq)).toEqual([3, 2, 1]);
    rmSync(folder, { recursive: true });
  });
});

describe('reading addresses and links', () => {
  it('takes the address out of its name', () => {
    expect(bareAddress('Ola Finch <Ola@Larkwater.example>')).toBe('ola@larkwater.example');
    expect(bareAddress(' ola@larkwater.example ')).toBe('ola@larkwater.example');
  });

  it('leaves the sentence’s punctuation out of a link', () => {
    expect(linksOf(null, 'See http://a.example/x?y=1, or (http://b.example/z).')).toEqual(['http://a.example/x?y=1', 'http://b.example/z']);
  });
});
