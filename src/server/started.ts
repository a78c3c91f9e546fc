import { isHttps } from './environment';
import { isId, newId } from './ids';
import { deriveToken, sameText } from './tokens';

/**
 * The cookie of a browser between asking for an account and opening the link in the mail: whose mail to look into, and the
 * browser's half of the code, which shows that the link is opened where the account was asked for. It is set in the same
 * form whether an account was made or not.
 */
const HOURS = 24;

function cookieName(): string {
  return isHttps() ? '__Host-fairlead-started' : 'fairlead-started';
}

const attributes = (seconds: number) => `; Path=/; HttpOnly; SameSite=Lax; Max-Age=${seconds}${isHttps() ? '; Secure' : ''}`;

/** The Set-Cookie value. @param codeId null when there is no code: the cookie then names one that never was */
export function startedCookie(codeId: string | null, email: string): string {
  const id = codeId ?? newId();
  return `${cookieName()}=${id}.${deriveToken('device', id)}.${Buffer.from(email).toString('base64url')}${attributes(HOURS * 3600)}`;
}

/** The Set-Cookie value that takes it back. */
export function clearedStartedCookie(): string {
  return `${cookieName()}=${attributes(0)}`;
}

/** What the cookie says, or null: the address, and the code whose half it truly holds. Never throws, whatever was sent. */
export function readStarted(header: string | null | undefined): { email: string; codeId: string | null } | null {
  for (const part of (header ?? '').split(';')) {
    const at = part.indexOf('=');
    if (at < 0 || part.slice(0, at).trim() !== cookieName()) continue;
    const [id = '', half = '', email = ''] = part.slice(at + 1).trim().split('.');
    if (!isId(id) || email.length > 400) return null;
    return { email: Buffer.from(email, 'base64url').toString(), codeId: sameText(half, deriveToken('device', id)) ? id : null };
  }
  return null;
}
