/** A verification link works for this long, in hours. */
export const VERIFY_HOURS = 24;
/** A link to choose a new password works for this long, in minutes. */
export const RESET_MINUTES = 60;
/** A sign-up that nobody confirmed is forgotten after this many days. */
export const UNCONFIRMED_DAYS = 30;

export const PASSWORD_LEAST = 12;
export const PASSWORD_MOST = 256;

/**
 * How often something may be tried: `most` tries in `minutes`, per key. Limits per client address
 * leave room for a school whose teachers all come from one.
 */
export const LIMITS = {
  'sign-in:account': { most: 10, minutes: 15 },
  'sign-in:address': { most: 60, minutes: 15 },
  'mail:account': { most: 5, minutes: 60 },
  'mail:address': { most: 40, minutes: 60 },
  'code:address': { most: 60, minutes: 15 },
  'code:password': { most: 10, minutes: 60 },
  'password:person': { most: 10, minutes: 15 },
  'organization:person': { most: 20, minutes: 1440 },
  'invitation:organization': { most: 400, minutes: 60 },
} as const satisfies Record<string, { most: number; minutes: number }>;
export type LimitName = keyof typeof LIMITS;
