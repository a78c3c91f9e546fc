import { z } from 'zod';
import { PASSWORD_LEAST, PASSWORD_MOST } from './constants';

const email = z
  .string('Write your e-mail address.')
  .trim()
  .max(254, 'Keep the address within 254 characters.')
  .regex(/^[^\s@<>"(),;:\\[\]\u0000-\u001f]+@[^\s@<>"(),;:\\[\]\u0000-\u001f]+\.[^\s@<>"(),;:\\[\].\u0000-\u001f]+$/, 'Write an e-mail address, such as name@example.org.');

const name = z
  .string('Write your name.')
  .trim()
  .min(1, 'Write your name.')
  .max(80, 'Keep the name within 80 characters.')
  .regex(/^[^\u0000-\u001f\u007f]*$/, 'This holds a character that can’t be kept. Type it again.');

/** A password to be kept from now on. */
const newPassword = z
  .string('Choose a password.')
  .refine((p) => [...p].length >= PASSWORD_LEAST, `Use at least ${PASSWORD_LEAST} characters: a few words make a good password.`)
  .refine((p) => [...p].length <= PASSWORD_MOST, `Use at most ${PASSWORD_MOST} characters.`);

/** A password to be compared. */
const presentPassword = z.string('Write your password.').min(1, 'Write your password.').max(1024, 'That is not your password.');

/** Where to go afterwards; anything that is no path of this site is left out. */
const next = z
  .string()
  .max(500)
  .optional()
  .transform((path) => path ?? '');

export const signUpInput = z.strictObject({ name, email, password: newPassword, next });
export type SignUp = z.infer<typeof signUpInput>;

/** Signing out on the way to signing in as somebody else. */
export const signOutInput = z.strictObject({ next });

export const signInInput = z.strictObject({ email, password: presentPassword, next });
export type SignIn = z.infer<typeof signInInput>;

/** An address and nothing else: to be sent a mail again, or to choose a new password. */
export const addressInput = z.strictObject({ email });

/** The password is asked for only where the link is opened on another device. */
export const verifyInput = z.strictObject({ password: presentPassword.optional() });

/** The address stands in the form for password managers; the link says whose password it is. */
export const resetInput = z.strictObject({ password: newPassword, username: z.string().max(254).optional() });

export const nameInput = z.strictObject({ name });

export const changePasswordInput = z.strictObject({ present: presentPassword, password: newPassword });
export type ChangePassword = z.infer<typeof changePasswordInput>;

export const changeAddressInput = z.strictObject({ email, present: presentPassword });
export type ChangeAddress = z.infer<typeof changeAddressInput>;
