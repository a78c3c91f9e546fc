import { and, eq, isNull, ne, sql } from 'drizzle-orm';
import { verifyPassword } from '~/server/authentication';
import { now } from '~/server/clock';
import { withPerson, type Tx } from '~/server/database';
import { AppError, fieldError, uniqueViolation } from '~/server/errors';
import { countTry, endCodes, forgiveTry, getLiveCode, useCode, type CodeRow } from '../queries';
import { people } from '../tables';

/** What a used, ended or unknown link is answered. */
function spent(): AppError {
  return new AppError('out-of-order', 'This link no longer works: it was used already, or its time is over. Ask for a new mail.');
}

/**
 * Confirm an address with the code of a link, once. Where the link is opened on another device than the one that signed up, the
 * password shows that it is the same person: nobody confirms an account that somebody else made with their address.
 *
 * @param startedCodeId the code whose half this browser holds
 * @returns who is now confirmed, and where they wanted to go
 * @throws AppError out-of-order (used, ended, past its time, unknown), bad-input (password missing or wrong), conflict, too-many
 */
export async function verifyAddress(
  token: string,
  proof: { startedCodeId: string | null; password?: string | undefined },
  clientAddress: string,
): Promise<{ personId: string; goesTo: string; changed: boolean }> {
  await countTry('code:address', clientAddress, 'Very many links were opened from here.');
  const code = await withPerson(null, (tx) => getLiveCode(tx, ['verify', 'change'], token));
  if (!code) throw spent();
  if (code.purpose === 'verify' && code.id !== proof.startedCodeId) await requirePassword(code, proof.password);
  try {
    await withPerson(null, (tx) => confirm(tx, code));
  } catch (error) {
    if (uniqueViolation(error)) throw new AppError('conflict', 'Another account uses this address by now, so nothing was changed.');
    throw error;
  }
  return { personId: code.personId, goesTo: code.goesTo, changed: code.purpose === 'change' };
}

async function requirePassword(code: CodeRow, password: string | undefined): Promise<void> {
  if (password === undefined) throw fieldError('password', 'Write the password that you chose when you signed up.');
  await countTry('code:password', code.id, 'There were many tries with this link.');
  if (!(await verifyPassword(code.passwordHash, password))) {
    throw fieldError('password', 'This is not the password that was chosen when this address was signed up with. If you don’t know it, choose a new one.');
  }
  await forgiveTry('code:password', code.id, true);
}

async function confirm(tx: Tx, code: CodeRow): Promise<void> {
  if (!(await useCode(tx, code.id))) throw spent();
  if (code.purpose === 'change') {
    // An account that was never confirmed holds no address: it gives way to whoever can read the mail.
    await tx.delete(people).where(and(sql`lower(${people.email}) = lower(${code.email})`, ne(people.id, code.personId), isNull(people.emailVerifiedAt)));
    await tx.update(people).set({ email: code.email!, emailVerifiedAt: now() }).where(eq(people.id, code.personId));
  } else await tx.update(people).set({ emailVerifiedAt: now() }).where(eq(people.id, code.personId));
  // Links that went to the address before lead nowhere from now on.
  await endCodes(tx, code.personId, ['verify', 'change', 'reset']);
}
