import { verifyPassword } from '~/server/authentication';
import { withPerson } from '~/server/database';
import { AppError } from '~/server/errors';
import { enqueue } from '~/server/jobs';
import { countTry, forgiveTry, getPersonByEmail, verifyCodeFor } from '../queries';
import type { SignIn } from '../schema';

export type SignedInAs =
  | { kind: 'in'; personId: string }
  /** The password is right, the address is not confirmed: a mail was sent, and its code's half belongs to this browser. */
  | { kind: 'unconfirmed'; codeId: string; email: string };

/**
 * Whether an address and a password belong together. Tries are counted per account and per client address before the password is
 * looked at; an unknown address takes as long as a wrong password and is answered the same.
 *
 * @param goesTo a path of this site to go to once the address is confirmed, or ''
 * @throws AppError bad-input (they don't), too-many
 */
export async function signIn(input: Omit<SignIn, 'next'> & { goesTo: string }, clientAddress: string): Promise<SignedInAs> {
  const account = input.email.toLowerCase();
  await countTry('sign-in:address', clientAddress, 'There were very many tries to sign in from here.');
  await countTry('sign-in:account', account, 'There were many tries to sign in with this address.');
  const person = await withPerson(null, (tx) => getPersonByEmail(tx, input.email));
  const fits = await verifyPassword(person?.passwordHash ?? null, input.password);
  if (!person || !fits) throw new AppError('bad-input', 'This address and this password don’t belong together. Look at both again, or choose a new password.');
  await forgiveTry('sign-in:account', account, true);
  await forgiveTry('sign-in:address', clientAddress);
  if (person.emailVerifiedAt) return { kind: 'in', personId: person.id };
  await countTry('mail:account', account, 'Your address is not confirmed yet, and several mails with the link were sent already: look into your mail.');
  const codeId = await withPerson(null, async (tx) => {
    const id = await verifyCodeFor(tx, person.id, input.goesTo);
    await enqueue(tx, 'mail-verify', { codeId: id });
    return id;
  });
  return { kind: 'unconfirmed', codeId, email: person.email };
}
