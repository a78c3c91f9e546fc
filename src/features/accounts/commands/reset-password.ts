import { eq } from 'drizzle-orm';
import { hashPassword } from '~/server/authentication';
import { now } from '~/server/clock';
import { withPerson } from '~/server/database';
import { AppError } from '~/server/errors';
import { requireGoodPassword } from '../policy';
import { countTry, endCodes, endSessionsOf, forgiveTry, getLiveCode, useCode } from '../queries';
import { people } from '../tables';

/**
 * Set a new password with the code of a link, once. Every session ends, and so does every other link of the account; the link
 * came by mail, so the address is confirmed with it.
 *
 * @throws AppError out-of-order (used, ended, past its time, unknown), bad-input (a password that would be guessed), too-many
 */
export async function resetPassword(token: string, password: string, clientAddress: string): Promise<{ personId: string }> {
  await countTry('code:address', clientAddress, 'Very many links were opened from here.');
  const spent = () => new AppError('out-of-order', 'This link no longer works: it was used already, or its time is over. Ask for a new one.');
  const code = await withPerson(null, (tx) => getLiveCode(tx, ['reset'], token));
  if (!code) throw spent();
  await requireGoodPassword(password, { name: code.name, email: code.personEmail });
  const passwordHash = await hashPassword(password);
  await withPerson(null, async (tx) => {
    if (!(await useCode(tx, code.id))) throw spent();
    await tx.update(people).set({ passwordHash, emailVerifiedAt: code.emailVerifiedAt ?? now() }).where(eq(people.id, code.personId));
    await endCodes(tx, code.personId, ['verify', 'reset', 'change']);
    await endSessionsOf(tx, code.personId);
  });
  await forgiveTry('sign-in:account', code.personEmail.toLowerCase(), true);
  return { personId: code.personId };
}
