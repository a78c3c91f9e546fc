import { withPerson } from '~/server/database';
import { inEvenTime } from '~/server/even-time';
import { enqueue } from '~/server/jobs';
import { countTry, getPersonByEmail, verifyCodeFor } from '../queries';

/**
 * Send the mail that confirms an address again, if somebody signed up with it and has not confirmed it. Tells nobody whether
 * that is so.
 *
 * @throws AppError too-many
 */
export async function resendVerification(email: string, clientAddress: string): Promise<void> {
  await countTry('mail:address', clientAddress, 'Very many mails were asked for from here.');
  await countTry('mail:account', email.toLowerCase(), 'Several mails were sent to this address already.');
  await inEvenTime(() =>
    withPerson(null, async (tx) => {
      const person = await getPersonByEmail(tx, email);
      if (!person) return;
      if (person.emailVerifiedAt) await enqueue(tx, 'mail-already', { personId: person.id });
      else await enqueue(tx, 'mail-verify', { codeId: await verifyCodeFor(tx, person.id) });
    }),
  );
}
