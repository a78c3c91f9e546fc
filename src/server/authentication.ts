/**
 * The one place that knows the session and password libraries: Lucia 3 for sessions, oslo for
 * Argon2id and encodings. Both are finished packages; whatever replaces them replaces this file.
 *
 * What Lucia leaves to us is here: ids hashed at rest, an absolute lifetime beside the idle one, a
 * `__Host-` cookie, a reader that no malformed cookie can make throw.
 */
import { DrizzlePostgreSQLAdapter } from '@lucia-auth/adapter-drizzle';
import { drizzle } from 'drizzle-orm/node-postgres';
import { Lucia, TimeSpan, type Adapter, type DatabaseSession, type DatabaseUser, type Session, type User } from 'lucia';
import { randomBytes } from 'node:crypto';
import { Argon2id } from 'oslo/password';
import { people, sessions } from '~/features/accounts/tables';
import { now } from './clock';
import { pool, prepared } from './database';
import { isHttps } from './environment';
import { singleton } from './singleton';
import { ABSOLUTE_DAYS, hashToken, IDLE_DAYS } from './tokens';

export { deriveToken, hashToken } from './tokens';

/** A session's last use is written down again once it is this old, in minutes: not with every request. */
export const LAST_USE_MINUTES = 5;

const DAY = 86_400_000;

interface SessionAttributes {
  createdAt: Date;
  device: string;
}
interface PersonAttributes {
  name: string;
  email: string;
  emailVerifiedAt: Date | null;
  isOperator: boolean;
}

declare module 'lucia' {
  interface Register {
    Lucia: ReturnType<typeof lucia>;
    DatabaseSessionAttributes: SessionAttributes;
    DatabaseUserAttributes: PersonAttributes;
  }
}

/** Lucia's stock adapter keeps ids as they are; this one hashes them on the way in and reads in one prepared statement. */
class HashingAdapter implements Adapter {
  readonly #inner = new DrizzlePostgreSQLAdapter(drizzle(pool()), sessions as never, people as never);

  async getSessionAndUser(sessionId: string): Promise<[DatabaseSession | null, DatabaseUser | null]> {
    const { rows } = await pool().query(
      prepared(
        'session',
        `select s.person_id, s.expires_at, s.created_at, s.last_used_at, s.device, p.name, p.email, p.email_verified_at, p.is_operator
           from sessions s join people p on p.id = s.person_id where s.id = $1`,
        [hashToken(sessionId)],
      ),
    );
    const r = rows[0];
    if (!r) return [null, null];
    const moment = now();
    if (r.expires_at > moment && moment.getTime() - r.last_used_at.getTime() > LAST_USE_MINUTES * 60_000) {
      await pool().query('update sessions set last_used_at = $2 where id = $1', [hashToken(sessionId), moment]);
    }
    return [
      { id: sessionId, userId: r.person_id, expiresAt: r.expires_at, attributes: { createdAt: r.created_at, device: r.device } },
      { id: r.person_id, attributes: { name: r.name, email: r.email, emailVerifiedAt: r.email_verified_at, isOperator: r.is_operator } },
    ];
  }
  async setSession(session: DatabaseSession): Promise<void> {
    await pool().query('insert into sessions (id, person_id, expires_at, created_at, last_used_at, device) values ($1, $2, $3, $4, $4, $5)', [
      hashToken(session.id),
      session.userId,
      session.expiresAt,
      session.attributes.createdAt,
      session.attributes.device,
    ]);
  }
  updateSessionExpiration(sessionId: string, expiresAt: Date): Promise<void> {
    return this.#inner.updateSessionExpiration(hashToken(sessionId), expiresAt);
  }
  deleteSession(sessionId: string): Promise<void> {
    return this.#inner.deleteSession(hashToken(sessionId));
  }
  getUserSessions(): Promise<DatabaseSession[]> {
    // Ids are hashed: what belongs to a person is listed by the accounts feature instead.
    return Promise.resolve([]);
  }
  deleteUserSessions(userId: string): Promise<void> {
    return this.#inner.deleteUserSessions(userId);
  }
  deleteExpiredSessions(): Promise<void> {
    return this.#inner.deleteExpiredSessions();
  }
}

function lucia() {
  return singleton('lucia', () => {
    return new Lucia<SessionAttributes, PersonAttributes>(new HashingAdapter(), {
      sessionExpiresIn: new TimeSpan(IDLE_DAYS, 'd'),
      sessionCookie: {
        name: isHttps() ? '__Host-fairlead' : 'fairlead',
        attributes: { sameSite: 'lax', path: '/', secure: isHttps() },
      },
      getSessionAttributes: (a) => ({ createdAt: a.createdAt, device: a.device }),
      getUserAttributes: (a) => ({ name: a.name, email: a.email, emailVerifiedAt: a.emailVerifiedAt, isOperator: a.isOperator }),
    });
  });
}

export type { Session, User };

/** Name of the session cookie, for tests that set it and for the header reader. */
export function sessionCookieName(): string {
  return lucia().sessionCookieName;
}

/** The session id in a Cookie header, or null. Never throws, whatever was sent. */
export function readSessionCookie(header: string | null | undefined): string | null {
  if (!header) return null;
  const name = sessionCookieName();
  for (const part of header.split(';')) {
    const eq = part.indexOf('=');
    if (eq > 0 && part.slice(0, eq).trim() === name) {
      const value = part.slice(eq + 1).trim();
      return /^[a-z0-9]{20,80}$/.test(value) ? value : null;
    }
  }
  return null;
}

/**
 * Who a session cookie belongs to. Moves the idle limit on; ends a session past its absolute limit.
 * `cookie` is set when the browser should be given a new or a blank one.
 */
export async function validateSession(id: string): Promise<{ session: Session; user: User; cookie: string | null } | { session: null; user: null; cookie: string }> {
  const found = await lucia().validateSession(id);
  if (!found.session) return { session: null, user: null, cookie: lucia().createBlankSessionCookie().serialize() };
  if (found.session.createdAt.getTime() + ABSOLUTE_DAYS * DAY <= now().getTime()) {
    await lucia().invalidateSession(id);
    return { session: null, user: null, cookie: lucia().createBlankSessionCookie().serialize() };
  }
  return { ...found, cookie: found.session.fresh ? lucia().createSessionCookie(id).serialize() : null };
}

/** Start a session with a new id. Returns the Set-Cookie value. */
export async function createSession(personId: string, device: string): Promise<{ id: string; cookie: string }> {
  const session = await lucia().createSession(personId, { createdAt: now(), device: device.slice(0, 120) });
  return { id: session.id, cookie: lucia().createSessionCookie(session.id).serialize() };
}

/** End one session. Returns the Set-Cookie value that clears the cookie. */
export async function endSession(id: string): Promise<string> {
  await lucia().invalidateSession(id);
  return lucia().createBlankSessionCookie().serialize();
}

/** The Set-Cookie value that clears the session's cookie. */
export function blankSessionCookie(): string {
  return lucia().createBlankSessionCookie().serialize();
}

/** End every session of a person (password changed, account suspended). */
export async function endAllSessions(personId: string): Promise<void> {
  await lucia().invalidateUserSessions(personId);
}

/** Remove sessions past their time. */
export async function deleteExpiredSessions(): Promise<void> {
  await lucia().deleteExpiredSessions();
}

// OWASP's password storage cheat sheet: Argon2id, 19 MiB, 2 iterations, 1 lane.
const argon2id = new Argon2id({ memorySize: 19_456, iterations: 2, parallelism: 1 });

export function hashPassword(password: string): Promise<string> {
  return argon2id.hash(password.normalize('NFKC'));
}

/**
 * True when the password fits. With no hash (no such account, or none chosen yet) the same work is
 * done against a hash of nothing, so that the time taken tells nobody which accounts exist.
 */
export async function verifyPassword(hash: string | null, password: string): Promise<boolean> {
  const fits = await argon2id.verify(hash ?? (await decoy()), password.normalize('NFKC'));
  return hash !== null && fits;
}

function decoy(): Promise<string> {
  return singleton('decoy', () => argon2id.hash(randomBytes(24).toString('base64url')));
}
