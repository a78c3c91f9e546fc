/**
 * Small invented worlds for tests. Every suite makes its own organization. Rows are written through
 * `withScope`, as the application's role, so that row-level security is in force here too; what a
 * test is about, it does by the command itself.
 */
import { people } from '~/features/accounts/tables';
import { teams } from '~/features/entries/tables';
import { events } from '~/features/events/tables';
import { addresses, memberships, organizations } from '~/features/organizations/tables';
import { schools } from '~/features/schools/tables';
import { divisions, tournaments } from '~/features/tournaments/tables';
import { now } from '~/server/clock';
import { withPerson, withScope } from '~/server/database';
import { newId } from '~/server/ids';
import { makeScope, type Grant, type Role, type Scope } from '~/server/scope';

let count = 0;
const next = () => ++count;

export interface TestPerson {
  id: string;
  name: string;
  email: string;
}

/** A person with a verified address and no password (sign in by session). */
export async function makePerson(over: Partial<TestPerson & { emailVerifiedAt: Date | null; passwordHash: string | null }> = {}): Promise<TestPerson> {
  const n = next();
  const person = { id: newId(), name: over.name ?? `Person ${n}`, email: over.email ?? `person${n}-${newId().slice(-6)}@fairlead.test` };
  await withPerson(null, (tx) =>
    tx.insert(people).values({
      ...person,
      passwordHash: over.passwordHash ?? null,
      emailVerifiedAt: over.emailVerifiedAt === undefined ? now() : over.emailVerifiedAt,
      createdAt: now(),
    }),
  );
  return person;
}

/** A scope as the middleware would make it. */
export function scopeOf(org: { id: string; slug: string }, person: TestPerson | null, grants: Grant[], tournamentId: string | null = null): Scope {
  return makeScope({
    orgId: org.id,
    orgSlug: org.slug,
    actor: person ? { kind: 'person', personId: person.id, name: person.name } : { kind: 'public', personId: null, name: 'the public' },
    grants,
    tournamentId,
  });
}

export interface TestOrganization {
  id: string;
  slug: string;
  name: string;
  owner: TestPerson;
  /** The owner's scope, in no tournament. */
  scope: Scope;
}

export async function makeOrganization(over: { name?: string; slug?: string; timeZone?: string } = {}): Promise<TestOrganization> {
  const n = next();
  const id = newId();
  const slug = over.slug ?? `office-${n}-${id.slice(-6)}`;
  const owner = await makePerson({ name: `Owner ${n}` });
  const scope = scopeOf({ id, slug }, owner, [{ role: 'owner', tournamentId: null, eventId: null, schoolId: null }]);
  const name = over.name ?? `Office ${n}`;
  await withScope(scope, async (tx) => {
    await tx.insert(organizations).values({ orgId: id, slug, name, timeZone: over.timeZone ?? 'America/Chicago', currency: 'USD', createdAt: now() });
    await tx.insert(addresses).values({ slug, orgId: id });
    await tx.insert(memberships).values({ orgId: id, id: newId(), personId: owner.id, role: 'owner', createdAt: now() });
  });
  return { id, slug, name, owner, scope };
}

/** Give somebody a role, and the scope they then have. */
export async function grant(org: TestOrganization, person: TestPerson, role: Role, place: Partial<Omit<Grant, 'role'>> = {}): Promise<Scope> {
  const g: Grant = { role, tournamentId: place.tournamentId ?? null, eventId: place.eventId ?? null, schoolId: place.schoolId ?? null };
  await withScope(org.scope, (tx) => tx.insert(memberships).values({ orgId: org.id, id: newId(), personId: person.id, ...g, createdAt: now() }));
  return scopeOf(org, person, [g], g.tournamentId);
}

export interface TestTournament {
  id: string;
  slug: string;
  /** The owner's scope, in this tournament. */
  scope: Scope;
}

export async function makeTournament(org: TestOrganization, over: Partial<typeof tournaments.$inferInsert> = {}): Promise<TestTournament> {
  const n = next();
  const id = newId();
  const slug = over.slug ?? `tournament-${n}`;
  await withScope(org.scope, (tx) =>
    tx.insert(tournaments).values({
      shortName: `Larkfold ${n}`,
      name: `Larkfold Tournament ${n}`,
      day: '2027-03-13',
      startsAt: '08:00',
      endsAt: '15:00',
      isPublished: true,
      createdAt: now(),
      ...over,
      orgId: org.id,
      id,
      slug,
    }),
  );
  return { id, slug, scope: scopeOf(org, org.owner, [...org.scope.grants], id) };
}

export async function makeDivision(org: TestOrganization, tournamentId: string, over: { name?: string; letter?: string } = {}): Promise<{ id: string; slug: string }> {
  const id = newId();
  const name = over.name ?? 'Senior';
  const slug = name.toLowerCase();
  await withScope(org.scope, (tx) =>
    tx.insert(divisions).values({ orgId: org.id, id, tournamentId, slug, name, letter: over.letter ?? name[0]!, shape: name === 'Junior' ? 'round' : 'square', position: next() }),
  );
  return { id, slug };
}

export async function makeSchool(org: TestOrganization, name?: string): Promise<{ id: string; name: string }> {
  const id = newId();
  const school = { id, name: name ?? `School ${next()}` };
  await withScope(org.scope, (tx) => tx.insert(schools).values({ orgId: org.id, ...school, createdAt: now() }));
  return school;
}

export async function makeTeam(
  org: TestOrganization,
  place: { tournamentId: string; divisionId: string; schoolId: string; number?: number; name?: string; state?: 'confirmed' | 'waiting' | 'withdrawn' },
): Promise<{ id: string; number: number; name: string; schoolId: string }> {
  const n = next();
  const team = { id: newId(), number: place.number ?? n, name: place.name ?? `Team ${n}`, schoolId: place.schoolId };
  await withScope(org.scope, (tx) =>
    tx.insert(teams).values({ orgId: org.id, tournamentId: place.tournamentId, divisionId: place.divisionId, state: place.state ?? 'confirmed', createdAt: now(), ...team }),
  );
  return team;
}

export async function makeEvent(
  org: TestOrganization,
  place: { tournamentId: string; divisionId: string; moduleKey?: string; name?: string; setup?: unknown; locked?: boolean; isTrial?: boolean },
): Promise<{ id: string; slug: string; name: string }> {
  const n = next();
  const id = newId();
  const name = place.name ?? `Event ${n}`;
  const slug = `event-${n}`;
  await withScope(org.scope, (tx) =>
    tx.insert(events).values({
      orgId: org.id,
      id,
      tournamentId: place.tournamentId,
      divisionId: place.divisionId,
      slug,
      name,
      moduleKey: place.moduleKey ?? 'written-test',
      isTrial: place.isTrial ?? false,
      setup: place.setup ?? null,
      setupVersion: place.setup === undefined ? 0 : 1,
      setupLockedAt: place.locked ? now() : null,
      setupLockedBy: place.locked ? org.owner.id : null,
      createdAt: now(),
    }),
  );
  return { id, slug, name };
}
