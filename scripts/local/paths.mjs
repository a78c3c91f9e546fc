/** Where things are. Everything a start makes lives in `.local`, so that taking that folder away is a full reset. */
import { createHash } from 'node:crypto';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The checkout's folder, absolute. */
export const ROOT = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

export const LOCAL = join(ROOT, '.local');
export const LOGS = join(LOCAL, 'logs');
export const STATE_FILE = join(LOCAL, 'state.json');
export const LOCK_FILE = join(LOCAL, 'start.lock');

/** Names this checkout where a folder or an address outside it has to be unique. */
export const CHECKOUT_HASH = createHash('sha256').update(ROOT).digest('hex').slice(0, 12);

/** A path inside the checkout as a person would type it from there; other paths stay as they are. */
export function shown(path) {
  return path.startsWith(`${ROOT}/`) ? path.slice(ROOT.length + 1) : path;
}
