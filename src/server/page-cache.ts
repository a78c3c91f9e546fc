/**
 * Public pages whose bytes are the same for everybody, kept ready to send: body in three encodings
 * and an entity tag (RFC 9110 §13.1). A page says itself that it may be kept (`locals.keepBytes`);
 * an announcement of one of its topics, or its moment, ends that. Private answers never come here.
 */
import { createHash } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { brotliCompressSync, constants, gzipSync } from 'node:zlib';
import { securityHeaders } from './headers';
import { EVERYTHING, hear } from './live';
import { singleton } from './singleton';

interface Kept {
  etag: string;
  /** Complete headers, ready to write: names and values in turn. */
  head304: string[];
  heads: { br: string[]; gzip: string[]; identity: string[] };
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

const SECURITY = Object.entries(securityHeaders()).flat();

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
    res.writeHead(304, kept.head304);
    res.end();
    return true;
  }
  const accepts = String(req.headers['accept-encoding'] ?? '');
  const encoding = /\bbr\b/.test(accepts) ? 'br' : /\bgzip\b/.test(accepts) ? 'gzip' : 'identity';
  const body = kept.bodies[encoding];
  res.writeHead(200, kept.heads[encoding]);
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
    const etag = `"${createHash('sha256').update(identity).digest('base64url').slice(0, 22)}"`;
    const type = String(headers['content-type'] ?? 'text/html; charset=utf-8');
    const bodies = {
      identity,
      gzip: gzipSync(identity, { level: 6 }),
      br: brotliCompressSync(identity, { params: { [constants.BROTLI_PARAM_QUALITY]: 5 } }),
    };
    const common = [
      ...SECURITY,
      ...Object.entries(headers).flatMap(([n, v]) => (n === 'content-disposition' || n === 'link' ? [n, String(v)] : [])),
      'etag', etag, 'cache-control', 'public, no-cache', 'vary', 'accept-encoding',
    ];
    const head = (encoding: keyof typeof bodies) => [
      ...common, 'content-type', type, 'content-length', String(bodies[encoding].byteLength), ...(encoding === 'identity' ? [] : ['content-encoding', encoding]),
    ];
    const kept: Kept = {
      etag,
      bodies,
      head304: common,
      heads: { br: head('br'), gzip: head('gzip'), identity: head('identity') },
      topics: asked.topics,
      until: Math.min(Date.now() + LONGEST_MS, asked.until ? Date.parse(asked.until) : Infinity),
    };
    if (cache.entries.size >= MOST_ENTRIES) cache.entries.delete(cache.entries.keys().next().value!);
    cache.entries.set(req.url!, kept);
    res.writeHead = raw.writeHead;
    res.write = write as typeof res.write;
    res.end = raw.end;
    // The kept answer brings all its headers itself.
    for (const name of res.getHeaderNames()) res.removeHeader(name);
    sendKept(req, res);
    // Something changed while the page was being made: it is sent, not kept.
    if (cache.generation !== generation) cache.entries.delete(req.url!);
    return res;
  }) as typeof res.end;
}
