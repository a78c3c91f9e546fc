import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { CSV_BOM, writeCsv } from '~/domain/csv';
import { opticsShoot } from '~/event-modules/optics-shoot/module';
import { writtenTest } from '~/event-modules/written-test/module';
import type { AnyEventModule } from '~/event-modules/contract';
import type { TeamRow } from '../entries/types';
import type { EventRow } from '../events/types';
import { assembleField } from '../scores/assembly';
import type { KeptParts } from '../scores/types';
import { assembleSnapshot, divisionFile, everyEventFile, type EventWithField } from './assembly';
import { eventTable, placesTable, resultsTable } from './components/results-table';

const division = { id: 'd', slug: 'senior', name: 'Senior', letter: 'S', shape: 'square' as const, position: 1 };
const teams: TeamRow[] = ['=SUM(A1)', 'Wren & Field <b>', 'Ossler High', 'Pellam High'].map((name, i) => ({ id: `t${i + 1}`, divisionId: 'd', schoolId: `s${i % 2}`, schoolName: `School ${i % 2}`, number: i + 1, name, state: 'confirmed' }));

function kept(value: unknown): KeptParts[string] {
  return { value, version: 1, keptAt: '2027-03-13T12:00:00Z', keptBy: 'Somebody' };
}

function event(slug: string, module: AnyEventModule, setup: unknown, parts: Record<string, KeptParts>, isTrial = false): EventWithField {
  const row = { id: slug, slug, name: slug, moduleKey: module.key, isTrial, setup, division } as unknown as EventRow;
  return { event: row, field: assembleField(module, setup, 'S', teams, new Map(Object.entries(parts)), []) };
}

const tests = { max: '100', groups: [], tieBreak: [] };
const points = (...list: (string | null)[]) => Object.fromEntries(list.map((p, i): [string, KeptParts] => [`t${i + 1}`, p === null ? { status: kept({ status: 'dns', note: '' }) } : { test: kept({ points: p }) }]));
const setup = opticsShoot.setup.defaults();
const shoot = event('shoot', opticsShoot, setup, {
  t1: { run: kept({ reading: { kind: 'tape', wall: 'back', tape: '612.5' }, mirrorsUsed: 3, barriersUsed: 1 }), test: kept({ points: '20' }) },
  t2: { run: kept({ reading: { kind: 'none' }, mirrorsUsed: 0, barriersUsed: 0 }), test: kept({ points: '30' }) },
  t3: { run: kept({ reading: { kind: 'distance', mm: '0' }, mirrorsUsed: 5, barriersUsed: 1 }), test: kept({ points: '30' }) },
  t4: { status: kept({ status: 'dq', note: 'looked along the beam' }) },
});
const events = [shoot, event('pond', writtenTest, tests, points('90', '80', '80', '10')), event('heat', writtenTest, tests, points('50', '60', null, '70')), event('trial', writtenTest, tests, points('1', '2', '3', '4'), true)];
const snapshot = assembleSnapshot({ dropWorst: 1, advance: 2, perSchool: 1 }, [division], events);
const rows = snapshot.divisions[0]!.rows;

describe('a release', () => {
  it('adds places up without the worst, counts no trial, and marks what was left out once', () => {
    // By hand, common practice: N + 1 = 5 for a team that did not start, N + 2 = 6 for one disqualified.
    // t1: 2, 1, 3 → without 3: 3; t2: 3, 2, 2 → without 3: 4; t3: 1, 2, 5 → without 5: 3; t4: 6, 4, 1 → without 6: 5.
    expect(rows.map((r) => [r.teamId, r.total, r.place])).toEqual([['t1', 3, 1], ['t3', 3, 1], ['t2', 4, 3], ['t4', 5, 4]]);
    expect(rows.map((r) => r.events.map((p) => p.dropped))).toEqual([[false, false, true, false], [false, false, true, false], [true, false, false, false], [true, false, false, false]]);
    expect(rows.find((r) => r.teamId === 't4')!.events[0]).toMatchObject({ status: 'dq', place: null, points: 6, display: null });
  });

  it('lets go on whom the rules let, one a school, and says where equals stand at the cut', () => {
    // t1 and t3 are of one school and share the first place: the second of them may not go on.
    expect(rows.map((r) => [r.teamId, r.goesOn, r.cutTie])).toEqual([['t1', true, true], ['t3', false, true], ['t2', true, false], ['t4', false, false]]);
  });

  it('keeps exact scores beside the shown ones: 112.5 of 600 mm gives 50 × (1 − 3/16) = 40.625, with 20 and 20', () => {
    expect(rows[0]!.events[0]).toMatchObject({ exact: '645/8', display: '80.63' });
  });
});

describe('its files', () => {
  const file = everyEventFile({ name: 'Larkfold', day: '2027-03-13' }, { number: 1, snapshot });
  it('are read by another CSV reader, with numbers as numbers and no formula', () => {
    const text = writeCsv(file.header, file.rows);
    expect(text.startsWith(CSV_BOM)).toBe(true);
    const parsed = Papa.parse<Record<string, string>>(text.slice(1), { header: true, delimiter: ',', newline: '\r\n', skipEmptyLines: true });
    expect(parsed.errors).toEqual([]);
    expect(parsed.data).toHaveLength(16);
    expect(parsed.data[0]).toMatchObject({ Team: "'=SUM(A1)", Event: 'shoot', Place: '2', Field: '4', Score: '80.63', 'Distance (mm)': '112.5', 'Mirrors used': '3', 'Test points': '20' });
    for (const row of parsed.data) for (const cell of Object.values(row)) expect(cell).not.toMatch(/^[=+@\t\r]/);
  });
  it('hold only the teams asked for', () => {
    const mine = everyEventFile({ name: 'Larkfold', day: '2027-03-13' }, { number: 1, snapshot }, new Set(['t2']));
    expect(mine.rows).toHaveLength(4);
    expect(new Set(mine.rows.map((r) => r[5]))).toEqual(new Set(['Wren & Field <b>']));
  });
  it('have a row a team for the public', () => {
    const { header, rows: lines } = divisionFile(snapshot.divisions[0]!);
    expect(lines).toHaveLength(4);
    expect(lines.every((l) => l.length === header.length)).toBe(true);
  });
});

describe('its tables', () => {
  it('escape every name', () => {
    for (const html of [resultsTable(snapshot.divisions[0]!), placesTable(snapshot.divisions[0]!, '/o/t/results/senior'), eventTable(snapshot.divisions[0]!, 0)]) {
      expect(html).toContain('Wren &amp; Field &lt;b&gt;');
      expect(html).not.toContain('<b>Wren');
      expect(html).not.toMatch(/style=/);
    }
  });
});
