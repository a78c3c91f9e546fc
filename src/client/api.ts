/** One message beside one field; `path` is the field's name with dots for nesting. */
export interface FieldProblem {
  path: string;
  message: string;
}

/** A refusal as the server words it (RFC 9457), or code 'offline' when it could not be reached. */
export class ApiProblem extends Error {
  readonly status: number;
  readonly code: string;
  readonly title: string;
  readonly detail: string;
  readonly fields: FieldProblem[];
  /** The whole document: some refusals carry more, such as both values of a disagreement. */
  readonly extra: Record<string, unknown>;

  constructor(problem: {
    status: number;
    code: string;
    title: string;
    detail: string;
    fields?: FieldProblem[];
    extra?: Record<string, unknown>;
  }) {
    super(problem.detail || problem.title);
    this.name = 'ApiProblem';
    this.status = problem.status;
    this.code = problem.code;
    this.title = problem.title;
    this.detail = problem.detail;
    this.fields = problem.fields ?? [];
    this.extra = problem.extra ?? {};
  }
}

const text = (value: unknown, otherwise: string): string => (typeof value === 'string' && value !== '' ? value : otherwise);

function problemFrom(status: number, body: unknown): ApiProblem {
  const document = (typeof body === 'object' && body !== null ? body : {}) as Record<string, unknown>;
  const fields = Array.isArray(document['fields']) ? document['fields'] : [];
  return new ApiProblem({
    status,
    code: text(document['code'], 'unexpected'),
    title: text(document['title'], 'Something went wrong on our side'),
    detail: text(document['detail'], 'Nothing you typed is lost. Try again in a moment.'),
    fields: fields.filter(
      (field): field is FieldProblem =>
        typeof field === 'object' && field !== null && typeof field.path === 'string' && typeof field.message === 'string',
    ),
    extra: document,
  });
}

/**
 * Calls an endpoint of this application with JSON both ways.
 * Resolves to the answer's body (undefined for an empty one); throws `ApiProblem` for every refusal and for a
 * network that is not there (code 'offline', status 0). An aborted call throws the signal's own reason.
 */
export async function callApi<T>(
  method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE',
  path: string,
  body?: unknown,
  options: { signal?: AbortSignal | undefined; headers?: Record<string, string> | undefined } = {},
): Promise<T> {
  let response: Response;
  let answer: string;
  try {
    response = await fetch(path, {
      method,
      credentials: 'same-origin',
      headers: {
        accept: 'application/json, application/problem+json',
        ...(body === undefined ? {} : { 'content-type': 'application/json' }),
        ...options.headers,
      },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
      ...(options.signal ? { signal: options.signal } : {}),
    });
    answer = await response.text();
  } catch (error) {
    if (options.signal?.aborted) throw error;
    throw new ApiProblem({
      status: 0,
      code: 'offline',
      title: 'No network',
      detail: 'Fairlead can’t be reached: the network is away. What you typed is still here.',
    });
  }
  let json: unknown;
  try {
    json = answer === '' ? undefined : JSON.parse(answer);
  } catch {
    throw problemFrom(response.ok ? 502 : response.status, null);
  }
  if (!response.ok) throw problemFrom(response.status, json);
  return json as T;
}

/** The messages by field, for putting beside them. Messages of a path that occurs twice are joined. */
export function fieldMessages(problem: Pick<ApiProblem, 'fields'>): Record<string, string> {
  const messages: Record<string, string> = {};
  for (const { path, message } of problem.fields) {
    messages[path] = messages[path] === undefined ? message : `${messages[path]} ${message}`;
  }
  return messages;
}
