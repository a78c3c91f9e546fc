/**
 * Every way in which a request can be refused. `status` is HTTP's, `title` is for people.
 * Mapped once here; endpoints turn it into problem details (RFC 9457), pages into words.
 */
export const ERROR_CODES = {
  'bad-input': { status: 422, title: 'There is a problem' },
  'bad-request': { status: 400, title: 'That request could not be read' },
  'bad-origin': { status: 403, title: 'That request came from another site' },
  'signed-out': { status: 401, title: 'Sign in first' },
  'not-allowed': { status: 403, title: 'That is not yours to do' },
  'not-found': { status: 404, title: 'There is nothing here' },
  'method-not-allowed': { status: 405, title: 'That can’t be done here' },
  conflict: { status: 409, title: 'That has changed meanwhile' },
  'out-of-order': { status: 409, title: 'Not yet' },
  stale: { status: 409, title: 'Somebody else kept another value' },
  'key-reused': { status: 422, title: 'That key was used for something else' },
  'too-large': { status: 413, title: 'That is too large' },
  'too-many': { status: 429, title: 'Too many tries' },
  'mail-down': { status: 503, title: 'Mail can’t be sent just now' },
  suspended: { status: 403, title: 'Suspended' },
  unexpected: { status: 500, title: 'Something went wrong on our side' },
} as const satisfies Record<string, { status: number; title: string }>;

export type ErrorCode = keyof typeof ERROR_CODES;

/** One message beside one field; `path` is the field's name with dots for nesting. */
export interface FieldMessage {
  path: string;
  message: string;
}

/** A refusal with a code, in words a volunteer understands. Never carries another tenant's data. */
export class AppError extends Error {
  readonly code: ErrorCode;
  readonly fields: FieldMessage[];
  /** Extra members of the problem document (allow-listed by whoever throws). */
  readonly extra: Record<string, unknown>;

  constructor(code: ErrorCode, message: string, options: { fields?: FieldMessage[]; extra?: Record<string, unknown> } = {}) {
    super(message);
    this.name = 'AppError';
    this.code = code;
    this.fields = options.fields ?? [];
    this.extra = options.extra ?? {};
  }

  get status(): number {
    return ERROR_CODES[this.code].status;
  }
}

/** Refuse one field. */
export function fieldError(path: string, message: string): AppError {
  return new AppError('bad-input', message, { fields: [{ path, message }] });
}

/** The same answer for what is missing and for what is another organization's. */
export function notFound(what = 'There is nothing here, or it is not yours to see.'): AppError {
  return new AppError('not-found', what);
}

/** PostgreSQL's code for a broken unique key, wherever in the chain of causes it stands. */
export function uniqueViolation(error: unknown): string | null {
  for (let e: unknown = error; e instanceof Error; e = e.cause) {
    const { code, constraint } = e as { code?: unknown; constraint?: unknown };
    if (code === '23505') return typeof constraint === 'string' ? constraint : 'unknown';
  }
  return null;
}
