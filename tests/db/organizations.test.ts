import { sql } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import { useTestDatabase } from '../factories/database';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTournament, scopeOf, type TestOrganization, type TestPerson } from '../factories/world';
import { acceptInvitation, declineInvitation } from '~/features/organizations/commands/answer-invitation';
import { changeRole } from '~/features/organizations/commands/change-role';
import { createOrganization } from '~/features/organizations/commands/create-organization';
import { invitePerson } from '~/features/organizations/commands/invite-person';
import { removePerson } from '~/features/organizations/commands/remove-person';
import { removeRole } from '~/features/organizations/commands/remove-role';
import { resendInvitation } from '~/features/organizations/commands/resend-invitation';
import { restorePerson, suspendPerson } from '~/features/organizations/commands/suspend-person';
import { withdrawInvitation } from '~/features/organizations/commands/withdraw-invitation';
import { loadOffer, loadPeople, loadPerson } from '~/features/organizations/loaders';
import { createOrganizationInput } from '~/features/organizations/schema';
import type { RoleInput } from '~/features/organizations/schema';
import { deriveToken } from '~/server/authentication';
import { useClock } from '~/server/clock';
import { withPerson } from '~/server/database';
import { resolveRequest, type OrgInfo, type SignedIn } from '~/server/request-scope';
import type { Grant, Scope } from '~/server/scope';

const database = useTestDatabase();

const signedIn = (p: TestPerson, emailVerified = true): SignedIn => ({ personId: p.id, name: p.name, email: p.email, emailVerified, isOperator: false, sessionId: 'x' });
const stranger = (org: TestOrganization, p: TestPerson | null = null): Scope => scopeOf(org, p, []);
const to = (role: RoleInput['role'], place: Partial<RoleInput> = {}): RoleInput => ({ role, tournamentId: null, eventId: null, schoolId: null, ...place });

/** What the middleware would find for this person in the organization. */
async function grantsOf(org: TestOrganization, person: TestPerson): Promise<Grant[]> {
  const { rows } = await withPerson(null, (tx) => tx.execute<{ r: { grants: Grant[] } }>(sql`select resolve_scope(${org.slug}, null, ${person.id}::uuid) as r`));
  return rows[0]!.r.grants;
}

async function actions(org: TestOrganization): Promise<string[]> {
  const { rows } = await database.admin.query<{ action: string }>('select action from audit_entries where org_id = $1 order by at, id', [org.id]);
  return rows.map((r) => r.action);
}

describe('an organization', () => {
  const input = { name: 'Thistlemoor Regional', timeZone: 'America/Chicago', currency: 'USD', contact: '' };

  test('is founded by anybody, who then is its owner; its address is only given once', async () => {
    const founder = await makePerson();
    await createOrganization(signedIn(founder), { ...input, slug: 'thistlemoor' });
    const { org, scope } = await resolveRequest(null, 'thistlemoor');
    expect(org).toMatchObject({ name: 'Thistlemoor Regional', timeZone: 'America/Chicago', currency: 'USD' });
    expect(scope!.grants).toEqual([]);
    const made = { id: org!.id, slug: 'thistlemoor' } as TestOrganization;
    expect(await grantsOf(made, founder)).toMatchObject([{ role: 'owner', tournamentId: null }]);
    expect(await actions(made)).toEqual(['organization.created']);

    await expect(createOrganization(signedIn(await makePerson()), { ...input, slug: 'thistlemoor' })).rejects.toMatchObject({ code: 'bad-input', fields: [{ path: 'slug' }] });
    const { rows } = await database.admin.query(`select count(*)::int as n from organizations where slug = 'thistlemoor'`);
    expect(rows[0].n).toBe(1);
  });

  test('can’t take an address of Fairlead’s own, nor one that is no address', () => {
    for (const slug of ['api', 'Sign-In', 'new', 'account', 'a', 'two--dashes', '-x', 'ümlaut', 'a b']) {
      const parsed = createOrganizationInput.safeParse({ ...input, slug });
      expect(parsed.success, slug).toBe(false);
      expect(parsed.error!.issues.map((i) => i.path.join('.')), slug).toContain('slug');
    }
    expect(createOrganizationInput.safeParse({ ...input, slug: 'new-harbour' }).success).toBe(true);
    expect(createOrganizationInput.safeParse({ ...input, slug: 'x1', timeZone: 'Nowhere/Here' }).success).toBe(false);
  });
});

describe('an invitation', () => {
  test('gives the role when the address it was sent to accepts, once, and sends one mail without its secret in the queue', async () => {
    const org = await makeOrganization();
    const tournament = await makeTournament(org);
    const division = await makeDivision(org, tournament.id);
    const event = await makeEvent(org, { tournamentId: tournament.id, divisionId: division.id });
    const email = `New.Leader-${org.slug}@fairlead.test`;
    const { id } = await invitePerson(org.scope, { email, ...to('leader', { eventId: event.id, schoolId: 'ignored' }) });
    const token = deriveToken('invitation', id);
    const { rows: jobs } = await database.admin.query(`select data::text as data from pgboss.job where name = 'mail-invitation' and data->>'invitationId' = $1`, [id]);
    expect(jobs).toHaveLength(1);
    expect(jobs[0].data).not.toContain(token);
    expect(jobs[0].data.toLowerCase()).not.toContain(email.toLowerCase());
    const { rows: stored } = await database.admin.query('select token_hash from invitations where id = $1', [id]);
    expect(stored[0].token_hash).not.toBe(token);

    const info = (await resolveRequest(null, org.slug)).org as OrgInfo;
    expect(await loadOffer(info, stranger(org), null, token)).toMatchObject({ state: 'open', visitor: 'nobody', invitation: { email, invitedBy: org.owner.name } });

    // Somebody else's account, and the same address before it is confirmed.
    const other = await makePerson();
    await expect(acceptInvitation(stranger(org, other), signedIn(other), token)).rejects.toMatchObject({ code: 'not-allowed' });
    const invited = await makePerson({ email: email.toLowerCase() });
    await expect(acceptInvitation(stranger(org, invited), signedIn(invited, false), token)).rejects.toMatchObject({ code: 'not-allowed' });
    expect(await grantsOf(org, invited)).toEqual([]);

    const both = await Promise.allSettled([acceptInvitation(stranger(org, invited), signedIn(invited), token), acceptInvitation(stranger(org, invited), signedIn(invited), token)]);
    expect(both.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(both.find((r) => r.status === 'fulfilled')).toMatchObject({ value: { goTo: `/${org.slug}/${tournament.slug}/events/${event.slug}` } });
    expect(both.find((r) => r.status === 'rejected')).toMatchObject({ reason: { code: 'out-of-order' } });
    expect(await grantsOf(org, invited)).toMatchObject([{ role: 'leader', tournamentId: tournament.id, eventId: event.id, schoolId: null }]);
    expect(await actions(org)).toEqual(['invitation.sent', 'invitation.accepted']);
    expect(await loadOffer(info, stranger(org, invited), signedIn(invited), token)).toMatchObject({ state: 'accepted' });
  });

  test('adds a role to somebody who is here, and is refused when they hold or are offered it already', async () => {
    const org = await makeOrganization();
    const school = await makeSchool(org);
    const person = await makePerson();
    await grant(org, person, 'treasurer');
    await expect(invitePerson(org.scope, { email: person.email.toUpperCase(), ...to('treasurer') })).rejects.toMatchObject({ fields: [{ path: 'email' }] });
    await expect(invitePerson(org.scope, { email: person.email, ...to('coach') })).rejects.toMatchObject({ fields: [{ path: 'schoolId' }] });
    const offer = { email: person.email, ...to('coach', { schoolId: school.id }) };
    const twice = await Promise.allSettled([invitePerson(org.scope, offer), invitePerson(org.scope, offer)]);
    expect(twice.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected']);
    const sent = twice.find((r) => r.status === 'fulfilled') as PromiseFulfilledResult<{ id: string }>;
    expect(await acceptInvitation(stranger(org, person), signedIn(person), deriveToken('invitation', sent.value.id))).toMatchObject({ goTo: '/account' });
    expect((await grantsOf(org, person)).map((g) => g.role).sort()).toEqual(['coach', 'treasurer']);
  });

  test('stops working when it expires, is withdrawn or declined; sent again, an expired one works', async () => {
    const org = await makeOrganization();
    const person = await makePerson();
    const send = async () => (await invitePerson(org.scope, { email: person.email, ...to('treasurer') })).id;
    const accept = (id: string) => acceptInvitation(stranger(org, person), signedIn(person), deriveToken('invitation', id));

    const withdrawn = await send();
    await withdrawInvitation(org.scope, withdrawn);
    await expect(accept(withdrawn)).rejects.toMatchObject({ code: 'out-of-order' });
    await expect(resendInvitation(org.scope, withdrawn)).rejects.toMatchObject({ code: 'out-of-order' });

    const declined = await send();
    await declineInvitation(stranger(org, person), signedIn(person), deriveToken('invitation', declined));
    await expect(accept(declined)).rejects.toMatchObject({ code: 'out-of-order' });
    expect((await loadPeople(org.scope)).invitations).toMatchObject([{ id: declined, state: 'declined' }]);

    const expired = await send();
    const back = useClock({ now: () => new Date(Date.now() + 15 * 86_400_000) });
    try {
      await expect(accept(expired)).rejects.toThrow('expired');
      await resendInvitation(org.scope, expired);
      await accept(expired);
    } finally {
      back();
    }
    expect(await grantsOf(org, person)).toMatchObject([{ role: 'treasurer' }]);
  });

  test('is a director’s to send for leaders and volunteers of the own tournament and for coaches, and no further', async () => {
    const org = await makeOrganization();
    const [mine, theirs] = [await makeTournament(org), await makeTournament(org)];
    const division = await makeDivision(org, theirs.id);
    const event = await makeEvent(org, { tournamentId: theirs.id, divisionId: division.id });
    const school = await makeSchool(org);
    const director = await grant(org, await makePerson(), 'director', { tournamentId: mine.id });
    const invite = (input: RoleInput) => invitePerson(scopeOf(org, { id: director.actor.personId!, name: 'D', email: '' }, [...director.grants]), { email: 'somebody@fairlead.test', ...input });
    for (const input of [to('owner'), to('treasurer'), to('director', { tournamentId: mine.id }), to('volunteer', { tournamentId: theirs.id }), to('leader', { eventId: event.id })]) {
      await expect(invite(input), input.role).rejects.toMatchObject({ code: 'not-allowed' });
    }
    await invite(to('volunteer', { tournamentId: mine.id }));
    await invite(to('coach', { schoolId: school.id }));
    await expect(suspendPerson(director, org.owner.id)).rejects.toMatchObject({ code: 'not-allowed' });
  });

  test('of one organization can’t be answered, seen or changed from another', async () => {
    const [a, b] = [await makeOrganization(), await makeOrganization()];
    const person = await makePerson();
    const { id } = await invitePerson(a.scope, { email: person.email, ...to('treasurer') });
    await expect(acceptInvitation(stranger(b, person), signedIn(person), deriveToken('invitation', id))).rejects.toMatchObject({ code: 'not-found' });
    await expect(withdrawInvitation(b.scope, id)).rejects.toMatchObject({ code: 'not-found' });
    await expect(loadPerson(b.scope, a.owner.id)).rejects.toMatchObject({ code: 'not-found' });
    await expect(removePerson(b.scope, a.owner.id)).rejects.toMatchObject({ code: 'not-found' });
    const foreign = await makeTournament(a);
    await expect(invitePerson(b.scope, { email: 'x@fairlead.test', ...to('director', { tournamentId: foreign.id }) })).rejects.toMatchObject({ fields: [{ path: 'tournamentId' }] });
  });
});

describe('the last owner', () => {
  const roleOf = async (org: TestOrganization, person: TestPerson) => (await loadPerson(org.scope, person.id)).roles[0]!.id;

  test('can’t be removed, suspended or demoted; a suspended owner does not count', async () => {
    const org = await makeOrganization();
    const id = await roleOf(org, org.owner);
    await expect(removePerson(org.scope, org.owner.id)).rejects.toMatchObject({ code: 'out-of-order' });
    await expect(removeRole(org.scope, org.owner.id, id)).rejects.toMatchObject({ code: 'out-of-order' });
    await expect(changeRole(org.scope, org.owner.id, id, to('treasurer'))).rejects.toMatchObject({ code: 'out-of-order' });
    const second = await makePerson();
    await grant(org, second, 'owner');
    await suspendPerson(org.scope, second.id);
    await expect(removeRole(org.scope, org.owner.id, id)).rejects.toMatchObject({ code: 'out-of-order' });
    await restorePerson(org.scope, second.id);
    await changeRole(org.scope, org.owner.id, id, to('treasurer'));
    expect((await grantsOf(org, org.owner)).map((g) => g.role)).toEqual(['treasurer']);
  });

  test('stays, whoever acts at once: two owners never remove each other, nor do three leave nobody', async () => {
    for (let round = 0; round < 5; round++) {
      const org = await makeOrganization();
      const second = await makePerson();
      const theirs = await grant(org, second, 'owner');
      const [mine, own] = [await roleOf(org, org.owner), await roleOf(org, second)];
      const tries = await Promise.allSettled([
        removePerson(org.scope, second.id),
        removePerson(theirs, org.owner.id),
        suspendPerson(org.scope, second.id),
        removeRole(theirs, second.id, own),
        changeRole(org.scope, org.owner.id, mine, to('treasurer')),
      ]);
      expect(tries.some((t) => t.status === 'fulfilled')).toBe(true);
      const { rows } = await database.admin.query(`select count(*)::int as n from memberships where org_id = $1 and role = 'owner' and state = 'active'`, [org.id]);
      expect(rows[0].n).toBe(1);
    }
  });
});

test('a suspended person holds nothing, can’t get in by an invitation, and gets everything back', async () => {
  const org = await makeOrganization();
  const tournament = await makeTournament(org);
  const person = await makePerson();
  await grant(org, person, 'director', { tournamentId: tournament.id });
  const { id } = await invitePerson(org.scope, { email: person.email, ...to('treasurer') });
  await suspendPerson(org.scope, person.id);
  expect(await grantsOf(org, person)).toEqual([]);
  await expect(acceptInvitation(stranger(org, person), signedIn(person), deriveToken('invitation', id))).rejects.toMatchObject({ code: 'not-allowed' });
  await expect(invitePerson(org.scope, { email: person.email, ...to('volunteer', { tournamentId: tournament.id }) })).rejects.toMatchObject({ fields: [{ path: 'email' }] });
  await restorePerson(org.scope, person.id);
  expect(await grantsOf(org, person)).toMatchObject([{ role: 'director', tournamentId: tournament.id }]);

  await removePerson(org.scope, person.id);
  expect(await grantsOf(org, person)).toEqual([]);
  await expect(acceptInvitation(stranger(org, person), signedIn(person), deriveToken('invitation', id))).rejects.toMatchObject({ code: 'out-of-order' });
  expect(await actions(org)).toEqual(['invitation.sent', 'person.suspended', 'person.restored', 'person.removed']);
});
