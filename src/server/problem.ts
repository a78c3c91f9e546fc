import { AppError, ERROR_CODES } from './errors';

export interface Problem {
  type: string;
  title: string;
  status: number;
  detail: string;
  code: string;
  fields?: { path: string; message: string }[];
  [extra: string]: unknown;
}

/** The problem document (RFC 9457 §3.1) of an error. Anything unexpected says nothing of itself. */
export function toProblem(error: unknown): Problem {
  const e =
    error instanceof AppError
      ? error
      : new AppError('unexpected', 'Nothing you typed is lost. Try again in a moment; if it goes on, tell the office.');
  return {
    ...e.extra,
    type: `/problems#${e.code}`,
    title: ERROR_CODES[e.code].title,
    status: e.status,
    detail: e.message,
    code: e.code,
    ...(e.fields.length > 0 ? { fields: e.fields } : {}),
  };
}

/** The answer that carries it. */
export function problemResponse(error: unknown): Response {
  const problem = toProblem(error);
  const headers: Record<string, string> = { 'content-type': 'application/problem+json', 'cache-control': 'no-store' };
  const retry = problem['retryAfter'];
  if (typeof retry === 'number') headers['retry-after'] = String(Math.ceil(retry));
  return new Response(JSON.stringify(problem), { status: problem.status, headers });
}
