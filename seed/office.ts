/** What the people of the demo do, each by the product's own commands and with their own rights. */
import { deriveToken } from '../src/server/authentication';
import { useClock } from '../src/server/clock';
import { withScope } from '../src/server/database';
import { newId } from '../src/server/ids';
import type { SignedIn } from '../src/server/request-scope';
import { makeScope, type Grant, type Role, type Scope } from '../src/server/scope';
import { momentAt } from '../src/domain/time';
import { acceptInvitation } from '../src/features/organizations/commands/answer-invitation';
import { createOrganization } from '../src/features/organizations/commands/create-organization';
import { invitePerson } from '../src/features/organizations/commands/invite-person';
import { addresses, memberships, organizations } from '../src/features/organizations/tables';
import { and, eq } from 'drizzle-orm';
import { withPerson } from '../src/server/database';

/** Do something as if it were that moment. */
export async function at<T>(moment: Date, work: () => Promise<T>): Promise<T> {
  const back = useClock({ now: () => moment });
  try {
    return await work();
  } finally {
    back();
  }
}

/** An office and who acts in it. */
export class Office {
  constructor(
    readonly id: string,
    readonly slug: string,
    readonly zone: string,
    readonly owner: SignedIn,
  ) {}

  /** Found it, and mark it as the demo's. */
  static async found(owner: SignedIn, input: { name: string; slug: string; timeZone: string; currency: string; contact: string }): Promise<Office> {
    const { slug } = await createOrganization(owner, input);
    const [row] = await withPerson(null, (tx) => tx.select({ orgId: addresses.orgId }).from(addresses).where(eq(addresses.slug, slug)));
    const office = new Office(row!.orgId, slug, input.timeZone, owner);
    await withScope(await office.as(owner), (tx) => tx.update(organizations).set({ isDemo: true }).where(eq(organizations.orgId, office.id)));
    return office;
  }

  /** The scope in which somebody works, with the grants that they really have. */
  async as(person: SignedIn, tournamentId: string | null = null): Promise<Scope> {
    const bare = (grants: Grant[]) =>
      makeScope({ orgId: this.id, orgSlug: this.slug, actor: { kind: 'person', personId: person.personId, name: person.name }, grants, tournamentId });
    const grants = await withScope(bare([]), (tx) =>
      tx
        .select({ role: memberships.role, tournamentId: memberships.tournamentId, eventId: memberships.eventId, schoolId: memberships.schoolId })
        .from(memberships)
        .where(and(eq(memberships.orgId, this.id), eq(memberships.personId, person.personId), eq(memberships.state, 'active'))),
    );
    return bare(grants);
  }

  /** Invite somebody by mail; they accept. */
  async enlist(person: SignedIn, role: Role, place: { tournamentId?: string; eventId?: string; schoolId?: string } = {}): Promise<void> {
    const { id } = await invitePerson(await this.as(this.owner), {
      email: person.email,
      role,
      tournamentId: place.tournamentId ?? null,
      eventId: place.eventId ?? null,
      schoolId: place.schoolId ?? null,
    });
    await acceptInvitation(await this.as(person), person, deriveToken('invitation', id));
  }

  /** A moment on a day at a time of the office's wall clock. */
  moment(day: string, wall: string): Date {
    return momentAt(day, wall, this.zone);
  }
}

/** A device of the demo, whose sequence goes up. */
export class Device {
  readonly id = newId();
  #sequence = 0;
  next(): number {
    return ++this.#sequence;
  }
}
