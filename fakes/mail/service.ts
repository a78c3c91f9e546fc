import { createHash, randomUUID } from 'node:crypto';
import type { Inbox, Mail } from './inbox';
import { linksOf } from './inbox';

/**
 * The part of the hosted mail service's REST API that the product uses: sending one mail or a batch, and reading a sent one.
 * Shapes, status codes, names and messages of errors follow its public API reference ("Errors", "Idempotency keys", "Send
 * email", "Send batch emails", "Retrieve email"). Its rate limit is not imitated except by the switch, so that tests run at
 * their own pace.
 */

export interface Answer {
  status: number;
  body: unknown;
  headers?: Record<string, string>;
}

/** What `fail` does to the next requests that send:
 * - `500`, `429`: that answer, nothing is taken;
 * - `reset`: the connection breaks, nothing is taken;
 * - `hang`: no answer comes until the client leaves, nothing is taken;
 * - `500-after-accept`: the mail is taken, and the answer is 500 all the same. */
export const FAILURES = ['none', '500', '429', 'reset', 'hang', '500-after-accept'] as const;
export type Failure = (typeof FAILURES)[number];

export interface Switch {
  fail: Failure;
  /** Requests left to fail; `null` means until it is switched off. */
  times: number | null;
}

const KEY_LIFE_MS = 24 * 60 * 60 * 1000;
const MOST_RECIPIENTS = 50;
const MOST_IN_BATCH = 100;

const failure = (statusCode: number, name: string, message: string): Answer => ({
  status: statusCode,
  body: { statusCode, name, message },
});

const INTERNAL = failure(500, 'internal_server_error', 'An unexpected error occurred.');

/** The answers that are none: the caller closes the connection, at once or when the client goes. */
export type Outcome = Answer | 'reset' | 'hang';

interface Remembered {
  hash: string;
  at: number;
  /** `null` while the first request is being answered. */
  answer: Answer | null;
}

type Json = null | boolean | number | string | Json[] | { [key: string]: Json };

/** The same text for the same JSON value, whatever the order of keys. */
function canonical(value: Json): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`;
  if (value && typeof value === 'object') {
    return `{${Object.keys(value).sort().map((key) => `${JSON.stringify(key)}:${canonical(value[key] ?? null)}`).join(',')}}`;
  }
  return JSON.stringify(value);
}

const ADDRESS = /^[^\s@<>(),;:"[\]]+@[^\s@<>(),;:"[\]]+\.[^\s@<>(),;:"[\].]+$/;

function isAddress(written: unknown): written is string {
  if (typeof written !== 'string' || /[\r\n]/.test(written)) return false;
  const named = /^[^<>]*<([^<>]+)>$/.exec(written.trim());
  return ADDRESS.test((named?.[1] ?? written).trim());
}

class Refused extends Error {
  constructor(readonly answer: Answer) {
    super('refused');
  }
}

const refuse = (statusCode: number, name: string, message: string): never => {
  throw new Refused(failure(statusCode, name, message));
};

const badAddress = (field: string): never =>
  refuse(422, 'validation_error',
    `Invalid \`${field}\` field. The email address needs to follow the \`email@example.com\` or \`Name <email@example.com>\` format.`);

function addressList(value: Json | undefined, field: string, most = MOST_RECIPIENTS): string[] {
  if (value === undefined || value === null || value === '') return [];
  const list = Array.isArray(value) ? value : [value];
  if (list.length > most) refuse(422, 'validation_error', `The \`${field}\` field accepts at most ${most} addresses.`);
  return list.map((written) => (isAddress(written) ? written : badAddress(field)));
}

function optionalText(value: Json | undefined, field: string): string | null {
  if (value === undefined || value === null) return null;
  if (typeof value !== 'string') return refuse(422, 'validation_error', `The \`${field}\` field must be a \`string\`.`);
  return value;
}

type Draft = Omit<Mail, 'id' | 'seq' | 'createdAt' | 'request'>;

/** Reads one mail of a request, or throws the service's refusal. */
function readMail(input: Json, inBatch: boolean): Draft {
  if (!input || typeof input !== 'object' || Array.isArray(input)) {
    return refuse(422, 'validation_error', 'The request body must be an object.');
  }
  for (const field of ['from', 'to', 'subject'] as const) {
    const value = input[field];
    if (value === undefined || value === null || value === '' || (Array.isArray(value) && value.length === 0)) {
      refuse(422, 'missing_required_field', `Missing \`${field}\` field.`);
    }
  }
  const from = isAddress(input['from']) ? input['from'] : badAddress('from');
  const subject = optionalText(input['subject'], 'subject') ?? '';
  if (/[\r\n]/.test(subject)) refuse(422, 'validation_error', 'The `\\n` is not allowed in the `subject` field.');
  const html = optionalText(input['html'], 'html');
  const text = optionalText(input['text'], 'text');
  if (!html && !text) refuse(422, 'validation_error', 'Missing `html` or `text` field.');

  const headers: Record<string, string> = {};
  const givenHeaders = input['headers'] ?? {};
  if (typeof givenHeaders !== 'object' || Array.isArray(givenHeaders)) {
    return refuse(422, 'validation_error', 'The `headers` field must be an object.');
  }
  for (const [name, value] of Object.entries(givenHeaders)) {
    if (typeof value !== 'string' || /[\r\n]/.test(value) || !/^[!#$%&'*+.^_`|~0-9A-Za-z-]+$/.test(name)) {
      refuse(422, 'validation_error', 'The `headers` field must hold names and values without line breaks.');
    } else headers[name] = value;
  }

  const givenTags = input['tags'] ?? [];
  if (!Array.isArray(givenTags)) return refuse(422, 'validation_error', 'The `tags` field must be an array.');
  const tags = givenTags.map((tag) => {
    const { name, value } = (tag && typeof tag === 'object' && !Array.isArray(tag) ? tag : {}) as Record<string, Json>;
    for (const part of [name, value]) {
      if (typeof part !== 'string' || !/^[A-Za-z0-9_-]{1,256}$/.test(part)) {
        refuse(422, 'validation_error', 'Tags should only contain ASCII letters, numbers, underscores, or dashes.');
      }
    }
    return { name: String(name), value: String(value) };
  });

  const givenAttachments = input['attachments'] ?? [];
  if (!Array.isArray(givenAttachments)) return refuse(422, 'validation_error', 'The `attachments` field must be an array.');
  if (inBatch && givenAttachments.length) {
    refuse(422, 'validation_error', 'The `attachments` field is not supported in batch requests.');
  }
  const attachments = givenAttachments.map((given) => {
    const attachment = (given && typeof given === 'object' && !Array.isArray(given) ? given : {}) as Record<string, Json>;
    const { filename, content, path, content_type: contentType } = attachment;
    if (typeof content !== 'string' && typeof path !== 'string') {
      refuse(422, 'invalid_attachment', 'Attachment must have either a `content` or `path`.');
    }
    return {
      filename: typeof filename === 'string' ? filename : 'attachment',
      contentType: typeof contentType === 'string' ? contentType : null,
      bytes: typeof content === 'string' ? Buffer.byteLength(content, 'base64') : 0,
    };
  });
  const scheduledAt = optionalText(input['scheduled_at'], 'scheduled_at');
  if (inBatch && scheduledAt) refuse(422, 'validation_error', 'The `scheduled_at` field is not supported in batch requests.');

  return {
    from, subject, html, text, headers, tags, attachments, scheduledAt,
    to: addressList(input['to'], 'to'),
    cc: addressList(input['cc'], 'cc'),
    bcc: addressList(input['bcc'], 'bcc'),
    replyTo: addressList(input['reply_to'], 'reply_to'),
    links: linksOf(html, text),
  };
}

export class MailService {
  #keys = new Map<string, Remembered>();
  #switch: Switch = { fail: 'none', times: null };

  /** `clock` gives the present moment; tests pass their own to make a day go by. */
  constructor(readonly inbox: Inbox, readonly clock: () => Date = () => new Date()) {
    for (const mail of inbox.find()) {
      if (!mail.request || this.#keys.has(mail.request.key)) continue;
      this.#keys.set(mail.request.key, {
        hash: mail.request.hash,
        at: Date.parse(mail.createdAt),
        answer: { status: 200, body: JSON.parse(mail.request.answer) },
      });
    }
  }

  get switch(): Switch {
    return { ...this.#switch };
  }

  set switch(wanted: Switch) {
    this.#switch = { ...wanted };
  }

  /** Forgets mails and idempotency keys, and switches failures off. */
  clear(): void {
    this.inbox.clear();
    this.#keys.clear();
    this.#switch = { fail: 'none', times: null };
  }

  #nextFailure(): Failure {
    const { fail, times } = this.#switch;
    if (fail === 'none' || times === null) return fail;
    this.#switch = times > 1 ? { fail, times: times - 1 } : { fail: 'none', times: null };
    return fail;
  }

  /** The refusal of a request without a usable key, or `null`. Every `re_…` key is a good one here. */
  refusal(authorization: string | undefined, sending: boolean): Answer | null {
    const key = /^Bearer\s+(\S+)$/i.exec(authorization ?? '')?.[1];
    if (!key) return failure(401, 'missing_api_key', 'Missing API Key');
    if (!/^re_\w{4,}$/.test(key)) return failure(sending ? 401 : 400, 'validation_error', 'API key is invalid');
    return null;
  }

  /**
   * Sends one mail (`path` `/emails`) or a batch (`/emails/batch`). `gone` settles when the client leaves, which ends a
   * request that hangs.
   */
  async send(path: '/emails' | '/emails/batch', rawBody: string, options: {
    idempotencyKey?: string | undefined; permissive?: boolean; gone: Promise<void>;
  }): Promise<Outcome> {
    let body: Json;
    try {
      body = JSON.parse(rawBody) as Json;
    } catch {
      return failure(400, 'validation_error', 'The request body is not valid JSON.');
    }
    const { idempotencyKey: key } = options;
    if (key === undefined) return this.#process(path, body, null, options);
    if (key.length < 1 || key.length > 256) {
      return failure(400, 'invalid_idempotency_key', 'Idempotency keys, if present, must have between 1 and 256 characters.');
    }
    const now = this.clock().getTime();
    for (const [old, { at, answer }] of this.#keys) if (answer && now - at >= KEY_LIFE_MS) this.#keys.delete(old);

    const hash = createHash('sha256').update(`${path}\n${canonical(body)}`).digest('hex');
    const known = this.#keys.get(key);
    if (known && known.hash !== hash) {
      return failure(409, 'invalid_idempotent_request', 'Same idempotency key used with a different request payload.');
    }
    if (known && !known.answer) {
      return failure(409, 'concurrent_idempotent_requests', 'Same idempotency key used while original request is still in progress.');
    }
    if (known?.answer) {
      // A service that is down is down for repetitions too.
      return this.#disturb(this.#nextFailure(), known.answer, options.gone);
    }
    const remembered: Remembered = { hash, at: now, answer: null };
    this.#keys.set(key, remembered);
    try {
      return await this.#process(path, body, { key, hash, remember: (answer) => { remembered.answer = answer; } }, options);
    } finally {
      // Only what was taken is remembered: a refused or failed request may be corrected and sent again under its key.
      if (!remembered.answer) this.#keys.delete(key);
    }
  }

  async #disturb(fail: Failure, answer: Answer, gone: Promise<void>): Promise<Outcome> {
    switch (fail) {
      case '500':
      case '500-after-accept':
        return INTERNAL;
      case '429':
        return {
          ...failure(429, 'rate_limit_exceeded', 'Too many requests. Please limit the number of requests per second. Or contact support to increase rate limit.'),
          headers: { 'retry-after': '1', 'ratelimit-limit': '2', 'ratelimit-remaining': '0', 'ratelimit-reset': '1' },
        };
      case 'reset':
        return 'reset';
      case 'hang':
        await gone;
        return 'hang';
      case 'none':
        return answer;
    }
  }

  async #process(path: string, body: Json, request: { key: string; hash: string; remember: (answer: Answer) => void } | null, options: {
    permissive?: boolean; gone: Promise<void>;
  }): Promise<Outcome> {
    const fail = this.#nextFailure();
    if (fail !== 'none' && fail !== '500-after-accept') return this.#disturb(fail, INTERNAL, options.gone);

    const batch = path === '/emails/batch';
    const drafts: Draft[] = [];
    const errors: { index: number; message: string }[] = [];
    try {
      if (batch && !Array.isArray(body)) refuse(422, 'validation_error', 'The request body must be an array.');
      const inputs = Array.isArray(body) && batch ? body : [body];
      if (inputs.length > MOST_IN_BATCH) refuse(422, 'validation_error', `The batch accepts at most ${MOST_IN_BATCH} emails.`);
      for (const [index, input] of inputs.entries()) {
        try {
          drafts.push(readMail(input, batch));
        } catch (error) {
          if (!(error instanceof Refused) || !batch || !options.permissive) throw error;
          errors.push({ index, message: (error.answer.body as { message: string }).message });
        }
      }
    } catch (error) {
      if (error instanceof Refused) return error.answer;
      throw error;
    }

    const createdAt = this.clock().toISOString();
    const ids = drafts.map(() => randomUUID());
    const answer: Answer = {
      status: 200,
      body: batch
        ? { data: ids.map((id) => ({ id })), ...(options.permissive ? { errors } : {}) }
        : { id: ids[0] },
    };
    for (const [i, draft] of drafts.entries()) {
      this.inbox.add({
        ...draft, id: ids[i] ?? '', createdAt,
        request: request ? { key: request.key, hash: request.hash, answer: JSON.stringify(answer.body) } : null,
      });
    }
    request?.remember(answer);
    return this.#disturb(fail, answer, options.gone);
  }

  /** A sent mail as the service shows it. */
  retrieve(id: string): Answer {
    if (!/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i.test(id)) {
      return failure(422, 'invalid_parameter', 'The `id` must be a valid UUID.');
    }
    const mail = this.inbox.get(id);
    if (!mail) return failure(404, 'not_found', 'Email not found');
    return {
      status: 200,
      body: {
        object: 'email', id: mail.id, to: mail.to, from: mail.from, created_at: mail.createdAt, subject: mail.subject,
        html: mail.html, text: mail.text, bcc: mail.bcc, cc: mail.cc, reply_to: mail.replyTo,
        last_event: mail.scheduledAt ? 'scheduled' : 'delivered', scheduled_at: mail.scheduledAt, tags: mail.tags,
      },
    };
  }

  notFound(): Answer {
    return failure(404, 'not_found', 'The requested endpoint does not exist.');
  }

  methodNotAllowed(): Answer {
    return failure(405, 'method_not_allowed', 'Method is not allowed for the requested path.');
  }

  tooLarge(): Answer {
    return failure(413, 'validation_error', 'The request body is larger than 40 MB.');
  }
}
