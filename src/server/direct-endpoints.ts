/**
 * Endpoints answered without the page framework around them, because they are the ones that every device of a tournament calls at
 * once: the framework costs about as much again as all that keeping a reading takes. They are the very route files of the page
 * framework, made with `endpoint()`, so origin, access, limits, parsing and errors are the same either way.
 */
import type { APIContext } from 'astro';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { POST as keepReading } from '~/pages/api/[org]/[tournament]/events/[event]/readings/index';
import type { Endpoint } from './endpoint';
import { environment } from './environment';
import { problemResponse } from './problem';
import { resolveRequest } from './request-scope';

interface Direct {
  method: string;
  pattern: RegExp;
  names: readonly string[];
  routePattern: string;
  route: Endpoint;
}

const DIRECT: readonly Direct[] = [
  {
    method: 'POST',
    pattern: /^\/api\/([a-z0-9-]+)\/([a-z0-9-]+)\/events\/([a-z0-9-]+)\/readings$/,
    names: ['org', 'tournament', 'event'],
    routePattern: '/api/[org]/[tournament]/events/[event]/readings',
    route: keepReading,
  },
];

/** More than any of these endpoints takes: what is longer is cut here and refused there. */
const MOST_BYTES = 65_537;

async function bodyOf(req: IncomingMessage): Promise<Buffer> {
  const chunks: Buffer[] = [];
  let size = 0;
  for await (const chunk of req as AsyncIterable<Buffer>) {
    if (size < MOST_BYTES) chunks.push(chunk);
    size += chunk.byteLength;
  }
  return Buffer.concat(chunks).subarray(0, MOST_BYTES);
}

/** Answer one of these endpoints; false when the address is none. */
export async function serveDirect(req: IncomingMessage, res: ServerResponse, locals: { requestId: string; clientAddress: string }): Promise<boolean> {
  const found = DIRECT.find((d) => d.method === req.method && d.pattern.test(req.url ?? ''));
  if (!found) return false;
  const values = found.pattern.exec(req.url!)!.slice(1);
  const params = Object.fromEntries(found.names.map((name, i) => [name, values[i]]));
  const url = new URL(req.url!, environment().PUBLIC_URL);
  let response: Response;
  let cookie: string | null = null;
  try {
    const body = await bodyOf(req);
    const headers = new Headers();
    for (const [name, value] of Object.entries(req.headers)) if (typeof value === 'string') headers.set(name, value);
    const visitor = await resolveRequest(req.headers.cookie, params['org'], params['tournament']);
    cookie = visitor.cookie;
    const context = {
      request: new Request(url, { method: found.method, headers, body: new Uint8Array(body) }),
      params,
      url,
      routePattern: found.routePattern,
      locals: { ...locals, ...visitor, refusal: null, keepBytes: null },
    };
    response = await found.route(context as unknown as APIContext);
  } catch (error) {
    response = problemResponse(error);
  }
  const answer = Buffer.from(await response.arrayBuffer());
  const out: Record<string, string> = { 'content-length': String(answer.byteLength) };
  response.headers.forEach((value, name) => {
    out[name] = value;
  });
  if (cookie) out['set-cookie'] = cookie;
  res.writeHead(response.status, out);
  res.end(answer);
  return true;
}
