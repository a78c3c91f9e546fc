import { now } from '~/server/clock';
import { deleteExpiredSessions } from '~/server/authentication';
import { withPerson } from '~/server/database';
import { environment } from '~/server/environment';
import type { Handlers } from '~/server/jobs';
import { logger } from '~/server/logger';
import { sendMail } from '~/server/mail';
import { deriveToken } from '~/server/tokens';
import { RESET_MINUTES, VERIFY_HOURS } from './constants';
import { ALREADY_SUBJECT, AlreadyHere } from './emails/already-here';
import { CHANGE_SUBJECT, CHANGE_TOLD_SUBJECT, ChangeAddress, ChangeAddressTold } from './emails/change-address';
import { RESET_SUBJECT, ResetPassword } from './emails/reset-password';
import { VERIFY_SUBJECT, VerifyAddress } from './emails/verify-address';
import { deleteUnconfirmed, deleteWhatHasPassed, getPerson, getCode, unconfirmedPeople } from './queries';

const at = (path: string) => `${environment().PUBLIC_URL}${path}`;

/** The link of a code, whatever it is for. */
function codeLink(code: { id: string; purpose: 'verify' | 'reset' | 'change' }): string {
  return at(`/${code.purpose === 'reset' ? 'reset' : 'verify'}/${deriveToken(code.purpose, code.id)}`);
}

/**
 * The mails of the accounts. The idempotency key holds the job, so that a job tried again sends
 * nothing twice, while somebody who asks again gets another mail. A code that is used, ended or past
 * its time sends nothing.
 */
export const ACCOUNT_JOBS: Pick<Handlers, 'mail-verify' | 'mail-already' | 'mail-reset' | 'housekeeping'> = {
  async 'mail-verify'({ codeId }, jobId) {
    const code = await withPerson(null, (tx) => getCode(tx, codeId));
    if (!code || code.usedAt || code.expiresAt <= now()) return;
    const href = codeLink(code);
    if (code.purpose === 'change') {
      if (!code.email) return;
      await sendMail(`change/${codeId}/${jobId}`, code.email, CHANGE_SUBJECT, ChangeAddress({ name: code.name, href, hours: VERIFY_HOURS }));
      await sendMail(`change-told/${codeId}/${jobId}`, code.personEmail, CHANGE_TOLD_SUBJECT, ChangeAddressTold({ name: code.name, reset: at('/reset') }));
      return;
    }
    await sendMail(`verify/${codeId}/${jobId}`, code.personEmail, VERIFY_SUBJECT, VerifyAddress({ name: code.name, href, hours: VERIFY_HOURS }));
  },

  async 'mail-already'({ personId }, jobId) {
    const person = await withPerson(null, (tx) => getPerson(tx, personId));
    if (!person) return;
    await sendMail(`already/${personId}/${jobId}`, person.email, ALREADY_SUBJECT, AlreadyHere({ name: person.name, signIn: at('/sign-in'), reset: at('/reset') }));
  },

  async 'mail-reset'({ codeId }, jobId) {
    const code = await withPerson(null, (tx) => getCode(tx, codeId));
    if (!code || code.usedAt || code.expiresAt <= now()) return;
    await sendMail(`reset/${codeId}/${jobId}`, code.personEmail, RESET_SUBJECT, ResetPassword({ name: code.name, href: codeLink(code), minutes: RESET_MINUTES }));
  },

  async housekeeping() {
    await deleteExpiredSessions();
    const gone = await withPerson(null, (tx) => deleteWhatHasPassed(tx, now()));
    let forgotten = 0;
    // One at a time: somebody who is still named anywhere stays, and must not keep the others.
    for (const id of await withPerson(null, (tx) => unconfirmedPeople(tx, now()))) {
      if (await deleteUnconfirmed(id)) forgotten++;
    }
    logger().info({ ...gone, forgotten }, 'housekeeping');
  },
};
