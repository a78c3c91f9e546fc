/**
 * Live streams (text/event-stream), served outside the page framework's Response because that costs
 * three times the memory. Each declares its access like a page; the route-list test reads STREAMS.
 */
import type { IncomingMessage, ServerResponse } from 'node:http';
import { admit, STAFF, type Access } from './access';
import { AppError } from './errors';
import { EVERYTHING, hear, tournamentTopic } from './live';
import { toProblem } from './problem';
import { resolveRequest } from './request-scope';
import { singleton } from './singleton';

export interface Stream {
  /** As a page's route pattern would be. */
  route: string;
  access: Access;
}

/** 'Something changed in this tournament': whoever hears it asks again under their own rights. */
export const STREAMS: Stream[] = [{ route: '/api/[org]/[tournament]/live', access: STAFF }];

const PATH = /^\/api\/([a-z0-9-]+)\/([a-z0-9-]+)\/live$/;
/** A person's rights are asked again this often while a stream is open. */
const AGAIN_MS = 60_000;

interface Open {
  res: ServerResponse;
  topic: string;
}

const open = singleton('streams', () => {
  const streams = new Set<Open>();
  hear((topic) => {
    for (const s of streams) if (topic === EVERYTHING || s.topic === topic) s.res.write('data: changed\n\n');
  });
  return streams;
});

/** Answer a stream's request; false when the address is none. */
export async function serveStream(req: IncomingMessage, res: ServerResponse): Promise<boolean> {
  const match = PATH.exec((req.url ?? '').split('?')[0]!);
  if (!match || req.method !== 'GET') return false;
  const [, org, tournament] = match;
  const check = async () => {
    const visitor = await resolveRequest(req.headers.cookie, org, tournament);
    admit(STREAMS[0]!.access, visitor, { org: true, tournament: true });
    return visitor;
  };
  let topic: string;
  try {
    const visitor = await check();
    topic = tournamentTopic(visitor.org!.id, visitor.tournament!.id);
  } catch (error) {
    const problem = toProblem(error instanceof AppError ? error : new AppError('unexpected', 'Try again.'));
    res.writeHead(problem.status, { 'content-type': 'application/problem+json', 'cache-control': 'no-store' });
    res.end(JSON.stringify(problem));
    return true;
  }
  res.writeHead(200, { 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' });
  res.write('retry: 2000\ndata: open\n\n');
  const entry: Open = { res, topic };
  open.add(entry);
  const again = setInterval(() => {
    // A comment keeps proxies from closing; rights that have gone end the stream.
    check().then(
      () => res.write(': still here\n\n'),
      () => res.end(),
    );
  }, AGAIN_MS);
  res.on('close', () => {
    clearInterval(again);
    open.delete(entry);
  });
  return true;
}

/** End every stream; browsers come back by themselves. */
export function closeStreams(): void {
  for (const s of open) s.res.end();
}
