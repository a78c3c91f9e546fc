import { appendFileSync, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';

/** A mail as the service took it. Addresses stay as written, `Name <address>` included. */
export interface Mail {
  id: string;
  /** Counts up over the life of the inbox; two mails of one millisecond keep their order by it. */
  seq: number;
  /** ISO 8601, UTC. */
  createdAt: string;
  from: string;
  to: string[];
  cc: string[];
  bcc: string[];
  replyTo: string[];
  subject: string;
  html: string | null;
  text: string | null;
  headers: Record<string, string>;
  tags: { name: string; value: string }[];
  /** Names and sizes only: nobody reads an attachment here, and a few big ones would fill the memory. */
  attachments: { filename: string; contentType: string | null; bytes: number }[];
  scheduledAt: string | null;
  /** Every http(s) address in the mail, in order, each once. */
  links: string[];
  /** The request that brought it, for answering its repetition after a restart. */
  request: { key: string; hash: string; answer: string } | null;
}

export interface InboxOptions {
  /** The oldest mails go when there are more. */
  limit?: number;
  /** A JSON-lines file that outlives the process. Without it, the inbox is gone with the process. */
  file?: string | undefined;
}

/** The bare address of `Name <address>`, lower case. */
export function bareAddress(written: string): string {
  const inBrackets = /<([^<>]*)>\s*$/.exec(written);
  return (inBrackets?.[1] ?? written).trim().toLowerCase();
}

/** The http(s) addresses in a mail's HTML (links) and text, in order, each once. */
export function linksOf(html: string | null, text: string | null): string[] {
  const found = new Set<string>();
  for (const match of (html ?? '').matchAll(/<a\b[^>]*?\bhref\s*=\s*(?:"([^"]*)"|'([^']*)'|([^\s"'>]+))/gi)) {
    const link = decodeEntities(match[1] ?? match[2] ?? match[3] ?? '').trim();
    if (/^https?:\/\//i.test(link)) found.add(link);
  }
  for (const match of (text ?? '').matchAll(TEXT_LINK)) found.add(match[0]);
  return [...found];
}

/** An address in plain text; a full stop or bracket that ends the sentence around it is not part of it. */
export const TEXT_LINK = /https?:\/\/[^\s<>"']*[^\s<>"'.,;:!?)\]}]/gi;

function decodeEntities(text: string): string {
  const named: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: "'" };
  return text.replace(/&(?:#x([0-9a-f]+)|#(\d+)|(\w+));/gi, (whole, hex?: string, decimal?: string, name?: string) => {
    if (hex) return String.fromCodePoint(Number.parseInt(hex, 16));
    if (decimal) return String.fromCodePoint(Number(decimal));
    return named[name ?? ''] ?? whole;
  });
}

/** The captured mails, oldest first, bounded, and on disk if a file was given. */
export class Inbox {
  #mails: Mail[] = [];
  #seq = 0;
  #linesOnDisk = 0;
  #waiting = new Set<() => void>();
  readonly #limit: number;
  readonly #file: string | undefined;

  constructor({ limit = 2000, file }: InboxOptions = {}) {
    this.#limit = limit;
    this.#file = file;
    if (file && existsSync(file)) this.#load(file);
  }

  /** Keeps a mail; it is on disk before this returns. */
  add(mail: Omit<Mail, 'seq'>): Mail {
    const kept: Mail = { ...mail, seq: (this.#seq += 1) };
    this.#mails.push(kept);
    if (this.#mails.length > this.#limit) this.#mails.shift();
    if (this.#file) {
      mkdirSync(dirname(this.#file), { recursive: true });
      appendFileSync(this.#file, `${JSON.stringify(kept)}\n`, { mode: 0o600 });
      this.#linesOnDisk += 1;
      if (this.#linesOnDisk > this.#limit * 2) this.#rewrite(this.#file);
    }
    for (const wake of [...this.#waiting]) wake();
    return kept;
  }

  get(id: string): Mail | undefined {
    return this.#mails.find((mail) => mail.id === id);
  }

  /**
   * Mails to an address (in to, cc or bcc, compared without names and case) kept at or after a moment and behind a sequence
   * number, newest first.
   */
  find({ to, since, after }: { to?: string | undefined; since?: Date | undefined; after?: number | undefined } = {}): Mail[] {
    const wanted = to ? bareAddress(to) : undefined;
    return this.#mails
      .filter((mail) => !wanted || [...mail.to, ...mail.cc, ...mail.bcc].some((written) => bareAddress(written) === wanted))
      .filter((mail) => !since || mail.createdAt >= since.toISOString())
      .filter((mail) => after === undefined || mail.seq > after)
      .reverse();
  }

  /** Resolves when the next mail arrives or the time is over. */
  next(ms: number): Promise<void> {
    return new Promise((resolve) => {
      const done = () => {
        clearTimeout(timer);
        this.#waiting.delete(done);
        resolve();
      };
      const timer = setTimeout(done, ms);
      this.#waiting.add(done);
    });
  }

  /** Everybody who got mail, each once, in alphabetical order. */
  recipients(): string[] {
    return [...new Set(this.#mails.flatMap((mail) => mail.to.map(bareAddress)))].sort();
  }

  get size(): number {
    return this.#mails.length;
  }

  clear(): void {
    this.#mails = [];
    if (this.#file) this.#rewrite(this.#file);
  }

  #load(file: string): void {
    for (const line of readFileSync(file, 'utf8').split('\n')) {
      if (!line) continue;
      this.#linesOnDisk += 1;
      try {
        this.#mails.push(JSON.parse(line) as Mail);
      } catch {
        // The last line of a process that was killed while writing it.
      }
    }
    this.#mails = this.#mails.slice(-this.#limit);
    this.#seq = this.#mails.at(-1)?.seq ?? 0;
    this.#rewrite(file);
  }

  #rewrite(file: string): void {
    const temporary = `${file}.new`;
    writeFileSync(temporary, this.#mails.map((mail) => `${JSON.stringify(mail)}\n`).join(''), { mode: 0o600 });
    renameSync(temporary, file);
    this.#linesOnDisk = this.#mails.length;
  }
}
