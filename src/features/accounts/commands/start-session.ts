import { createSession, endSession } from '~/server/authentication';
import type { SignedIn } from '~/server/request-scope';
import { deviceWords } from '../assembly';

/**
 * Start a session with a new id for somebody who has shown who they are; what this browser had before ends.
 *
 * @returns the Set-Cookie value
 */
export async function startSession(personId: string, browser: { userAgent: string | null; visitor: SignedIn | null }): Promise<string> {
  if (browser.visitor) await endSession(browser.visitor.sessionId);
  return (await createSession(personId, deviceWords(browser.userAgent))).cookie;
}
