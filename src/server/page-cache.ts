/**
 * Public pages whose bytes are the same for everybody, kept ready to send: body in three encodings
 * and an entity tag (RFC 9110 §13.1). A page says itself that it may be kept (`locals.keepBytes`);
 * an announcement of one of its topics, or its moment, ends that. Private answers never come here.
 */
import { createHash } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { brotliCompressSync, constants, gzipSync } from 'node:zlib';
import { EVERYTHING, hear } from './live';
import { singleton } from './singleton';

interface Kept {
  etag: string;
  type: string;
  extra: Record<string, string>;
  bodies: { br: Buffer; gzip: Buffer; identity: Buffer };
  topics: string[];
  /** Milliseconds since the epoch. */
  until: number;
}

/** Even if an announcement is lost, nothing older than this is sent. */
const LONGEST_MS = 30_000;
const MOST_ENTRIES = 2_000;

const cache = singleton('page-cache', () => {
  const entries = new Map<string, Kept>();
  const state = { entries, generation: 0 };
  hear((topic) => {
    state.generation++;
    if (topic === EVERYTHING) entries.clear();
    else for (const [key, kept] of entries) if (kept.topics.includes(topic)) entries.delete(key);
  });
  return state;
});

/** Forget everything (tests). */
export function emptyPageCache(): void {
  cache.entries.clear();
}

/** Send the kept bytes if there are any for this request. */
export function sendKept(req: IncomingMessage, res: ServerResponse): boolean {
  const kept = cache.entries.get(req.url!);
  if (!kept) return false;
  if (kept.until <= Date.now()) {
    cache.entries.delete(req.url!);
    return false;
  }
  const match = req.headers['if-none-match'];
  if (match !== undefined && (match === kept.etag || match === '*' || match.split(',').some((t) => t.trim().replace(/^W\//, '') === kept.etag))) {
    res.writeHead(304, { ...kept.extra, etag: kept.etag, 'cache-control': 'public, no-cache', vary: 'accept-encoding' });
    res.end();
    return true;
  }
  const accepts = String(req.headers['accept-encoding'] ?? '');
  const encoding = /\bbr\b/.test(accepts) ? 'br' : /\bgzip\b/.test(accepts) ? 'gzip' : 'identity';
  const body = kept.bodies[encoding];
  res.writeHead(200, {
    ...kept.extra,
    'content-type': kept.type,
    'content-length': body.byteLength,
    ...(encoding === 'identity' ? {} : { 'content-encoding': encoding }),
    etag: kept.etag,
    'cache-control': 'public, no-cache',
    vary: 'accept-encoding',
  });
  res.end(req.method === 'HEAD' ? undefined : body);
  return true;
}

/**
 * Let the handler answer, and keep the answer if it asks for that. The first visitor gets exactly
 * the bytes that the next ones get.
 *
 * @param raw the response's own methods, from before compression was put around them
 */
export function captureInto(req: IncomingMessage, res: ServerResponse, raw: Pick<ServerResponse, 'writeHead' | 'end'>): void {
  const generation = cache.generation;
  const chunks: Buffer[] = [];
  const writeHead = res.writeHead.bind(res);
  const write = res.write.bind(res);
  const end = res.end.bind(res);
  let keep: { topics: string[]; until: string | null } | null = null;
  let headers: Record<string, string | string[]> = {};
  res.writeHead = ((status: number, second?: unknown, third?: unknown) => {
    const given = (typeof second === 'object' ? second : third) as Record<string, string | string[]> | undefined;
    const header = given?.['x-keep-bytes'];
    if (given) delete given['x-keep-bytes'];
    if (status === 200 && typeof header === 'string' && req.method === 'GET') {
      keep = JSON.parse(header) as typeof keep;
      headers = given ?? {};
      return res;
    }
    return writeHead(status, given as never);
  }) as typeof res.writeHead;
  res.write = ((chunk: never, ...rest: never[]) => {
    if (!keep) return write(chunk, ...rest);
    chunks.push(Buffer.from(chunk));
    return true;
  }) as typeof res.write;
  res.end = ((chunk?: never, ...rest: never[]) => {
    if (!keep) return end(chunk, ...rest);
    if (chunk && typeof chunk !== 'function') chunks.push(Buffer.from(chunk));
    const identity = Buffer.concat(chunks);
    const asked = keep;
    keep = null;
    const kept: Kept = {
      etag: `"${createHash('sha256').update(identity).digest('base64url').slice(0, 22)}"`,
      type: String(headers['content-type'] ?? 'text/html; charset=utf-8'),
      extra: Object.fromEntries(
        Object.entries(headers).filter(([n]) => n === 'content-disposition' || n === 'link').map(([n, v]) => [n, String(v)]),
      ),
      bodies: {
        identity,
        gzip: gzipSync(identity, { level: 6 }),
        br: brotliCompressSync(identity, { params: { [constants.BROTLI_PARAM_QUALITY]: 5 } }),
      },
      topics: asked.topics,
      until: Math.min(Date.now() + LONGEST_MS, asked.until ? Date.parse(asked.until) : Infinity),
    };
    if (cache.entries.size >= MOST_ENTRIES) cache.entries.delete(cache.entries.keys().next().value!);
    cache.entries.set(req.url!, kept);
    res.writeHead = raw.writeHead;
    res.write = write as typeof res.write;
    res.end = raw.end;
    sendKept(req, res);
    // Something changed while the page was being made: it is sent, not kept.
    if (cache.generation !== generation) cache.entries.delete(req.url!);
    return res;
  }) as typeof res.end;
}
