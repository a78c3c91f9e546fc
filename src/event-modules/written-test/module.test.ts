import { describe, expect, it } from 'vitest';
import { csvLine } from '~/domain/csv';
import { checkValue } from '~/domain/fields';
import { writtenTest, type WrittenTestSetup } from './module';

const SETUP: WrittenTestSetup = {
  max: '50',
  groups: [
    { key: 'a', name: 'Part A', max: '20' },
    { key: 'b', name: 'Part B', max: '30' },
  ],
  tieBreak: ['b', 'a'],
};
const team = (id: string, points: string, groups?: Record<string, string>) => ({ id, status: 'scored' as const, parts: { test: groups === undefined ? { points } : { points, groups } } });
const order = (setup: WrittenTestSetup, teams: ReturnType<typeof team>[]): string =>
  writtenTest.rank(setup, teams).map(({ id, place }) => `${id}${place ?? ''}`).join(' ');

describe('a written test', () => {
  it('is ranked by points, and ties by the groups in the office’s order', () => {
    const teams = [team('A', '31.5', { a: '20', b: '11.5' }), team('B', '31.5', { a: '12.5', b: '19' }), team('C', '40')];
    expect(order(SETUP, teams)).toBe('C1 B2 A3');
    expect(order({ ...SETUP, tieBreak: ['a', 'b'] }, teams)).toBe('C1 A2 B3');
  });
  it('shares places where nothing settles the tie', () => {
    expect(order({ max: '50', groups: [], tieBreak: [] }, [team('A', '31.5'), team('B', '31.5'), team('C', '31'), team('D', '31.5')])).toBe('A1 B1 D1 C4');
    expect(order(SETUP, [team('A', '30', { a: '10', b: '20' }), team('B', '30', { a: '10', b: '20' })])).toBe('A1 B1');
  });
  it('puts a team without group points after those with, as it says', () => {
    expect(order(SETUP, [team('A', '30'), team('B', '30', { a: '20', b: '10' }), team('C', '30')])).toBe('B1 A2 C2');
    expect(writtenTest.tieBreakWords(SETUP)).toEqual([
      'More points in Part B',
      'More points in Part A',
      'A team whose group points were not kept stands after those with',
      'Still equal: the place is shared',
    ]);
  });
  it('shows its points and groups', () => {
    expect(writtenTest.score(SETUP, { test: { points: '31.5', groups: { a: '12.5', b: '19' } } })).toMatchObject({
      complete: true,
      display: '31.5',
      details: [
        { key: 'points', display: '31.5 of 50', exact: '63/2', outOf: '50/1' },
        { key: 'group.a', display: '12.5 of 20' },
        { key: 'group.b', display: '19 of 30' },
      ],
    });
    expect(csvLine(writtenTest.resultCells(SETUP, { test: { points: '31.5' } }))).toBe('31.5,,\r\n');
  });
  it('names a test that no longer fits', () => {
    expect(writtenTest.score({ max: '30', groups: [], tieBreak: [] }, { test: { points: '31.5' } })).toMatchObject({ complete: false, score: null, faults: [{ part: 'test' }] });
  });
  it.each<[object, string, string]>([
    [{ max: '45' }, 'groups', 'The groups’ points add up to 50, but the test is out of 45.'],
    [{ tieBreak: ['a'] }, 'tieBreak', 'Put all question groups in order, each once.'],
    [{ tieBreak: ['a', 'a'] }, 'tieBreak', 'Put all question groups in order, each once.'],
    [{ tieBreak: ['a', 'c'] }, 'tieBreak', 'Put all question groups in order, each once.'],
    [{ max: '0' }, 'max', 'The most points of the test must be above 0 and a whole or half number.'],
  ])('%j is refused beside %s', (change, path, message) => {
    const result = checkValue(writtenTest.setup.schema, { ...SETUP, ...change });
    expect(result.ok ? [] : result.fields).toContainEqual({ path, message });
  });
  it('finds what is unlikely', () => {
    expect(writtenTest.setup.findings({ max: '5', groups: [], tieBreak: [] }).map(({ code }) => code)).toEqual(['no-groups', 'few-points']);
    expect(writtenTest.setup.findings(SETUP)).toEqual([]);
  });
  it('has samples whose tie is settled by the groups', () => {
    const [, grouped] = writtenTest.sampleSetups();
    if (grouped === undefined) throw new Error('a sample is missing');
    const rows = writtenTest.rank(grouped.setup, writtenTest.sampleTeams(grouped.setup));
    expect(rows.map(({ place }) => place)).toEqual([1, 2, 3, 4, 5, 6]);
    expect(rows[1]?.display).toBe(rows[2]?.display);
  });
});
