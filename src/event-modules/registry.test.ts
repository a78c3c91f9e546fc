import { describe, expect, it } from 'vitest';
import { csvLine, writeCsv, type CsvCell } from '~/domain/csv';
import { readCsv } from '~/domain/csv-reader';
import type { DomainError } from '~/domain/domain-error';
import { compareExact, exact, roundHalfUp, type Exact } from '~/domain/exact';
import { checkValue } from '~/domain/fields';
import type { AnyEventModule, EventTeam } from './contract';
import { EVENT_MODULE_KEYS, EVENT_MODULES, getEventModule, isEventModuleKey } from './registry';

const modules: readonly AnyEventModule[] = EVENT_MODULES;
type Team = EventTeam<Record<string, unknown>>;
/** Every set-up a module shows of itself. */
const setups = (module: AnyEventModule) => [{ name: 'defaults', setup: module.setup.defaults() }, ...module.sampleSetups()];
const everySetup = modules.flatMap((module) => setups(module).map(({ name, setup }) => [`${module.key}: ${name}`, module, setup] as const));
const isNumberCell = (cell: CsvCell): boolean => typeof cell === 'number' || (typeof cell === 'object' && cell !== null);

describe('the registry', () => {
  it('has keys that are folder names, all different', () => {
    expect(new Set(EVENT_MODULE_KEYS).size).toBe(EVENT_MODULES.length);
    for (const key of EVENT_MODULE_KEYS) expect(key).toMatch(/^[a-z]+(-[a-z]+)*$/);
  });
  it('finds a module by its key and refuses another', () => {
    for (const module of modules) expect(getEventModule(module.key)).toBe(module);
    expect(isEventModuleKey('optics-shoot')).toBe(true);
    expect(isEventModuleKey('constructor')).toBe(false);
    expect(() => getEventModule('tug-of-war')).toThrow(expect.objectContaining({ code: 'unknown-module' }) as DomainError);
  });
});

describe.each(modules.map((module) => [module.key, module] as const))('%s', (_, module) => {
  it('has a name, a manner and parts with keys of their own', () => {
    expect(module.name.trim()).not.toBe('');
    expect(module.manner.trim()).not.toBe('');
    const keys = module.parts.map(({ key }) => key);
    expect(keys.length).toBeGreaterThan(0);
    expect(new Set(keys).size).toBe(keys.length);
  });
  it('makes new defaults each time, so that changing one set-up changes no other', () => {
    expect(module.setup.defaults()).toEqual(module.setup.defaults());
    expect(module.setup.defaults()).not.toBe(module.setup.defaults());
  });
  it.each([null, undefined, 'x', 3, [], {}])('answers a set-up that is %j in words', (value) => {
    const result = checkValue(module.setup.schema, value);
    expect(result.ok).toBe(false);
    for (const { message } of result.ok ? [] : result.fields) expect(message).toMatch(/^[A-Z0-9].*[.?]$/s);
  });
  it('refuses a field it does not know', () => {
    const result = checkValue(module.setup.schema, { ...(module.setup.defaults() as object), surprise: 1 });
    expect(result.ok).toBe(false);
  });
  it('has samples with names of their own', () => {
    const names = module.sampleSetups().map(({ name }) => name);
    expect(names.length).toBeGreaterThan(0);
    expect(new Set(names).size).toBe(names.length);
  });
});

describe.each(everySetup)('%s', (_, module, setup) => {
  const teams: Team[] = module.sampleTeams(setup);

  it('passes its own schema unchanged, as plain JSON', () => {
    expect(checkValue(module.setup.schema, setup)).toEqual({ ok: true, value: setup });
    expect(JSON.parse(JSON.stringify(setup))).toEqual(setup);
  });

  it('says what it is, and its findings point at fields that are there', () => {
    for (const line of [...module.setup.summary(setup), ...module.publicSetup(setup)]) {
      expect(line.label.trim()).not.toBe('');
      expect(line.value.trim()).not.toBe('');
    }
    for (const { code, message, field } of module.setup.findings(setup)) {
      expect(code).toMatch(/^[a-z]+(-[a-z]+)*$/);
      expect(message).toMatch(/^[A-Z0-9].*[.?]$/);
      const value = field.split('.').reduce<unknown>((at, key) => (at as Record<string, unknown> | undefined)?.[key], setup);
      expect(value).toBeDefined();
    }
    expect(module.tieBreakWords(setup).length).toBeGreaterThan(0);
  });

  it('has a value that counts as nothing for every part, and it is complete', () => {
    const parts = Object.fromEntries(module.parts.map((part) => [part.key, part.nothing(setup)]));
    for (const part of module.parts) expect(checkValue(part.schema(setup), parts[part.key])).toEqual({ ok: true, value: parts[part.key] });
    expect(module.score(setup, parts)).toMatchObject({ complete: true, missing: [], faults: [] });
  });

  it('has six sample teams whose parts pass their schemas and are described', () => {
    expect(teams.length).toBeGreaterThanOrEqual(6);
    expect(module.sampleTeams(setup)).toEqual(teams);
    for (const team of teams) {
      expect(team.status).toBe('scored');
      for (const part of module.parts) {
        const value = team.parts[part.key];
        expect(checkValue(part.schema(setup), value)).toEqual({ ok: true, value });
        expect(JSON.parse(JSON.stringify(value))).toEqual(value);
        expect(part.describe(setup, value).trim()).not.toBe('');
        const lines = part.workings(setup, value);
        expect(lines.length).toBeGreaterThan(0);
        for (const line of lines) expect(`${line.label}|${line.value}`).toMatch(/^\S.*\|\S/);
      }
    }
  });

  it('answers bad parts in words, and refuses fields it does not know', () => {
    for (const part of module.parts) {
      for (const value of [null, undefined, 'x', 3, [], {}, { ...(teams[0]?.parts[part.key] as object), surprise: 1 }]) {
        const result = checkValue(part.schema(setup), value);
        expect(result.ok).toBe(false);
        for (const { message } of result.ok ? [] : result.fields) expect(message).toMatch(/^[A-Z0-9].*[.?]$/s);
      }
    }
  });

  it('scores the samples completely, within its scale, with details that add sense', () => {
    const scale = module.scoreScale(setup);
    for (const team of teams) {
      const result = module.score(setup, team.parts);
      expect(result).toMatchObject({ complete: true, missing: [], faults: [] });
      const score = result.score as Exact;
      expect(compareExact(score, exact(scale.least)) >= 0 && compareExact(score, exact(scale.most)) <= 0).toBe(true);
      expect(roundHalfUp(exact(result.display ?? ''), 2)).toBe(roundHalfUp(score, 2));
      expect(new Set(result.details.map(({ key }) => key)).size).toBe(result.details.length);
    }
  });

  it('says which parts are missing, and gives no score without them', () => {
    const [team] = teams;
    for (const part of module.parts) {
      const parts = Object.fromEntries(Object.entries(team?.parts ?? {}).filter(([key]) => key !== part.key));
      expect(module.score(setup, parts)).toMatchObject({ complete: false, missing: [part.key], score: null, display: null });
    }
    expect(module.score(setup, {}).missing).toEqual(module.parts.map(({ key }) => key));
  });

  it('ranks by score, whatever the order the teams come in', () => {
    const rows = module.rank(setup, teams);
    expect(rows.map(({ id }) => id).sort()).toEqual(teams.map(({ id }) => id).sort());
    rows.forEach((row, i) => {
      const before = rows[i - 1];
      expect(row.points).toBe(row.place);
      if (!before) return;
      const order = compareExact(before.score as Exact, row.score as Exact);
      expect(order).toBeGreaterThanOrEqual(0);
      if (order > 0) expect(row.place).toBe(i + 1);
    });
    for (const row of rows) expect(row.score).toEqual(module.score(setup, teams.find(({ id }) => id === row.id)?.parts ?? {}).score);
    const places = (list: readonly Team[]) => Object.fromEntries(module.rank(setup, list).map(({ id, place }) => [id, place]));
    expect(places([...teams].reverse())).toEqual(places(teams));
  });

  it('lists the incomplete after the placed, then dns, then dq, counting all for their points', () => {
    const [a, b, c, d] = teams as [Team, Team, Team, Team];
    const rows = module.rank(setup, [{ ...a, status: 'dq' }, { ...b, status: 'dns', parts: {} }, { ...c, parts: {} }, d]);
    expect(rows.map(({ id, status, complete, place, points }) => [id, status, complete, place, points])).toEqual([
      [d.id, 'scored', true, 1, 1],
      [c.id, 'scored', false, null, null],
      [b.id, 'dns', true, null, 5],
      [a.id, 'dq', true, null, 6],
    ]);
    expect(module.rank(setup, [])).toEqual([]);
  });

  it('fills the columns of the coach’s CSV, numbers as numbers', () => {
    const columns = module.resultColumns(setup);
    expect(new Set(columns.map(({ key }) => key)).size).toBe(columns.length);
    expect(new Set(columns.map(({ header }) => header)).size).toBe(columns.length);
    for (const parts of [...teams.map((team) => team.parts), {}]) {
      const cells = module.resultCells(setup, parts);
      expect(cells).toHaveLength(columns.length);
      cells.forEach((cell, i) => {
        if (cell !== null) expect(isNumberCell(cell)).toBe(columns[i]?.type === 'number');
      });
      expect(csvLine(cells)).toMatch(/\r\n$/);
    }
    expect(module.resultCells(setup, {}).every((cell) => cell === null)).toBe(true);
  });

  it('takes parts by CSV as it writes them', () => {
    for (const { csv, key } of module.parts) {
      if (csv === null) continue;
      const fields = csv.fields(setup);
      for (const team of teams) {
        const text = writeCsv(fields.map(({ header }) => header), [csv.toCsvCells(setup, team.parts[key])]);
        const table = readCsv(text, fields);
        expect(table.problems).toEqual([]);
        expect(csv.parseCsvRow(setup, table.rows[0]?.cells ?? {})).toEqual({ ok: true, value: team.parts[key] });
      }
      const example = Object.fromEntries(fields.map((field) => [field.key, field.example]));
      expect(csv.parseCsvRow(setup, example).ok).toBe(true);
      const bad = csv.parseCsvRow(setup, Object.fromEntries(fields.map((field) => [field.key, 'many'])));
      expect(bad.ok).toBe(false);
      for (const { path } of bad.ok ? [] : bad.fields) expect(fields.map((field) => field.key)).toContain(path);
    }
  });

  it('does not fail on parts that another set-up let through', () => {
    for (const other of setups(module)) {
      for (const team of module.sampleTeams(other.setup) as Team[]) {
        const result = module.score(setup, team.parts);
        expect(result.complete).toBe(result.faults.length === 0);
        for (const { message } of result.faults) expect(message).toMatch(/^[A-Z0-9].*\.$/);
        expect(module.resultCells(setup, team.parts)).toHaveLength(module.resultColumns(setup).length);
        expect(module.rank(setup, [team])).toHaveLength(1);
      }
    }
  });
});
