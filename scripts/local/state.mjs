/**
 * What a start must still know at the next one: secrets, the cluster's port, the processes it began, what is already built.
 * Written whole and renamed into place, so that a kill in the middle leaves the old state and never half of a new one.
 */
import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { LOCAL, STATE_FILE } from './paths.mjs';

/** The state as it stands on disk; an empty one when the file is missing or unreadable. */
export function readState() {
  try {
    const state = JSON.parse(readFileSync(STATE_FILE, 'utf8'));
    return state && typeof state === 'object' ? state : {};
  } catch {
    return {};
  }
}

/** Reads, lets `change` alter the object in place, writes, and returns it. Readable by its owner only: it holds secrets. */
export function updateState(change) {
  const state = readState();
  change(state);
  mkdirSync(LOCAL, { recursive: true });
  const temporary = `${STATE_FILE}.${process.pid}`;
  writeFileSync(temporary, `${JSON.stringify(state, null, 2)}\n`, { mode: 0o600 });
  renameSync(temporary, STATE_FILE);
  return state;
}

/** 32 random bytes, base64url: 43 characters that need no escaping in an address or in SQL. */
export function randomSecret() {
  return randomBytes(32).toString('base64url');
}

/** The secrets of this checkout, made at the first call: `{ownerPassword, appPassword, appSecret}`. */
export function secrets() {
  const wanted = ['ownerPassword', 'appPassword', 'appSecret'];
  const known = readState().secrets;
  if (known && wanted.every((key) => typeof known[key] === 'string')) return known;
  return updateState((state) => {
    state.secrets = Object.fromEntries(wanted.map((key) => [key, state.secrets?.[key] ?? randomSecret()]));
  }).secrets;
}
