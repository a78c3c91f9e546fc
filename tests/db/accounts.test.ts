import { afterEach, beforeAll, describe, expect, test } from 'vitest';
import { useTestDatabase } from '../factories/database';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTeam, makeTournament, type TestPerson } from '../factories/world';
import { changeAddress } from '~/features/accounts/commands/change-address';
import { changePassword } from '~/features/accounts/commands/change-password';
import { endOneSession } from '~/features/accounts/commands/end-sessions';
import { requestReset } from '~/features/accounts/commands/request-reset';
import { resetPassword } from '~/features/accounts/commands/reset-password';
import { signIn } from '~/features/accounts/commands/sign-in';
import { signUp } from '~/features/accounts/commands/sign-up';
import { verifyAddress } from '~/features/accounts/commands/verify-address';
import { LIMITS, RESET_MINUTES, VERIFY_HOURS } from '~/features/accounts/constants';
import { loadAccount, loadBelongings, loadLanding, loadVerifyLink } from '~/features/accounts/loaders';
import { countTry } from '~/features/accounts/queries';
import { createSession, hashPassword, validateSession } from '~/server/authentication';
import { useClock } from '~/server/clock';
import type { Endpoint } from '~/server/endpoint';
import { newId } from '~/server/ids';
import { ABSOLUTE_DAYS, deriveToken, hashToken, IDLE_DAYS } from '~/server/tokens';
import type { SignedIn } from '~/server/request-scope';
import { POST as postReset } from '~/pages/api/account/reset/index';
import { POST as postSignUp } from '~/pages/api/account/sign-up';

const database = useTestDatabase();
const GOOD = 'walnut grey teapot sky';
const MINUTE = 60_000;
const DAY = 86_400_000;

let hash: string;
beforeAll(async () => {
  hash = await hashPassword(GOOD);
});
let restore: (() => void) | null = null;
afterEach(() => {
  restore?.();
  restore = null;
});
/** The clock so many milliseconds from the true one. */
function at(offset: number): void {
  restore?.();
  restore = useClock({ now: () => new Date(Date.now() + offset) });
}

let address = 0;
/** A client address nobody else uses. */
const client = () => `203.0.113.${++address}`;
const email = () => `person-${newId().slice(-8)}@fairlead.test`;
const signedIn = (person: TestPerson, sessionId = ''): SignedIn => ({ personId: person.id, name: person.name, email: person.email, emailVerified: true, isOperator: false, sessionId });

/** Jobs of a queue, each with its data. */
async function jobs(queue: string): Promise<Record<string, string>[]> {
  const { rows } = await database.admin.query(`select data from pgboss.job where name = $1 order by created_on`, [queue]);
  return rows.map((r) => r.data);
}
async function codeOf(personId: string, purpose: string): Promise<string> {
  const { rows } = await database.admin.query(`select id from one_time_codes where person_id = $1 and purpose = $2 and used_at is null order by created_at desc limit 1`, [personId, purpose]);
  return rows[0].id;
}
async function personOf(mail: string): Promise<{ id: string; verified: boolean }> {
  const { rows } = await database.admin.query(`select id, email_verified_at is not null as verified from people where email = $1`, [mail]);
  return rows[0];
}

/** What a browser is answered, less what differs between any two requests. */
async function answer(post: Endpoint, body: unknown): Promise<unknown> {
  const url = new URL('http://127.0.0.1:4999/api/account');
  const request = new Request(url, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });
  const locals = { requestId: newId(), clientAddress: client(), person: null, org: null, tournament: null, scope: null };
  const response = (await post({ request, url, params: {}, locals, routePattern: '' } as never)) as Response;
  const cookies = response.headers.getSetCookie().map((c) => c.replace(/=[^;]+/, (value) => `=${value.length}`));
  return { status: response.status, body: await response.json(), cookies, type: response.headers.get('content-type') };
}

describe('nobody learns who has an account', () => {
  test('signing up is answered the same for a known and an unknown address, and only the mail differs', async () => {
    const known = await makePerson({ email: email(), passwordHash: hash });
    const fresh = email();
    const before = await jobs('mail-already');
    const first = await answer(postSignUp, { name: 'A', email: fresh, password: GOOD });
    const second = await answer(postSignUp, { name: 'A', email: known.email, password: 'other words entirely here' });
    expect(second).toEqual(first);
    expect(first).toMatchObject({ status: 200, body: { goTo: '/check-mail' } });
    expect((await jobs('mail-already')).slice(before.length)).toEqual([{ personId: known.id }]);
    // The known account is as it was.
    expect(await signIn({ email: known.email, password: GOOD, goesTo: '' }, client())).toEqual({ kind: 'in', personId: known.id });
    expect(await personOf(fresh)).toMatchObject({ verified: false });
  });

  test('so is asking for a new password', async () => {
    const known = await makePerson({ email: email(), passwordHash: hash });
    const before = await jobs('mail-reset');
    expect(await answer(postReset, { email: known.email })).toEqual(await answer(postReset, { email: email() }));
    expect((await jobs('mail-reset')).length).toBe(before.length + 1);
  });

  test('and so is signing in, in about the same time', async () => {
    const known = await makePerson({ email: email(), passwordHash: hash });
    const refusals = new Set<string>();
    // The quickest of a few: whatever else the machine does only makes a try slower.
    const quickest = async (mail: () => string) => {
      let ms = Infinity;
      for (let i = 0; i < 4; i++) {
        const started = performance.now();
        await signIn({ email: mail(), password: 'not the password', goesTo: '' }, client()).catch((error: Error) => refusals.add(error.message));
        ms = Math.min(ms, performance.now() - started);
      }
      return ms;
    };
    await quickest(email);
    const [there, nowhere] = [await quickest(() => known.email), await quickest(email)];
    expect(refusals.size).toBe(1);
    expect(nowhere).toBeGreaterThan(there / 2);
  });
});

describe('tries are counted before a password is looked at', () => {
  test('per account, whatever the client; the right password is refused too until the time is over', async () => {
    const person = await makePerson({ email: email(), passwordHash: hash });
    for (let i = 0; i < LIMITS['sign-in:account'].most; i++) {
      await expect(signIn({ email: person.email.toUpperCase(), password: 'wrong', goesTo: '' }, client())).rejects.toMatchObject({ code: 'bad-input' });
    }
    await expect(signIn({ email: person.email, password: GOOD, goesTo: '' }, client())).rejects.toMatchObject({ code: 'too-many' });
    at((LIMITS['sign-in:account'].minutes + 1) * MINUTE);
    await expect(signIn({ email: person.email, password: GOOD, goesTo: '' }, client())).resolves.toMatchObject({ kind: 'in' });
  });

  test('per client address, whatever the account; a try that was right is not counted', async () => {
    const person = await makePerson({ email: email(), passwordHash: hash });
    const here = client();
    for (let i = 0; i < LIMITS['sign-in:address'].most - 2; i++) await countTry('sign-in:address', here, '');
    for (let i = 0; i < 4; i++) await expect(signIn({ email: person.email, password: GOOD, goesTo: '' }, here)).resolves.toMatchObject({ kind: 'in' });
    for (let i = 0; i < 2; i++) await expect(signIn({ email: email(), password: 'wrong', goesTo: '' }, here)).rejects.toMatchObject({ code: 'bad-input' });
    await expect(signIn({ email: person.email, password: GOOD, goesTo: '' }, here)).rejects.toMatchObject({ code: 'too-many' });
    await expect(signIn({ email: person.email, password: GOOD, goesTo: '' }, client())).resolves.toMatchObject({ kind: 'in' });
  });

  test('mails per address', async () => {
    const mail = email();
    for (let i = 0; i < LIMITS['mail:account'].most; i++) await requestReset(mail, client());
    await expect(requestReset(mail, client())).rejects.toMatchObject({ code: 'too-many' });
    await expect(signUp({ name: 'A', email: mail, password: GOOD, goesTo: '' }, client())).rejects.toMatchObject({ code: 'too-many' });
  });
});

describe('confirming an address', () => {
  test('works once, of two at the same time one, and takes the person where they were going', async () => {
    const mail = email();
    const { codeId } = await signUp({ name: 'A', email: mail, password: GOOD, goesTo: '/office/join/x' }, client());
    const token = deriveToken('verify', codeId!);
    // Looking uses nothing up.
    for (let i = 0; i < 3; i++) expect(await loadVerifyLink(token, codeId)).toMatchObject({ email: mail, isHere: true });
    const results = await Promise.allSettled([verifyAddress(token, { startedCodeId: codeId }, client()), verifyAddress(token, { startedCodeId: codeId }, client())]);
    expect(results.map((r) => r.status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(results.find((r) => r.status === 'fulfilled')).toMatchObject({ value: { goesTo: '/office/join/x' } });
    await expect(verifyAddress(token, { startedCodeId: codeId }, client())).rejects.toMatchObject({ code: 'out-of-order' });
    expect(await personOf(mail)).toMatchObject({ verified: true });
  });

  test('not after its time', async () => {
    const mail = email();
    const { codeId } = await signUp({ name: 'A', email: mail, password: GOOD, goesTo: '' }, client());
    at(VERIFY_HOURS * 60 * MINUTE + 1000);
    await expect(verifyAddress(deriveToken('verify', codeId!), { startedCodeId: codeId }, client())).rejects.toMatchObject({ code: 'out-of-order' });
    expect(await loadVerifyLink(deriveToken('verify', codeId!), codeId)).toBeNull();
  });

  test('on another device only with the password, so that nobody confirms an account made by somebody else', async () => {
    const mail = email();
    // Somebody signs up with another's address, who then signs up as well, and then somebody again.
    const stranger = await signUp({ name: 'S', email: mail, password: 'the stranger’s own words', goesTo: '' }, client());
    const owner = await signUp({ name: 'O', email: mail, password: GOOD, goesTo: '' }, client());
    await expect(verifyAddress(deriveToken('verify', stranger.codeId!), { startedCodeId: owner.codeId }, client())).rejects.toMatchObject({ code: 'out-of-order' });
    const again = await signUp({ name: 'S', email: mail, password: 'the stranger’s own words', goesTo: '' }, client());
    const newest = deriveToken('verify', again.codeId!);
    await expect(verifyAddress(newest, { startedCodeId: owner.codeId }, client())).rejects.toMatchObject({ fields: [{ path: 'password' }] });
    await expect(verifyAddress(newest, { startedCodeId: owner.codeId, password: GOOD }, client())).rejects.toMatchObject({ fields: [{ path: 'password' }] });
    expect(await personOf(mail)).toMatchObject({ verified: false });
    // The way out: a new password by mail.
    const { id } = await personOf(mail);
    at(61 * MINUTE);
    await requestReset(mail, client());
    await resetPassword(deriveToken('reset', await codeOf(id, 'reset')), GOOD, client());
    expect(await signIn({ email: mail, password: GOOD, goesTo: '' }, client())).toEqual({ kind: 'in', personId: id });
    await expect(signIn({ email: mail, password: 'the stranger’s own words', goesTo: '' }, client())).rejects.toMatchObject({ code: 'bad-input' });
  });

  test('is asked for when somebody signs in before it, and only with the right password', async () => {
    const mail = email();
    const { codeId } = await signUp({ name: 'A', email: mail, password: GOOD, goesTo: '' }, client());
    const before = (await jobs('mail-verify')).length;
    await expect(signIn({ email: mail, password: 'wrong', goesTo: '' }, client())).rejects.toMatchObject({ code: 'bad-input' });
    expect((await jobs('mail-verify')).length).toBe(before);
    expect(await signIn({ email: mail, password: GOOD, goesTo: '' }, client())).toEqual({ kind: 'unconfirmed', codeId, email: mail });
    expect((await jobs('mail-verify')).length).toBe(before + 1);
  });
});

describe('passwords', () => {
  test.each([
    ['password1234', 'widely known'],
    ['Baseball-2026!', 'widely known'],
    ['abcabcabcabc', 'pattern'],
    ['123456789012', 'pattern'],
    ['fairlead 2026', 'name of this service'],
    ['Quillon.Ashby', 'name'],
    ['QuillonAshby99', 'name'],
  ])('%s is refused', async (password, words) => {
    await expect(signUp({ name: 'Quillon Ashby', email: 'quillon.ashby@fairlead.test', password, goesTo: '' }, client())).rejects.toMatchObject({
      fields: [{ path: 'password', message: expect.stringContaining(words) }],
    });
  });

  test('a new one by mail ends every session and every other link, once and in time', async () => {
    const person = await makePerson({ email: email(), passwordHash: hash });
    const sessions = [await createSession(person.id, 'One'), await createSession(person.id, 'Two')];
    await changeAddress(signedIn(person, sessions[0]!.id), { email: email(), present: GOOD });
    const change = deriveToken('change', await codeOf(person.id, 'change'));
    await requestReset(person.email, client());
    const token = deriveToken('reset', await codeOf(person.id, 'reset'));
    await expect(resetPassword(token, 'password1234', client())).rejects.toMatchObject({ code: 'bad-input' });
    await resetPassword(token, 'lantern over the marsh', client());
    for (const s of sessions) expect((await validateSession(s.id)).session).toBeNull();
    await expect(resetPassword(token, 'yet another long one', client())).rejects.toMatchObject({ code: 'out-of-order' });
    await expect(verifyAddress(change, { startedCodeId: null }, client())).rejects.toMatchObject({ code: 'out-of-order' });
    await expect(signIn({ email: person.email, password: GOOD, goesTo: '' }, client())).rejects.toMatchObject({ code: 'bad-input' });
    await requestReset(person.email, client());
    const late = deriveToken('reset', await codeOf(person.id, 'reset'));
    at(RESET_MINUTES * MINUTE + 1000);
    await expect(resetPassword(late, GOOD, client())).rejects.toMatchObject({ code: 'out-of-order' });
  });

  test('a change asks the present one and ends the other sessions, not this one', async () => {
    const person = await makePerson({ email: email(), passwordHash: hash });
    const [here, there] = [await createSession(person.id, 'Here'), await createSession(person.id, 'There')];
    await expect(changePassword(signedIn(person, here.id), { present: 'wrong', password: 'lantern over the marsh' })).rejects.toMatchObject({ fields: [{ path: 'present' }] });
    expect(await changePassword(signedIn(person, here.id), { present: GOOD, password: 'lantern over the marsh' })).toEqual({ ended: 1 });
    expect((await validateSession(here.id)).session).not.toBeNull();
    expect((await validateSession(there.id)).session).toBeNull();
  });
});

describe('sessions', () => {
  test('end when idle, move on with use, and end for good at the absolute limit', async () => {
    const person = await makePerson();
    const idle = await createSession(person.id, 'Idle');
    const busy = await createSession(person.id, 'Busy');
    // Lucia reads the machine's clock for the idle limit, so what it wrote is moved instead.
    await database.admin.query(`update sessions set expires_at = expires_at - make_interval(days => $2) where id = $1`, [hashToken(idle.id), IDLE_DAYS]);
    expect((await validateSession(idle.id)).session).toBeNull();
    await database.admin.query(`update sessions set expires_at = now() + interval '1 day' where id = $1`, [hashToken(busy.id)]);
    expect((await validateSession(busy.id)).cookie).not.toBeNull();
    const { rows } = await database.admin.query(`select expires_at from sessions where id = $1`, [hashToken(busy.id)]);
    expect(rows[0].expires_at.getTime()).toBeGreaterThan(Date.now() + (IDLE_DAYS - 1) * DAY);
    at(ABSOLUTE_DAYS * DAY - MINUTE);
    await database.admin.query(`update sessions set expires_at = now() + interval '90 days' where id = $1`, [hashToken(busy.id)]);
    expect((await validateSession(busy.id)).session).not.toBeNull();
    at(ABSOLUTE_DAYS * DAY + MINUTE);
    expect((await validateSession(busy.id)).session).toBeNull();
  });

  test('are listed to their owner, and nobody ends another’s', async () => {
    const [a, b] = [await makePerson(), await makePerson()];
    const here = await createSession(a.id, 'Firefox on Windows');
    const other = await createSession(b.id, 'Safari on iPhone');
    const page = await loadAccount(signedIn(a, here.id));
    expect(page.sessions).toMatchObject([{ device: 'Firefox on Windows', isThis: true }]);
    await expect(endOneSession(signedIn(a, here.id), hashToken(other.id))).rejects.toMatchObject({ code: 'not-found' });
    expect((await validateSession(other.id)).session).not.toBeNull();
  });
});

describe('another address', () => {
  test('changes when the link is opened, and never to one that another account has', async () => {
    const [person, other] = [await makePerson({ email: email(), passwordHash: hash }), await makePerson({ email: email() })];
    const wanted = email();
    await changeAddress(signedIn(person), { email: wanted, present: GOOD });
    expect(await personOf(wanted)).toBeUndefined();
    expect(await verifyAddress(deriveToken('change', await codeOf(person.id, 'change')), { startedCodeId: null }, client())).toMatchObject({ personId: person.id, changed: true });
    expect(await personOf(wanted)).toMatchObject({ id: person.id });
    const before = (await jobs('mail-verify')).length;
    await changeAddress({ ...signedIn(person), email: wanted }, { email: other.email, present: GOOD });
    expect((await jobs('mail-verify')).length).toBe(before);
  });
});

describe('where somebody works', () => {
  test('each role leads to its place, of this person alone; with one place signing in goes right there', async () => {
    const [a, b] = [await makeOrganization(), await makeOrganization()];
    const old = await makeTournament(b, { day: '2026-03-14' });
    const t = await makeTournament(b, { day: '2027-03-13' });
    const [division, oldDivision] = [await makeDivision(b, t.id), await makeDivision(b, old.id)];
    const event = await makeEvent(b, { tournamentId: t.id, divisionId: division.id });
    const school = await makeSchool(b);
    for (const [tournamentId, divisionId] of [[old.id, oldDivision.id], [t.id, division.id]] as const) await makeTeam(b, { tournamentId, divisionId, schoolId: school.id });
    const person = await makePerson();
    await grant(b, person, 'coach', { schoolId: school.id });
    expect(await loadLanding(person.id)).toBe(`/${b.slug}/${t.slug}/school`);
    await grant(b, person, 'director', { tournamentId: t.id });
    await grant(b, person, 'leader', { tournamentId: t.id, eventId: event.id });
    await grant(b, person, 'volunteer', { tournamentId: t.id });
    await grant(a, person, 'treasurer');
    expect(await loadLanding(person.id)).toBe('/account');
    const found = await loadBelongings(signedIn(person));
    expect(found.find((x) => x.slug === a.slug)?.places.map((p) => p.href)).toEqual([`/${a.slug}/office`]);
    expect(found.find((x) => x.slug === b.slug)?.places.map((p) => p.href)).toEqual([
      `/${b.slug}/${t.slug}/school`,
      `/${b.slug}/${t.slug}/overview`,
      `/${b.slug}/${t.slug}/events/${event.slug}`,
      `/${b.slug}/${t.slug}`,
    ]);
    expect(await loadBelongings(signedIn(await makePerson()))).toEqual([]);
  });
});
