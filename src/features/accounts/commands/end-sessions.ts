import { blankSessionCookie, endSession } from '~/server/authentication';
import { withPerson } from '~/server/database';
import { notFound } from '~/server/errors';
import type { SignedIn } from '~/server/request-scope';
import { hashToken } from '~/server/tokens';
import { endSessionOf, endSessionsOf } from '../queries';

/** End one of the own sessions by its hashed id. @throws AppError not-found: ended meanwhile, or somebody else's */
export async function endOneSession(person: SignedIn, id: string): Promise<void> {
  const found = await withPerson(person.personId, (tx) => endSessionOf(tx, person.personId, id));
  if (!found) throw notFound('That session has ended already.');
}

/** End all the own sessions but this one. Returns how many. */
export function endOtherSessions(person: SignedIn): Promise<number> {
  return withPerson(person.personId, (tx) => endSessionsOf(tx, person.personId, hashToken(person.sessionId)));
}

/** End the session of this browser, if it has one. Returns the Set-Cookie value that takes its cookie back. */
export function endThisSession(visitor: SignedIn | null): Promise<string> {
  return visitor ? endSession(visitor.sessionId) : Promise.resolve(blankSessionCookie());
}
