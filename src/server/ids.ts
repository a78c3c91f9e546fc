import { v7 } from 'uuid';

/** A new UUIDv7 (RFC 9562): sorts by the moment it was made. */
export function newId(): string {
  return v7();
}

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/;

/** True when the text is a UUID in lower case, so that it can be given to the database as one. */
export function isId(text: unknown): text is string {
  return typeof text === 'string' && UUID.test(text);
}
