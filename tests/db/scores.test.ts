import { beforeAll, describe, expect, test } from 'vitest';
import { useTestDatabase } from '../factories/database';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTeam, makeTournament, scopeOf, type TestOrganization, type TestTournament } from '../factories/world';
import { opticsShoot } from '~/event-modules/optics-shoot/module';
import { acceptEvent, handIn, takeBack } from '~/features/results/commands/hand-in';
import { releaseResults } from '~/features/results/commands/release-results';
import { settleFinding } from '~/features/results/commands/settle-finding';
import { assembleSnapshot } from '~/features/results/assembly';
import { snapshotMark } from '~/features/results/policy';
import { eventField, getRelease, tournamentFields } from '~/features/results/queries';
import { importPart, keepReading } from '~/features/scores/commands/keep-reading';
import type { KeepReading } from '~/features/scores/schema';
import { getEventBySlug } from '~/features/events/queries';
import { getTournament, listDivisions } from '~/features/tournaments/queries';
import { listRevisions } from '~/features/scores/queries';
import { withScope } from '~/server/database';
import { newId } from '~/server/ids';
import type { Scope } from '~/server/scope';

const database = useTestDatabase();
let org: TestOrganization;
let t: TestTournament;
let event: { id: string; slug: string };
let test1: { id: string; slug: string };
let teams: { id: string; number: number }[];
let leader: Scope;
let sequence = 0;

const run = (over: Record<string, unknown> = {}) => ({ reading: { kind: 'tape', wall: 'back', tape: '612.5' }, mirrorsUsed: 3, barriersUsed: 1, ...over });
const request = (over: Partial<KeepReading> = {}): KeepReading => ({
  teamId: teams[0]!.id, part: 'run', value: run(), baseVersion: 0, setupVersion: 1, key: newId(), device: newId(), sequence: ++sequence, reason: '', ...over,
});

beforeAll(async () => {
  org = await makeOrganization();
  t = await makeTournament(org);
  const d = await makeDivision(org, t.id);
  const s = await makeSchool(org);
  teams = [];
  for (let n = 1; n <= 4; n++) teams.push(await makeTeam(org, { tournamentId: t.id, divisionId: d.id, schoolId: s.id, number: n }));
  event = await makeEvent(org, { tournamentId: t.id, divisionId: d.id, moduleKey: 'optics-shoot', setup: opticsShoot.setup.defaults(), locked: true });
  test1 = await makeEvent(org, { tournamentId: t.id, divisionId: d.id, moduleKey: 'written-test', setup: { max: '100', groups: [], tieBreak: [] }, locked: true });
  leader = await grant(org, await makePerson(), 'leader', { tournamentId: t.id, eventId: event.id });
});

const history = (teamId: string) => withScope(org.scope, (tx) => listRevisions(tx, org.scope, event.id, teamId));

describe('keeping a reading', () => {
  test('a repeat of the same key gets the same answer, whatever happened since, and has no second effect', async () => {
    const first = request();
    const answer = await keepReading(leader, event.slug, first);
    expect(answer).toMatchObject({ version: 1 });
    expect(await keepReading(leader, event.slug, first)).toEqual(answer);
    expect(await keepReading(leader, event.slug, request({ value: run({ mirrorsUsed: 4 }), baseVersion: 1, reason: 'counted again' }))).toMatchObject({ version: 2 });
    expect(await keepReading(leader, event.slug, first)).toEqual(answer);
    expect((await history(teams[0]!.id)).map((r) => [r.version, (r.value as { mirrorsUsed: number }).mirrorsUsed, r.reason])).toEqual([[2, 4, 'counted again'], [1, 3, '']]);
    const { rows } = await database.admin.query(`select action, detail->>'version' as version from audit_entries where subject_id = $1 and action = 'score.kept' order by id`, [event.id]);
    expect(rows).toEqual([{ action: 'score.kept', version: '1' }, { action: 'score.kept', version: '2' }]);
  });

  test('twenty sends of one key at once are one reading', async () => {
    const one = request({ teamId: teams[1]!.id });
    const answers = await Promise.all(Array.from({ length: 20 }, () => keepReading(leader, event.slug, one)));
    expect(new Set(answers.map((a) => JSON.stringify(a))).size).toBe(1);
    expect(await history(teams[1]!.id)).toHaveLength(1);
  });

  test('a key may not be used for something else', async () => {
    const key = newId();
    await keepReading(leader, event.slug, request({ teamId: teams[2]!.id, key }));
    await expect(keepReading(leader, event.slug, request({ teamId: teams[2]!.id, key, value: run({ mirrorsUsed: 1 }) }))).rejects.toMatchObject({ code: 'key-reused' });
  });

  test('a version that has moved on gives both values to a person; the same value is agreement', async () => {
    const stale = keepReading(leader, event.slug, request({ teamId: teams[2]!.id, value: run({ mirrorsUsed: 5 }) }));
    await expect(stale).rejects.toMatchObject({ code: 'stale', extra: { current: { version: 1, value: { mirrorsUsed: 3 } } } });
    expect(await keepReading(leader, event.slug, request({ teamId: teams[2]!.id }))).toMatchObject({ version: 1, agreed: true });
  });

  test.each([
    [{ reading: { kind: 'tape', wall: 'back', tape: '1000.5' } }, 'value.reading.tape', /back wall is 1,000 mm long/],
    [{ mirrorsUsed: 6 }, 'value.mirrorsUsed', /up to 5 mirrors/],
    [{ barriersUsed: 2 }, 'value.barriersUsed', /1 barrier stands/],
    [{ reading: { kind: 'distance', mm: '1600.5' } }, 'value.reading.mm', /0 to 1,600/],
  ])('%j is refused beside its field', async (over, path, words) => {
    await expect(keepReading(leader, event.slug, request({ value: run(over) }))).rejects.toMatchObject({ code: 'bad-input', fields: [{ path, message: expect.stringMatching(words) }] });
  });

  test('is for the event’s own leader, and for nobody of another organization', async () => {
    await expect(keepReading(leader, test1.slug, request({ part: 'test', value: { points: '50' } }))).rejects.toMatchObject({ code: 'not-allowed' });
    const other = await makeOrganization();
    const theirs = await makeTournament(other);
    await expect(keepReading(theirs.scope, event.slug, request())).rejects.toMatchObject({ code: 'not-found' });
    // Even with every id right and a scope that names our tournament.
    await expect(keepReading(scopeOf(other, other.owner, [...other.scope.grants], t.id), event.slug, request())).rejects.toMatchObject({ code: 'not-found' });
  });

  test('typed under other rules, it is looked at again', async () => {
    await expect(keepReading(leader, event.slug, request({ setupVersion: 2 }))).rejects.toMatchObject({ code: 'conflict', extra: { setupVersion: 1 } });
  });

  test('a file is kept whole or not at all', async () => {
    const rows = teams.map((team, i) => ({ teamId: team.id, value: { points: String(20 + i) }, baseVersion: 0, key: newId(), sequence: ++sequence }));
    await expect(importPart(leader, event.slug, { part: 'test', setupVersion: 1, device: newId(), rows: [rows[0]!, { ...rows[1]!, value: { points: '31' } }] })).rejects.toMatchObject({ fields: [{ path: 'rows.1.value.points' }] });
    await keepReading(leader, event.slug, request({ part: 'test', teamId: teams[2]!.id, value: { points: '9' } }));
    await expect(importPart(leader, event.slug, { part: 'test', setupVersion: 1, device: newId(), rows })).rejects.toMatchObject({ code: 'stale', fields: [{ path: 'rows.2' }] });
    const { rows: kept } = await database.admin.query(`select team_id from readings where event_id = $1 and part = 'test'`, [event.id]);
    expect(kept).toEqual([{ team_id: teams[2]!.id }]);
    expect(await importPart(leader, event.slug, { part: 'test', setupVersion: 1, device: newId(), rows: rows.slice(0, 2) })).toEqual({ kept: 2 });
  });
});

describe('from hand-in to release', () => {
  const seenNow = async () =>
    withScope(t.scope, async (tx) => {
      const [tournament, divisions, events] = [await getTournament(tx, t.scope), await listDivisions(tx, t.scope, t.id), await tournamentFields(tx, t.scope, t.id)];
      return snapshotMark(assembleSnapshot({ dropWorst: tournament.dropWorst, advance: tournament.advance, perSchool: tournament.perSchool }, divisions, events));
    });

  test('what is missing is settled with a reason, then accepted, released, corrected', async () => {
    await handIn(leader, event.slug);
    await expect(keepReading(leader, event.slug, request({ teamId: teams[3]!.id }))).rejects.toMatchObject({ code: 'out-of-order' });
    await expect(acceptEvent(leader, event.slug)).rejects.toMatchObject({ code: 'not-allowed' });
    await expect(acceptEvent(t.scope, event.slug)).rejects.toMatchObject({ code: 'out-of-order' });
    const field = await withScope(t.scope, async (tx) => eventField(tx, t.scope, await getEventBySlug(tx, t.scope, event.slug)));
    expect(field.open.map((f) => [f.teamId, f.words])).toEqual([[teams[3]!.id, 'Nothing is kept.']]);
    const [open] = field.open;
    await expect(settleFinding(t.scope, event.slug, { teamId: open!.teamId, fingerprint: 'other', outcome: 'did-not-start', reason: 'x' })).rejects.toMatchObject({ code: 'conflict' });
    await settleFinding(t.scope, event.slug, { teamId: open!.teamId, fingerprint: open!.fingerprint, outcome: 'did-not-start', reason: 'never came to the room' });
    await acceptEvent(t.scope, event.slug);
    await expect(releaseResults(t.scope, 'America/Chicago', { publicLine: '', when: 'now', at: '', seen: '' })).rejects.toMatchObject({ code: 'out-of-order' });

    for (const [i, team] of teams.entries()) await keepReading(t.scope, test1.slug, { ...request({ teamId: team.id, part: 'test', value: { points: String(90 - i) } }) });
    await handIn(t.scope, test1.slug);
    await acceptEvent(t.scope, test1.slug);
    const first = await releaseResults(t.scope, 'America/Chicago', { publicLine: '', when: 'now', at: '', seen: await seenNow() });
    expect(first.number).toBe(1);
    const released = await withScope(t.scope, (tx) => getRelease(tx, t.scope, t.id, 'public'));
    const dns = released!.snapshot.divisions[0]!.rows.find((r) => r.number === 4)!;
    // Common practice: a team that did not start counts one more than the field.
    expect(dns.events.map((p) => [p.status, p.points])).toContainEqual(['dns', 5]);

    await takeBack(t.scope, test1.slug, 'a page was not marked');
    await keepReading(t.scope, test1.slug, request({ teamId: teams[2]!.id, part: 'test', value: { points: '99' }, baseVersion: 1, reason: 'page 3 marked' }));
    await handIn(t.scope, test1.slug);
    await acceptEvent(t.scope, test1.slug);
    await expect(releaseResults(t.scope, 'America/Chicago', { publicLine: '', when: 'now', at: '', seen: await seenNow() })).rejects.toMatchObject({ fields: [{ path: 'publicLine' }] });
    await expect(releaseResults(t.scope, 'America/Chicago', { publicLine: 'One test was marked again.', when: 'now', at: '', seen: 'older' })).rejects.toMatchObject({ code: 'conflict' });
    expect((await releaseResults(t.scope, 'America/Chicago', { publicLine: 'One test was marked again.', when: 'now', at: '', seen: await seenNow() })).number).toBe(2);
    // The first stays as it was.
    const before = await withScope(t.scope, (tx) => getRelease(tx, t.scope, t.id, 1));
    expect(before!.snapshot).toEqual(released!.snapshot);
    const after = await withScope(t.scope, (tx) => getRelease(tx, t.scope, t.id, 'newest'));
    const place = (r: typeof after) => r!.snapshot.divisions[0]!.rows.find((x) => x.number === 3)!.events.find((p) => p.eventId === test1.id)!.place;
    expect([place(before), place(after)]).toEqual([3, 1]);
  });
});
