import { beforeAll, describe, expect, test } from 'vitest';
import { useTestDatabase } from '../factories/database';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTeam, makeTournament, scopeOf, type TestOrganization, type TestTournament } from '../factories/world';
import { addTeam, changeTeam } from '~/features/entries/commands/keep-team';
import { restoreTeam, withdrawTeam } from '~/features/entries/commands/withdraw-team';
import { addEvent } from '~/features/events/commands/add-event';
import { assignLeader, unassignLeader } from '~/features/events/commands/assign-leader';
import { removeEvent } from '~/features/events/commands/change-event';
import { keepReading } from '~/features/scores/commands/keep-reading';
import { addSchool } from '~/features/schools/commands/keep-school';
import { addDivision } from '~/features/tournaments/commands/add-division';
import { removeDivision } from '~/features/tournaments/commands/change-division';
import { createTournament } from '~/features/tournaments/commands/create-tournament';
import { updateTournament } from '~/features/tournaments/commands/update-tournament';
import { loadOverview, loadProgramme } from '~/features/tournaments/loaders';
import { dayPlanInput } from '~/features/tournaments/schema';
import { newId } from '~/server/ids';
import type { Scope } from '~/server/scope';

const database = useTestDatabase();
let org: TestOrganization;
let t: TestTournament;
let director: Scope;
let coach: Scope;
let other: TestOrganization;
let theirs: TestTournament;
const particulars = { name: 'Reedmoor Tournament', shortName: 'Reedmoor', day: '2027-04-10', startsAt: '08:00', endsAt: '15:00', venue: '', venueNote: '', summary: '' };

beforeAll(async () => {
  org = await makeOrganization();
  t = await makeTournament(org);
  director = await grant(org, await makePerson(), 'director', { tournamentId: t.id });
  const school = await makeSchool(org);
  coach = { ...(await grant(org, await makePerson(), 'coach', { schoolId: school.id })), tournamentId: t.id } as Scope;
  other = await makeOrganization();
  theirs = await makeTournament(other);
});

describe('setting a tournament up', () => {
  test('an owner adds tournaments, a director runs only the one given', async () => {
    await expect(createTournament(director, { ...particulars, slug: 'reedmoor' })).rejects.toMatchObject({ code: 'not-allowed' });
    await createTournament(org.scope, { ...particulars, slug: 'reedmoor' });
    await expect(createTournament(org.scope, { ...particulars, slug: 'reedmoor' })).rejects.toMatchObject({ fields: [{ path: 'slug' }] });
    // The same address in another organization is another tournament.
    await createTournament(other.scope, { ...particulars, slug: 'reedmoor' });
    const second = await makeTournament(org);
    await expect(updateTournament({ ...director, tournamentId: second.id } as Scope, { venue: 'Hall' })).rejects.toMatchObject({ code: 'not-allowed' });
    await expect(updateTournament(coach, { venue: 'Hall' })).rejects.toMatchObject({ code: 'not-allowed' });
  });

  test('a plan passes over blank lines, with and without script, and names the line that is wrong', () => {
    const line = { label: 'Block 1', from: '09:00', to: '09:50' };
    expect(dayPlanInput.parse({ lines: [line, { label: '', from: '', to: '' }] })).toEqual({ lines: [line] });
    expect(dayPlanInput.parse({ lines: { 0: line, 1: { label: ' ', from: '', to: '' } } })).toEqual({ lines: [line] });
    expect(dayPlanInput.parse({})).toEqual({ lines: [] });
    expect(dayPlanInput.safeParse({ lines: [{ ...line, to: '08:00' }] }).error?.issues[0]?.path).toEqual(['lines', 0, 'to']);
  });

  test('ids of another organization are as if they were not there', async () => {
    const d = await makeDivision(org, t.id, { name: 'Junior', letter: 'J' });
    const foreignDivision = await makeDivision(other, theirs.id);
    const foreignSchool = await makeSchool(other);
    const school = await makeSchool(org);
    const foreignTeam = await makeTeam(other, { tournamentId: theirs.id, divisionId: foreignDivision.id, schoolId: foreignSchool.id });
    await expect(addTeam(director, { divisionId: foreignDivision.id, schoolId: school.id, name: 'A' })).rejects.toMatchObject({ code: 'not-found' });
    await expect(addTeam(director, { divisionId: d.id, schoolId: foreignSchool.id, name: 'A' })).rejects.toMatchObject({ code: 'not-found' });
    await expect(withdrawTeam(director, foreignTeam.id)).rejects.toMatchObject({ code: 'not-found' });
    await expect(addEvent(director, { name: 'Pond Life', moduleKey: 'written-test', divisionIds: [foreignDivision.id], room: '', isTrial: false })).rejects.toMatchObject({ code: 'not-found' });
    await expect(removeDivision(director, foreignDivision.id)).rejects.toMatchObject({ code: 'not-found' });
    // A scope that names their tournament sees nothing of it through our organization.
    await expect(loadProgramme(scopeOf(org, org.owner, [...org.scope.grants], theirs.id))).rejects.toMatchObject({ code: 'not-found' });
  });

  test('teams entered at once get different numbers, and a number is given once a division', async () => {
    const d = await makeDivision(org, t.id, { name: 'Middle', letter: 'M' });
    const school = await makeSchool(org);
    const made = await Promise.all(Array.from({ length: 12 }, (_, i) => addTeam(director, { divisionId: d.id, schoolId: school.id, name: `Team ${i}` })));
    expect(made.map((m) => m.number).sort((a, b) => a - b)).toEqual(Array.from({ length: 12 }, (_, i) => i + 1));
    await expect(addTeam(director, { divisionId: d.id, schoolId: school.id, name: 'Late', number: 3 })).rejects.toMatchObject({ fields: [{ path: 'number' }] });
    await expect(changeTeam(director, made[0]!.id, { name: 'X', number: made[1]!.number })).rejects.toMatchObject({ fields: [{ path: 'number' }] });
    await withdrawTeam(director, made[0]!.id);
    await expect(withdrawTeam(director, made[0]!.id)).rejects.toMatchObject({ code: 'out-of-order' });
    await restoreTeam(director, made[0]!.id);
    await expect(removeDivision(director, d.id)).rejects.toMatchObject({ code: 'conflict' });
    await expect(addDivision(director, { name: 'Other', letter: 'M', shape: 'round' })).rejects.toMatchObject({ fields: [{ path: 'letter' }] });
    await expect(addSchool(coach, { name: 'Mine', town: '' })).rejects.toMatchObject({ code: 'not-allowed' });
  });

  test('an event comes once a division, gets its leader from the organization, and stays once something is kept', async () => {
    const own = await makeTournament(org);
    const boss = { ...org.scope, tournamentId: own.id } as Scope;
    const a = await makeDivision(org, own.id, { name: 'Junior', letter: 'J' });
    const b = await makeDivision(org, own.id, { name: 'Senior', letter: 'S' });
    const made = await addEvent(boss, { name: 'Optics Shoot', moduleKey: 'optics-shoot', divisionIds: [a.id, b.id], room: 'Gym', isTrial: false });
    expect(made.map((m) => m.slug)).toEqual(['optics-shoot-junior', 'optics-shoot-senior']);
    await expect(addEvent(boss, { name: 'Optics Shoot', moduleKey: 'optics-shoot', divisionIds: [b.id], room: '', isTrial: false })).rejects.toMatchObject({ code: 'bad-input' });
    const outsider = await makePerson();
    await expect(assignLeader(boss, made[0]!.slug, outsider.id)).rejects.toMatchObject({ fields: [{ path: 'personId' }] });
    await assignLeader(boss, made[0]!.slug, org.owner.id);
    await expect(assignLeader(boss, made[0]!.slug, org.owner.id)).rejects.toMatchObject({ fields: [{ path: 'personId' }] });
    await unassignLeader(boss, made[0]!.slug, org.owner.id);

    const school = await makeSchool(org);
    const team = await makeTeam(org, { tournamentId: own.id, divisionId: b.id, schoolId: school.id, number: 1 });
    const gone = await makeTeam(org, { tournamentId: own.id, divisionId: b.id, schoolId: school.id, number: 2 });
    const test1 = await makeEvent(org, { tournamentId: own.id, divisionId: b.id, setup: { max: '100', groups: [], tieBreak: [] }, locked: true });
    for (const x of [team, gone]) {
      await keepReading(boss, test1.slug, { teamId: x.id, part: 'test', value: { points: '50' }, baseVersion: 0, setupVersion: 1, key: newId(), device: newId(), sequence: 1, reason: '' });
    }
    await withdrawTeam(boss, gone.id);
    const overview = await loadOverview(boss);
    expect(overview.events.find((e) => e.event.id === test1.id)).toMatchObject({ teams: 1, complete: 1, kept: 1, expected: 1 });
    expect(overview.events.find((e) => e.event.slug === 'optics-shoot-senior')).toMatchObject({ teams: 1, kept: 0, expected: 2 });
    await expect(removeEvent(boss, test1.slug)).rejects.toMatchObject({ code: 'conflict' });
    await removeEvent(boss, 'optics-shoot-junior');
    const { rows } = await database.admin.query(`select action from audit_entries where tournament_id = $1 and action like 'event.%' order by id`, [own.id]);
    expect(rows.map((r: { action: string }) => r.action)).toEqual(['event.added', 'event.added', 'event.removed']);
  });

  test('a draft is seen by who directs it, and by nobody else', async () => {
    const draft = await makeTournament(org, { isPublished: false });
    await expect(loadProgramme(scopeOf(org, null, [], draft.id))).rejects.toMatchObject({ code: 'not-found' });
    await expect(loadProgramme({ ...coach, tournamentId: draft.id } as Scope)).rejects.toMatchObject({ code: 'not-found' });
    expect((await loadProgramme(draft.scope)).tournament.id).toBe(draft.id);
  });
});
