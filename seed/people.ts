/** The demo's people. They would confirm their address by mail, which a seed can't read, so their rows are written here. */
import { people } from '../src/features/accounts/tables';
import { hashPassword } from '../src/server/authentication';
import { now } from '../src/server/clock';
import { withPerson } from '../src/server/database';
import { newId } from '../src/server/ids';
import type { SignedIn } from '../src/server/request-scope';
import { DEMO_PASSWORD, PEOPLE, type PersonKey } from './names';

/** Everybody, as the application knows somebody who is signed in. */
export type Cast = Record<PersonKey, SignedIn>;

/** Make all accounts. */
export async function makePeople(): Promise<Cast> {
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  const moment = now();
  const rows = (Object.entries(PEOPLE) as [PersonKey, (typeof PEOPLE)[PersonKey]][]).map(([key, p]) => ({ key, id: newId(), name: p.name, email: p.email }));
  await withPerson(null, (tx) => tx.insert(people).values(rows.map(({ id, name, email }) => ({ id, name, email, passwordHash, emailVerifiedAt: moment, createdAt: moment }))));
  return Object.fromEntries(
    rows.map((r) => [r.key, { personId: r.id, name: r.name, email: r.email, emailVerified: true, isOperator: false, sessionId: 'seed' } satisfies SignedIn]),
  ) as Cast;
}
