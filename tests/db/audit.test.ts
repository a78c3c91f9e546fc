import { describe, expect, test } from 'vitest';
import { useTestDatabase } from '../factories/database';
import { grant, makeDivision, makeEvent, makeOrganization, makePerson, makeSchool, makeTeam, makeTournament } from '../factories/world';
import { exportAudit, loadAudit } from '~/features/audit/loaders';
import { writeAudit } from '~/features/audit/queries';
import type { AuditFilter, AuditLine } from '~/features/audit/types';
import { useClock } from '~/server/clock';
import { withScope } from '~/server/database';

useTestDatabase();

const ZONE = 'America/Chicago';
const none: AuditFilter = { person: '', kind: '', tournament: '', text: '', from: '', to: '' };

async function at<T>(moment: string, work: () => Promise<T>): Promise<T> {
  const back = useClock({ now: () => new Date(moment) });
  try {
    return await work();
  } finally {
    back();
  }
}

describe('the audit trail', () => {
  test('is narrowed by person, kind, tournament, words, names and days of the office’s zone, and never shows another organization', async () => {
    const [org, other] = [await makeOrganization(), await makeOrganization()];
    const tournament = await makeTournament(org);
    const division = await makeDivision(org, tournament.id);
    const event = await makeEvent(org, { tournamentId: tournament.id, divisionId: division.id, name: 'Pond Life' });
    const team = await makeTeam(org, { tournamentId: tournament.id, divisionId: division.id, schoolId: (await makeSchool(org)).id, name: 'Wrenfield', number: 9 });
    const leader = await makePerson({ name: 'Rosa Okonjo' });
    const hers = await grant(org, leader, 'leader', { tournamentId: tournament.id, eventId: event.id });
    const note = { subjectType: 'event', subjectId: event.id, tournamentId: tournament.id };
    // Ten in the evening of 13 March in Chicago is the next day in Greenwich.
    await at('2027-03-14T04:00:00Z', () => withScope(hers, (tx) => writeAudit(tx, hers, { ...note, action: 'score.kept', detail: { team: team.id, part: 'test', version: 1, value: { points: 42 } } })));
    await at('2027-03-14T15:00:00Z', () => withScope(org.scope, (tx) => writeAudit(tx, org.scope, { ...note, action: 'event.accepted', detail: { name: 'Pond Life', division: 'Senior' } })));
    await withScope(other.scope, (tx) => writeAudit(tx, other.scope, { action: 'organization.changed', subjectType: 'organization', subjectId: other.id }));

    const shown = async (filter: Partial<AuditFilter>) => (await loadAudit(org.scope, { ...none, ...filter }, ZONE, null)).lines.map((l) => l.what);
    const [kept, accepted] = ['kept a reading of S09 Wrenfield in Pond Life (Senior)', 'accepted Pond Life (Senior)'];
    expect(await shown({})).toEqual([accepted, kept]);
    expect(await shown({ person: leader.id })).toEqual([kept]);
    expect(await shown({ kind: 'events' })).toEqual([accepted]);
    expect(await shown({ kind: 'no such kind' })).toEqual([]);
    expect(await shown({ tournament: tournament.id })).toEqual([accepted, kept]);
    expect(await shown({ text: 'wrenFIELD' })).toEqual([kept]);
    expect(await shown({ text: 'okonjo' })).toEqual([kept]);
    expect(await shown({ text: 'accepted' })).toEqual([accepted]);
    expect(await shown({ text: '100%_\\' })).toEqual([]);
    expect(await shown({ from: '2027-03-13', to: '2027-03-13' })).toEqual([kept]);
    expect(await shown({ from: '2027-03-14' })).toEqual([accepted]);
    await expect(loadAudit(hers, none, ZONE, null)).rejects.toMatchObject({ code: 'not-allowed' });
  });

  test('is read page by page and exported whole, each entry once and in order, also where many have the same moment', async () => {
    const org = await makeOrganization();
    await at('2027-03-13T12:00:00Z', () =>
      withScope(org.scope, async (tx) => {
        for (let i = 0; i < 1_130; i++) await writeAudit(tx, org.scope, { action: 'school.added', subjectType: 'school', subjectId: null, detail: { name: `School ${i}` } });
      }),
    );
    const pages: AuditLine[][] = [];
    let before: string | null = null;
    do {
      const page: Awaited<ReturnType<typeof loadAudit>> = await loadAudit(org.scope, { ...none, text: 'school' }, ZONE, before);
      expect(page.total).toBe(1_130);
      pages.push(page.lines);
      before = page.older;
    } while (before);
    expect(pages.map((p) => p.length)).toEqual([...Array<number>(22).fill(50), 30]);
    const ids = pages.flat().map((l) => l.id);
    expect(new Set(ids).size).toBe(1_130);
    const exported: string[] = [];
    for await (const chunk of exportAudit(org.scope, none, ZONE)) exported.push(...chunk.map((l) => l.id));
    expect(exported).toEqual(ids);
  });
});
