import { createHash, createHmac, timingSafeEqual } from 'node:crypto';
import { environment } from './environment';

/** Signed in without a sign of life for this long: signed out. */
export const IDLE_DAYS = 14;
/** Signed out after this long, however busy. */
export const ABSOLUTE_DAYS = 60;

/** SHA-256, hexadecimal: how session ids and one-time codes stand in the database. */
export function hashToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}

/**
 * The secret part of a one-time link. Derived from the row's id and the service's secret, so that
 * a job can be tried again and send the same mail without the code ever standing in the queue.
 * `device` is the browser's half: it shows that a link is opened where it was asked for.
 */
export function deriveToken(purpose: 'verify' | 'reset' | 'change' | 'device' | 'invitation', id: string): string {
  return createHmac('sha256', environment().APP_SECRET).update(`${purpose}:${id}`).digest('base64url');
}

/** The key under which tries are counted: says nothing of the address or person it stands for. */
export function throttleKey(limit: string, subject: string): string {
  return createHmac('sha256', environment().APP_SECRET).update(`throttle:${limit}:${subject}`).digest('base64url');
}

/** Compare two texts in time that does not depend on where they differ. */
export function sameText(a: string, b: string): boolean {
  const x = createHash('sha256').update(a).digest();
  const y = createHash('sha256').update(b).digest();
  return timingSafeEqual(x, y);
}
