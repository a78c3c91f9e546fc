import { defineMiddleware } from 'astro:middleware';
import { newId } from '~/server/ids';
import { AppError } from '~/server/errors';
import { errorForLog, logger } from '~/server/logger';
import { toProblem } from '~/server/problem';
import { securityHeaders } from '~/server/headers';
import { resolveRequest } from '~/server/request-scope';

/** Session → person → membership → scope, then the page; refusals become the product's own pages. */
export const onRequest = defineMiddleware(async (context, next) => {
  const { locals, request, params, url } = context;
  locals.requestId ??= newId();
  locals.clientAddress ??= context.clientAddress;
  locals.refusal ??= null;
  locals.keepBytes = null;
  const isApi = url.pathname.startsWith('/api/');
  let response: Response;
  try {
    const found = await resolveRequest(request.headers.get('cookie'), params['org'], params['tournament']);
    locals.person = found.person;
    locals.org = found.org;
    locals.tournament = found.tournament;
    locals.scope = found.scope;
    response = await next();
    // What the page or endpoint says of the session's cookie stands: whoever just signed in also sent the one that has ended.
    const name = found.cookie?.split('=')[0];
    if (found.cookie && !response.headers.getSetCookie().some((c) => c.startsWith(`${name}=`))) response.headers.append('set-cookie', found.cookie);
  } catch (error) {
    locals.person ??= null;
    locals.org ??= null;
    locals.tournament ??= null;
    locals.scope ??= null;
    if (!(error instanceof AppError)) {
      logger().error({ request: locals.requestId, route: context.routePattern, error: errorForLog(error) }, 'page failed');
    }
    if (error instanceof AppError && error.code === 'signed-out' && !isApi) {
      const to = locals.person ? '/check-mail' : `/sign-in?next=${encodeURIComponent(url.pathname + url.search)}`;
      response = new Response(null, { status: 302, headers: { location: to, 'cache-control': 'no-store' } });
    } else {
      locals.refusal = toProblem(error);
      if (error instanceof AppError && error.code === 'not-allowed') {
        logger().warn({ request: locals.requestId, route: context.routePattern, person: locals.person?.personId }, 'refused');
      }
      const status = locals.refusal.status;
      const page = status === 404 ? '/404' : status >= 500 ? '/500' : '/refused';
      const body = await next(page);
      response = new Response(body.body, { status, headers: body.headers });
      response.headers.set('cache-control', 'no-store');
    }
  }
  if (import.meta.env.DEV) {
    for (const [name, value] of Object.entries(securityHeaders())) {
      if (name !== 'content-security-policy') response.headers.set(name, value);
    }
  }
  const keep = locals.keepBytes as App.Locals['keepBytes'];
  if (keep && response.status === 200) {
    const { topics, until } = keep;
    response.headers.set('x-keep-bytes', JSON.stringify({ topics, until: until?.toISOString() ?? null }));
  } else if (!response.headers.has('cache-control') && (response.headers.get('content-type') ?? '').startsWith('text/html')) {
    response.headers.set('cache-control', 'private, no-cache');
  }
  return response;
});
