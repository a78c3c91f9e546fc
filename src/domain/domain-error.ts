/** Every code by which a pure function refuses its input. Most are named in tests/reference/CONVENTIONS.md. */
export type DomainErrorCode =
  | 'bad-number'
  | 'bad-box'
  | 'bad-target'
  | 'bad-wall'
  | 'bad-offset'
  | 'bad-weights'
  | 'bad-scale'
  | 'bad-test'
  | 'bad-barriers'
  | 'bad-distance'
  | 'bad-status'
  | 'bad-tie-break'
  | 'bad-drop'
  | 'bad-places'
  | 'bad-csv'
  | 'unknown-module';

/** A refusal by a pure function: one code, and words for whoever reads a log. */
export class DomainError extends Error {
  readonly code: DomainErrorCode;

  constructor(code: DomainErrorCode, message: string = code) {
    super(message);
    this.name = 'DomainError';
    this.code = code;
  }
}
