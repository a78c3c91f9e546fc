import { and, desc, eq, gt, inArray, isNull, lt, ne, sql } from 'drizzle-orm';
import { networkOf } from '~/server/client-address';
import { now } from '~/server/clock';
import { withPerson, type Tx } from '~/server/database';
import { AppError } from '~/server/errors';
import { newId } from '~/server/ids';
import { errorForLog, logger } from '~/server/logger';
import type { Scope } from '~/server/scope';
import { ABSOLUTE_DAYS, deriveToken, hashToken, throttleKey } from '~/server/tokens';
import { teams } from '../entries/tables';
import { addresses, invitations, memberships, organizations } from '../organizations/tables';
import { tournaments } from '../tournaments/tables';
import { LIMITS, RESET_MINUTES, UNCONFIRMED_DAYS, VERIFY_HOURS, type LimitName } from './constants';
import { oneTimeCodes, people, sessions, throttles } from './tables';
import type { CodePurpose, SessionRow } from './types';

const DAY = 86_400_000;

export interface PersonRow {
  id: string;
  name: string;
  email: string;
  passwordHash: string | null;
  emailVerifiedAt: Date | null;
}

const personColumns = {
  id: people.id,
  name: people.name,
  email: people.email,
  passwordHash: people.passwordHash,
  emailVerifiedAt: people.emailVerifiedAt,
};

/** A person by id, or null. */
export async function getPerson(tx: Tx, id: string): Promise<PersonRow | null> {
  const [row] = await tx.select(personColumns).from(people).where(eq(people.id, id));
  return row ?? null;
}

/** A person by address, in whatever case it was typed, or null. */
export async function getPersonByEmail(tx: Tx, email: string): Promise<PersonRow | null> {
  const [row] = await tx
    .select(personColumns)
    .from(people)
    .where(sql`lower(${people.email}) = lower(${email})`);
  return row ?? null;
}

export interface CodeRow {
  id: string;
  purpose: CodePurpose;
  personId: string;
  /** The address a `change` code is to prove. */
  email: string | null;
  goesTo: string;
  expiresAt: Date;
  usedAt: Date | null;
  /** The person's. */
  name: string;
  personEmail: string;
  passwordHash: string | null;
  emailVerifiedAt: Date | null;
}

const codeColumns = {
  id: oneTimeCodes.id,
  purpose: oneTimeCodes.purpose,
  personId: oneTimeCodes.personId,
  email: oneTimeCodes.email,
  goesTo: oneTimeCodes.goesTo,
  expiresAt: oneTimeCodes.expiresAt,
  usedAt: oneTimeCodes.usedAt,
  name: people.name,
  personEmail: people.email,
  passwordHash: people.passwordHash,
  emailVerifiedAt: people.emailVerifiedAt,
};

/** A code and its person by the code's id, or null. */
export async function getCode(tx: Tx, id: string): Promise<CodeRow | null> {
  const [row] = await tx.select(codeColumns).from(oneTimeCodes).innerJoin(people, eq(people.id, oneTimeCodes.personId)).where(eq(oneTimeCodes.id, id));
  return row ?? null;
}

/** A code that may still be used, by what stands in the link; null when it is unknown, used, ended or past its time. */
export async function getLiveCode(tx: Tx, purposes: CodePurpose[], token: string): Promise<CodeRow | null> {
  const [row] = await tx
    .select(codeColumns)
    .from(oneTimeCodes)
    .innerJoin(people, eq(people.id, oneTimeCodes.personId))
    .where(eq(oneTimeCodes.codeHash, hashToken(token)));
  return row && purposes.includes(row.purpose) && row.usedAt === null && row.expiresAt > now() ? row : null;
}

/** The newest code of a person for a purpose that may still be used, or null. */
export async function newestLiveCode(tx: Tx, personId: string, purpose: CodePurpose): Promise<{ id: string } | null> {
  const [row] = await tx
    .select({ id: oneTimeCodes.id })
    .from(oneTimeCodes)
    .where(and(eq(oneTimeCodes.personId, personId), eq(oneTimeCodes.purpose, purpose), isNull(oneTimeCodes.usedAt), gt(oneTimeCodes.expiresAt, now())))
    .orderBy(desc(oneTimeCodes.createdAt))
    .limit(1);
  return row ?? null;
}

/** Make a code; the mail's link is derived from the id that is returned. */
export async function insertCode(tx: Tx, code: { personId: string; purpose: CodePurpose; email?: string; goesTo?: string }): Promise<string> {
  const id = newId();
  const minutes = code.purpose === 'reset' ? RESET_MINUTES : VERIFY_HOURS * 60;
  await tx.insert(oneTimeCodes).values({
    id,
    ...code,
    codeHash: hashToken(deriveToken(code.purpose, id)),
    createdAt: now(),
    expiresAt: new Date(now().getTime() + minutes * 60_000),
  });
  return id;
}

/** Use a code up. False when somebody else has done so meanwhile: of two at once, one wins. */
export async function useCode(tx: Tx, id: string): Promise<boolean> {
  const used = await tx.update(oneTimeCodes).set({ usedAt: now() }).where(and(eq(oneTimeCodes.id, id), isNull(oneTimeCodes.usedAt))).returning({ id: oneTimeCodes.id });
  return used.length === 1;
}

/** End a person's codes of some purposes that were not used. */
export async function endCodes(tx: Tx, personId: string, purposes: CodePurpose[]): Promise<void> {
  await tx
    .update(oneTimeCodes)
    .set({ usedAt: now() })
    .where(and(eq(oneTimeCodes.personId, personId), inArray(oneTimeCodes.purpose, purposes), isNull(oneTimeCodes.usedAt)));
}

/** The code whose mail is sent again to somebody who has not confirmed the address: the newest that works, or a new one. */
export async function verifyCodeFor(tx: Tx, personId: string, goesTo = ''): Promise<string> {
  const live = await newestLiveCode(tx, personId, 'verify');
  if (!live) return insertCode(tx, { personId, purpose: 'verify', goesTo });
  if (goesTo !== '') await tx.update(oneTimeCodes).set({ goesTo }).where(eq(oneTimeCodes.id, live.id));
  return live.id;
}

/** A person's sessions that have not ended, last used first. */
export async function listSessions(tx: Tx, personId: string): Promise<SessionRow[]> {
  return tx
    .select({ id: sessions.id, device: sessions.device, startedAt: sessions.createdAt, lastUsedAt: sessions.lastUsedAt })
    .from(sessions)
    .where(and(eq(sessions.personId, personId), gt(sessions.expiresAt, now()), gt(sessions.createdAt, new Date(now().getTime() - ABSOLUTE_DAYS * DAY))))
    .orderBy(desc(sessions.lastUsedAt));
}

/** End one session of a person; false when they have none of that id. */
export async function endSessionOf(tx: Tx, personId: string, id: string): Promise<boolean> {
  const gone = await tx.delete(sessions).where(and(eq(sessions.personId, personId), eq(sessions.id, id))).returning({ id: sessions.id });
  return gone.length === 1;
}

/** End a person's sessions, all but the one kept (its hashed id), as part of the transaction. Returns how many. */
export async function endSessionsOf(tx: Tx, personId: string, keep?: string): Promise<number> {
  const gone = await tx
    .delete(sessions)
    .where(and(eq(sessions.personId, personId), keep === undefined ? undefined : ne(sessions.id, keep)))
    .returning({ id: sessions.id });
  return gone.length;
}

const tryKey = (limit: LimitName, subject: string) => throttleKey(limit, limit.endsWith(':address') ? networkOf(subject) : subject);

/**
 * Count one try, in a transaction of its own, so that it is counted whatever follows.
 *
 * @param subject what is tried on: an address in lower case, a client address, a person's id
 * @throws AppError too-many, with the seconds to wait as `retryAfter`
 */
export async function countTry(limit: LimitName, subject: string, words: string): Promise<void> {
  const { most, minutes } = LIMITS[limit];
  const { rows } = await withPerson(null, (tx) =>
    tx.execute<{ allowed: boolean; retry_after: number }>(
      sql`select allowed, retry_after from count_try(${tryKey(limit, subject)}, ${most}, make_interval(mins => ${minutes}), ${now().toISOString()}::timestamptz)`,
    ),
  );
  const row = rows[0]!;
  if (row.allowed) return;
  logger().warn({ limit }, 'throttled');
  const wait = Math.max(1, Math.ceil(row.retry_after / 60));
  throw new AppError('too-many', `${words} Try again in ${wait === 1 ? 'a minute' : `${wait} minutes`}.`, { extra: { retryAfter: Math.ceil(row.retry_after) } });
}

/** Take back what was counted for a try that was right: `all` of the key's, or that one. */
export async function forgiveTry(limit: LimitName, subject: string, all = false): Promise<void> {
  const key = tryKey(limit, subject);
  await withPerson(null, (tx) =>
    all ? tx.delete(throttles).where(eq(throttles.key, key)) : tx.update(throttles).set({ count: sql`greatest(${throttles.count} - 1, 0)` }).where(eq(throttles.key, key)),
  );
}

/**
 * Remove counters whose window has ended, codes a week past their time, and sessions past their absolute limit.
 * Returns how many of each.
 */
export async function deleteWhatHasPassed(tx: Tx, moment: Date): Promise<{ throttles: number; codes: number; sessions: number }> {
  const counters = await tx.delete(throttles).where(lt(throttles.windowEndsAt, moment)).returning({ key: throttles.key });
  const codes = await tx.delete(oneTimeCodes).where(lt(oneTimeCodes.expiresAt, new Date(moment.getTime() - 7 * DAY))).returning({ id: oneTimeCodes.id });
  const old = await tx.delete(sessions).where(lt(sessions.createdAt, new Date(moment.getTime() - ABSOLUTE_DAYS * DAY))).returning({ id: sessions.id });
  return { throttles: counters.length, codes: codes.length, sessions: old.length };
}

/** Sign-ups that nobody confirmed in time, some at once. */
export async function unconfirmedPeople(tx: Tx, moment: Date): Promise<string[]> {
  const rows = await tx
    .select({ id: people.id })
    .from(people)
    .where(and(isNull(people.emailVerifiedAt), lt(people.createdAt, new Date(moment.getTime() - UNCONFIRMED_DAYS * DAY))))
    .limit(200);
  return rows.map((r) => r.id);
}

/** Forget one of them; false when something still names the person, who then stays. */
export async function deleteUnconfirmed(id: string): Promise<boolean> {
  try {
    await withPerson(null, (tx) => tx.delete(people).where(and(eq(people.id, id), isNull(people.emailVerifiedAt))));
    return true;
  } catch (error) {
    logger().debug({ person: id, error: errorForLog(error) }, 'still named');
    return false;
  }
}

/** The addresses of the organizations a person belongs to, active or suspended, by name. In the person's own transaction. */
export async function listOwnOrganizations(tx: Tx, personId: string): Promise<{ slug: string; name: string }[]> {
  return tx
    .selectDistinct({ slug: organizations.slug, name: organizations.name })
    .from(memberships)
    .innerJoin(organizations, eq(organizations.orgId, memberships.orgId))
    .where(eq(memberships.personId, personId))
    .orderBy(organizations.name, organizations.slug);
}

/** The open invitations to an address, and where each organization is found. In the transaction of the person who has the address. */
export async function listOwnInvitations(tx: Tx, email: string): Promise<{ id: string; slug: string }[]> {
  return tx
    .select({ id: invitations.id, slug: addresses.slug })
    .from(invitations)
    .innerJoin(addresses, eq(addresses.orgId, invitations.orgId))
    .where(and(sql`lower(${invitations.email}) = lower(${email})`, isNull(invitations.acceptedAt), isNull(invitations.revokedAt), gt(invitations.expiresAt, now())))
    .orderBy(invitations.createdAt)
    .limit(50);
}

/** For each school the address of the newest tournament in which it has a team. */
export async function newestTournamentOf(tx: Tx, scope: Scope, schoolIds: string[]): Promise<Map<string, string>> {
  const rows = await tx
    .selectDistinctOn([teams.schoolId], { schoolId: teams.schoolId, slug: tournaments.slug })
    .from(teams)
    .innerJoin(tournaments, and(eq(tournaments.orgId, teams.orgId), eq(tournaments.id, teams.tournamentId)))
    .where(and(eq(teams.orgId, scope.orgId), inArray(teams.schoolId, schoolIds), ne(teams.state, 'withdrawn')))
    .orderBy(teams.schoolId, desc(tournaments.day));
  return new Map(rows.map((r) => [r.schoolId, r.slug]));
}

/** Some addresses of organizations, for the first page of the demo. */
export async function someAddresses(tx: Tx): Promise<string[]> {
  return (await tx.select({ slug: addresses.slug }).from(addresses).orderBy(addresses.slug).limit(8)).map((r) => r.slug);
}
