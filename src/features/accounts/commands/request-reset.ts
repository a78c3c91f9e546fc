import { withPerson } from '~/server/database';
import { inEvenTime } from '~/server/even-time';
import { enqueue } from '~/server/jobs';
import { countTry, endCodes, getPersonByEmail, insertCode } from '../queries';

/**
 * Send the link to choose a new password, if the address has an account; an earlier one ends. Tells nobody whether it has.
 *
 * @throws AppError too-many
 */
export async function requestReset(email: string, clientAddress: string): Promise<void> {
  await countTry('mail:address', clientAddress, 'Very many mails were asked for from here.');
  await countTry('mail:account', email.toLowerCase(), 'Several mails were sent to this address already.');
  await inEvenTime(() =>
    withPerson(null, async (tx) => {
      const person = await getPersonByEmail(tx, email);
      if (!person) return;
      await endCodes(tx, person.id, ['reset']);
      await enqueue(tx, 'mail-reset', { codeId: await insertCode(tx, { personId: person.id, purpose: 'reset' }) });
    }),
  );
}
