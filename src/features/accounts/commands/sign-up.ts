import { eq, sql } from 'drizzle-orm';
import { hashPassword } from '~/server/authentication';
import { now } from '~/server/clock';
import { withPerson } from '~/server/database';
import { inEvenTime } from '~/server/even-time';
import { newId } from '~/server/ids';
import { enqueue } from '~/server/jobs';
import { requireGoodPassword } from '../policy';
import { countTry, endCodes, getPersonByEmail, insertCode } from '../queries';
import type { SignUp } from '../schema';
import { people } from '../tables';

/**
 * Make an account that is not confirmed yet, and send the mail that confirms it. For an address that has an account, a mail says
 * so; whoever asks is answered the same in both cases, in the same time.
 *
 * Signing up again before the address is confirmed starts afresh with what was typed last, and ends the earlier link: whoever
 * typed somebody else's address first has gained nothing.
 *
 * @param goesTo a path of this site to go to once the address is confirmed, or ''
 * @returns the code whose half belongs to this browser; null when there is none
 * @throws AppError bad-input (a password that would be guessed), too-many
 */
export async function signUp(input: Omit<SignUp, 'next'> & { goesTo: string }, clientAddress: string): Promise<{ codeId: string | null }> {
  const { name, email, password, goesTo } = input;
  await requireGoodPassword(password, input);
  await countTry('mail:address', clientAddress, 'Very many mails were asked for from here.');
  await countTry('mail:account', email.toLowerCase(), 'Several mails were sent to this address already.');
  return inEvenTime(async () => {
    const passwordHash = await hashPassword(password);
    return withPerson(null, async (tx) => {
      // The same address twice at once: the second waits here and then finds the first.
      await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(lower(${email}), 5))`);
      const known = await getPersonByEmail(tx, email);
      if (known?.emailVerifiedAt) {
        await enqueue(tx, 'mail-already', { personId: known.id });
        return { codeId: null };
      }
      const personId = known?.id ?? newId();
      if (known) {
        await tx.update(people).set({ name, email, passwordHash, createdAt: now() }).where(eq(people.id, personId));
        await endCodes(tx, personId, ['verify', 'reset', 'change']);
      } else {
        await tx.insert(people).values({ id: personId, name, email, passwordHash, createdAt: now() });
      }
      const codeId = await insertCode(tx, { personId, purpose: 'verify', goesTo });
      await enqueue(tx, 'mail-verify', { codeId });
      return { codeId };
    });
  });
}
