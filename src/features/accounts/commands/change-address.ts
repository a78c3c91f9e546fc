import { withPerson } from '~/server/database';
import { fieldError } from '~/server/errors';
import { inEvenTime } from '~/server/even-time';
import { enqueue } from '~/server/jobs';
import type { SignedIn } from '~/server/request-scope';
import { countTry, endCodes, getPersonByEmail, insertCode } from '../queries';
import type { ChangeAddress } from '../schema';
import { requirePresentPassword } from './change-password';

/**
 * Ask for another address: a link goes to the new one, a word to the present one, and nothing changes before the link is opened.
 * Whether another account has the address is told only to that address.
 *
 * @throws AppError bad-input (wrong password, the same address), too-many
 */
export async function changeAddress(person: SignedIn, input: ChangeAddress): Promise<void> {
  if (input.email === person.email) throw fieldError('email', 'That is your address already.');
  await requirePresentPassword(person, input.present);
  await countTry('mail:account', input.email.toLowerCase(), 'Several mails were sent to this address already.');
  await inEvenTime(() =>
    withPerson(person.personId, async (tx) => {
      await endCodes(tx, person.personId, ['change']);
      const other = await getPersonByEmail(tx, input.email);
      // An account that was never confirmed holds no address.
      if (other && other.id !== person.personId && other.emailVerifiedAt) await enqueue(tx, 'mail-already', { personId: other.id });
      else await enqueue(tx, 'mail-verify', { codeId: await insertCode(tx, { personId: person.personId, purpose: 'change', email: input.email }) });
    }),
  );
}
