import type { APIContext, APIRoute } from 'astro';
import type { ZodType, z } from 'zod';
import { admit, type Access } from './access';
import { parseBody, readBody } from './body';
import { environment } from './environment';
import { AppError } from './errors';
import { errorForLog, logger } from './logger';
import { problemResponse, toProblem } from './problem';
import type { OrgInfo, SignedIn, TournamentInfo } from './request-scope';
import type { Scope } from './scope';

/** What a handler is given. A member that the address or the access rule doesn't supply throws when read. */
export interface EndpointContext<Input> {
  readonly input: Input;
  readonly params: Record<string, string>;
  readonly request: Request;
  readonly url: URL;
  readonly clientAddress: string;
  readonly requestId: string;
  /** Null on public endpoints when nobody is signed in. */
  readonly visitor: SignedIn | null;
  readonly person: SignedIn;
  readonly org: OrgInfo;
  readonly tournament: TournamentInfo;
  readonly scope: Scope;
  /** Headers to send along (a session cookie). */
  readonly headers: Headers;
}

interface Definition<Schema extends ZodType> {
  access: Access;
  /** Body of an unsafe method, or the query of GET. Unknown keys are refused: use `z.strictObject`. */
  input?: Schema;
  /** Bytes of body accepted; 64 kB unless set. */
  limit?: number;
  handler: (context: EndpointContext<z.infer<Schema>>) => Promise<unknown> | unknown;
}

/** An API route that knows its access rule (read by the route-list test). */
export type Endpoint = APIRoute & { readonly access: Access };

/**
 * The only way to make an API route. In order: Origin (every unsafe method), access, body limit,
 * parse with unknown keys refused, handler, errors as problem details (RFC 9457), `no-store`.
 *
 * A handler returns a plain object (sent as JSON; `goTo` names a path to go to), or a Response.
 * A form posted without script (urlencoded) is answered by a redirect or a plain page of words.
 */
export function endpoint<Schema extends ZodType = ZodType<Record<string, never>>>(definition: Definition<Schema>): Endpoint {
  const route: APIRoute = async (context) => {
    const { request, locals } = context;
    const isForm = (request.headers.get('content-type') ?? '').startsWith('application/x-www-form-urlencoded');
    try {
      const unsafe = request.method !== 'GET' && request.method !== 'HEAD';
      if (unsafe && definition.access !== 'signed') checkOrigin(request);
      admit(definition.access, locals, { org: 'org' in context.params, tournament: 'tournament' in context.params });
      let input: unknown = {};
      if (unsafe) {
        input = parseBody(await readBody(request, definition.limit ?? 65_536), request.headers.get('content-type') ?? 'application/json');
      } else if (definition.input) {
        input = Object.fromEntries(context.url.searchParams);
      }
      const parsed = definition.input ? parseInput(definition.input, input) : ({} as z.infer<Schema>);
      const headers = new Headers();
      const result = await definition.handler(makeContext(context, parsed, headers));
      const response = result instanceof Response ? result : answer(result ?? {}, isForm);
      headers.forEach((value, name) => response.headers.append(name, value));
      if (!response.headers.has('cache-control')) response.headers.set('cache-control', 'no-store');
      return response;
    } catch (error) {
      if (!(error instanceof AppError)) {
        logger().error({ request: locals.requestId, route: context.routePattern, error: errorForLog(error) }, 'unexpected');
      } else if (error.code === 'not-allowed' || error.code === 'signed-out' || error.code === 'bad-origin' || error.code === 'too-many') {
        logger().warn({ request: locals.requestId, route: context.routePattern, code: error.code, person: locals.person?.personId }, 'refused');
      }
      return isForm ? wordsPage(error) : problemResponse(error);
    }
  };
  return Object.assign(route, { access: definition.access });
}

function checkOrigin(request: Request): void {
  const origin = request.headers.get('origin');
  // Browsers send Origin with every unsafe request; whatever doesn't is not a browser's form and carries no ambient cookie of ours.
  const site = request.headers.get('sec-fetch-site');
  if (origin === null ? site !== null && site !== 'same-origin' && site !== 'none' : origin !== environment().PUBLIC_URL) {
    throw new AppError('bad-origin', 'This was sent from a page of another site, so nothing was changed.');
  }
  if (origin === null && request.headers.has('cookie') && site === null) {
    throw new AppError('bad-origin', 'This request does not say where it comes from, so nothing was changed.');
  }
}

/**
 * Parse with the schema.
 *
 * @throws AppError bad-input with one message a field
 */
export function parseInput<Schema extends ZodType>(schema: Schema, input: unknown): z.infer<Schema> {
  const parsed = schema.safeParse(input);
  if (parsed.success) return parsed.data;
  const fields = new Map<string, string>();
  for (const issue of parsed.error.issues) {
    const paths = issue.code === 'unrecognized_keys' ? issue.keys.map((k) => [...issue.path, k]) : [issue.path];
    for (const p of paths) {
      const path = p.map(String).join('.');
      if (!fields.has(path)) fields.set(path, issue.code === 'unrecognized_keys' ? 'This is not expected here.' : issue.message);
    }
  }
  const list = [...fields].map(([path, message]) => ({ path, message }));
  throw new AppError('bad-input', list.length === 1 ? list[0]!.message : `${list.length} things need another look.`, { fields: list });
}

function makeContext<Input>(context: APIContext, input: Input, headers: Headers): EndpointContext<Input> {
  const { locals } = context;
  const need = <T>(value: T | null, what: string): T => {
    if (value === null) throw new Error(`no ${what} on this route`);
    return value;
  };
  return {
    input,
    params: context.params as Record<string, string>,
    request: context.request,
    url: context.url,
    clientAddress: locals.clientAddress,
    requestId: locals.requestId,
    visitor: locals.person,
    headers,
    get person() {
      return need(locals.person, 'person');
    },
    get org() {
      return need(locals.org, 'organization');
    },
    get tournament() {
      return need(locals.tournament, 'tournament');
    },
    get scope() {
      return need(locals.scope, 'scope');
    },
  };
}

/** True for a path on this site: used wherever a destination comes from a request. */
export function isLocalPath(path: unknown): path is string {
  return typeof path === 'string' && /^\/(?![/\\])[^\\\s]*$/.test(path) && path.length <= 500;
}

function answer(result: unknown, isForm: boolean): Response {
  const goTo = (result as { goTo?: unknown }).goTo;
  if (isForm) {
    return new Response(null, { status: 303, headers: { location: isLocalPath(goTo) ? goTo : '/' } });
  }
  return new Response(JSON.stringify(result), { status: 200, headers: { 'content-type': 'application/json' } });
}

function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}

/** For a form posted without script: the words, and the way back to what was typed. */
function wordsPage(error: unknown): Response {
  const problem = toProblem(error);
  const items = (problem.fields ?? []).map((f) => `<li>${escapeHtml(f.message)}</li>`).join('');
  const html = `<!doctype html><html lang="en"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escapeHtml(problem.title)}</title>
<main><h1>${escapeHtml(problem.title)}</h1><p>${escapeHtml(problem.detail)}</p><ul>${items}</ul><p>Go back with your browser: what you typed is still there.</p></main></html>`;
  return new Response(html, { status: problem.status, headers: { 'content-type': 'text/html; charset=utf-8', 'cache-control': 'no-store' } });
}
