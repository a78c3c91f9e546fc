/**
 * The server's entry: a small HTTP server with the page framework's handler in the middle.
 * Around it: headers, health, static files, kept pages, live streams, compression, shutdown.
 */
import compression from 'compression';
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import { fileURLToPath } from 'node:url';
import sirv from 'sirv';
import { JOB_HANDLERS } from './job-handlers';
import { clientAddress } from './client-address';
import { closeDatabase } from './database';
import { serveDirect } from './direct-endpoints';
import { environment } from './environment';
import { securityHeaders } from './headers';
import { readiness } from './health';
import { newId } from './ids';
import { startJobs, stopJobs } from './jobs';
import { startListening, stopListening } from './live';
import { errorForLog, logger } from './logger';
import { captureInto, sendKept } from './page-cache';
import { closeStreams, serveStream } from './streams';

type Next = (error?: unknown) => void;
type Handler = (req: IncomingMessage, res: ServerResponse, next: Next | undefined, locals: object) => Promise<void>;

const env = environment();
const log = logger();
const { handler } = (await import(/* @vite-ignore */ new URL('./server/entry.mjs', import.meta.url).href)) as { handler: Handler };
const files = sirv(fileURLToPath(new URL('./client', import.meta.url)), {
  brotli: true,
  gzip: true,
  etag: true,
  dotfiles: false,
  setHeaders: (res, path) => {
    res.setHeader('cache-control', path.startsWith('/_assets/') ? 'public, max-age=31536000, immutable' : 'public, max-age=3600');
  },
});
const compress = compression({ threshold: 1024 });
const headers = Object.entries(securityHeaders());
let stopping = false;

function isStatic(url: string): boolean {
  return url.startsWith('/_assets/') || /^\/[^/?]+\.[a-z0-9]+(\?|$)/.test(url);
}

async function serve(req: IncomingMessage, res: ServerResponse): Promise<void> {
  const url = req.url ?? '/';
  const readOnly = req.method === 'GET' || req.method === 'HEAD';
  if (readOnly && !stopping && sendKept(req, res)) return;
  for (const [name, value] of headers) res.setHeader(name, value);
  if (stopping) res.setHeader('connection', 'close');
  if (url === '/healthz') return plain(res, 200, 'ok');
  if (url === '/readyz') {
    const state = await readiness(stopping);
    return plain(res, state.ready ? 200 : 503, JSON.stringify(state), 'application/json');
  }
  if (readOnly && isStatic(url)) {
    await new Promise<void>((resolve) => {
      res.on('close', resolve);
      files(req, res, () => void pages(req, res).then(resolve));
    });
    return;
  }
  if (await serveStream(req, res)) return;
  const locals = { requestId: newId(), clientAddress: clientAddress(req.socket.remoteAddress ?? '', header(req, 'x-forwarded-for'), env.TRUSTED_PROXY_HOPS) };
  if (await serveDirect(req, res, locals)) return;
  await pages(req, res, locals);
}

async function pages(req: IncomingMessage, res: ServerResponse, locals = { requestId: newId(), clientAddress: clientAddress(req.socket.remoteAddress ?? '', header(req, 'x-forwarded-for'), env.TRUSTED_PROXY_HOPS) }): Promise<void> {
  const began = performance.now();
  const { requestId } = locals;
  res.on('finish', () => {
    log.debug({ request: requestId, method: req.method, status: res.statusCode, ms: Math.round(performance.now() - began) }, 'answered');
  });
  const raw = { writeHead: res.writeHead.bind(res), end: res.end.bind(res) };
  await new Promise<void>((resolve) => compress(req as never, res as never, () => resolve()));
  if (req.method === 'GET' || req.method === 'HEAD') captureInto(req, res, raw);
  await handler(req, res, undefined, locals);
}

function header(req: IncomingMessage, name: string): string | undefined {
  const value = req.headers[name];
  return Array.isArray(value) ? value.join(',') : value;
}

function plain(res: ServerResponse, status: number, body: string, type = 'text/plain'): void {
  res.writeHead(status, { 'content-type': type, 'cache-control': 'no-store' });
  res.end(body);
}

const server = createServer((req, res) => {
  serve(req, res).catch((error: unknown) => {
    log.error({ error: errorForLog(error) }, 'request failed');
    if (!res.headersSent) plain(res, 500, 'Something went wrong on our side. Try again in a moment.');
    else res.destroy();
  });
});
server.requestTimeout = 60_000;
server.headersTimeout = 15_000;
server.keepAliveTimeout = 65_000;

await startListening();
await startJobs(JOB_HANDLERS);
server.listen(env.PORT, env.HOST, () => {
  const address = server.address();
  log.info({ host: env.HOST, port: typeof address === 'object' ? address?.port : env.PORT }, 'listening');
});
server.on('error', (error) => {
  log.fatal({ error: errorForLog(error) }, `can't listen on ${env.HOST}:${env.PORT}`);
  process.exit(1);
});

/** Take no new work, finish what runs, then go. A second signal goes at once. */
async function shutdown(signal: string): Promise<void> {
  if (stopping) process.exit(1);
  stopping = true;
  log.info({ signal }, 'stopping');
  const limit = setTimeout(() => process.exit(1), 20_000);
  closeStreams();
  const closed = new Promise<void>((resolve) => server.close(() => resolve()));
  server.closeIdleConnections();
  await closed;
  await stopJobs().catch((error: unknown) => log.warn({ error: errorForLog(error) }, 'jobs'));
  await stopListening();
  await closeDatabase();
  clearTimeout(limit);
  log.info('stopped');
  process.exit(0);
}
process.on('SIGTERM', () => void shutdown('SIGTERM'));
process.on('SIGINT', () => void shutdown('SIGINT'));
