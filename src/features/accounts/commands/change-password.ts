import { eq } from 'drizzle-orm';
import { hashPassword, verifyPassword } from '~/server/authentication';
import { withPerson } from '~/server/database';
import { fieldError } from '~/server/errors';
import type { SignedIn } from '~/server/request-scope';
import { hashToken } from '~/server/tokens';
import { requireGoodPassword } from '../policy';
import { countTry, endCodes, endSessionsOf, forgiveTry, getPerson } from '../queries';
import type { ChangePassword } from '../schema';
import { people } from '../tables';

/** Whoever is signed in also knows the password. @throws AppError bad-input beside `present`, too-many */
export async function requirePresentPassword(person: SignedIn, present: string): Promise<void> {
  await countTry('password:person', person.personId, 'There were many tries with this password.');
  const row = await withPerson(person.personId, (tx) => getPerson(tx, person.personId));
  if (!(await verifyPassword(row?.passwordHash ?? null, present))) throw fieldError('present', 'This is not your present password.');
  await forgiveTry('password:person', person.personId, true);
}

/**
 * Choose another password. Every other session ends, and so do links that are about.
 *
 * @returns how many other sessions ended
 * @throws AppError bad-input (the present one is wrong, the new one would be guessed), too-many
 */
export async function changePassword(person: SignedIn, input: ChangePassword): Promise<{ ended: number }> {
  await requirePresentPassword(person, input.present);
  await requireGoodPassword(input.password, person);
  const passwordHash = await hashPassword(input.password);
  const ended = await withPerson(person.personId, async (tx) => {
    await tx.update(people).set({ passwordHash }).where(eq(people.id, person.personId));
    await endCodes(tx, person.personId, ['reset', 'change']);
    return endSessionsOf(tx, person.personId, hashToken(person.sessionId));
  });
  return { ended };
}
