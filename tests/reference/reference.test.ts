import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { agrees, passes, report, runCase, type ReferenceCase } from '../../scripts/reference';

const { cases } = JSON.parse(readFileSync(new URL('./public-cases.json', import.meta.url), 'utf8')) as { cases: ReferenceCase[] };
const built = cases.filter((testCase) => runCase(testCase) !== null);

describe('the public reference cases', () => {
  it.each(built.map((testCase) => [testCase.id, testCase] as const))('%s', (_, testCase) => {
    const outcome = runCase(testCase);
    if (testCase.error !== undefined) expect(outcome).toEqual({ error: testCase.error });
    else expect(outcome !== null && passes(testCase, outcome), JSON.stringify({ got: outcome, want: testCase.expect })).toBe(true);
  });

  it('are run for every letter that is built', () => {
    for (const letter of ['A', 'F', 'G']) {
      const of = (list: ReferenceCase[]): string[] => list.map(({ id }) => id).filter((id) => id.startsWith(letter));
      expect(of(built)).toEqual(of(cases));
      expect(of(built)).not.toEqual([]);
    }
  });
});

describe('the comparison', () => {
  it('holds numbers to abs + rel·|want| and everything else to equality', () => {
    expect(agrees(100.1, 100, { abs: 0.1001 })).toBe(true);
    expect(agrees(101, 100, { abs: 0.5, rel: 0.005 })).toBe(true);
    expect(agrees(101.1, 100, { abs: 0.5, rel: 0.005 })).toBe(false);
    expect(agrees(1 + 1e-12, 1)).toBe(false);
    expect(agrees(-0, 0)).toBe(true);
    expect(agrees(NaN, 1, { abs: 1 })).toBe(false);
    expect(agrees(undefined, null)).toBe(false);
    expect(agrees('1', 1, { abs: 1 })).toBe(false);
  });
  it('compares every wanted field, lists at their full length, and lets further fields be', () => {
    expect(agrees({ a: [1, { b: 'x' }], more: 1 }, { a: [1, { b: 'x' }] })).toBe(true);
    expect(agrees({ a: [1, 2] }, { a: [1] })).toBe(false);
    expect(agrees({ a: undefined }, { a: null })).toBe(false);
    expect(agrees({}, { a: null })).toBe(false);
    expect(agrees([], {})).toBe(false);
  });
});

describe('the report', () => {
  const box = { W: 1000, D: 600 };
  const made: ReferenceCase[] = [
    { id: 'B-x1', fn: 'notBuiltYet', input: {}, expect: {} },
    { id: 'A-x1', fn: 'perimeterDistance', input: { box, target: { tx: 500 }, hit: { wall: 'back', offset: 380 } }, expect: { shorter: 121 }, tol: { abs: 1e-9 } },
    { id: 'A-x2', fn: 'perimeterDistance', input: { box, target: { tx: 500 }, hit: { wall: 'back', offset: 380 } }, expect: { shorter: 120 }, tol: { abs: 1e-9 } },
    { id: 'A-x3', fn: 'perimeterDistance', input: { box }, error: 'bad-target' },
    { id: 'A-x4', fn: 'perimeterDistance', input: { box }, expect: {} },
    { id: 'A-x5', fn: 'toString', input: {}, expect: {} },
    { id: 'A-x6', fn: 'perimeterDistance', input: null, error: 'bad-box' },
  ];
  const { lines, failed, results } = report(made);

  it('counts by letter, names each failure, and never passes what is not built', () => {
    expect(lines.slice(0, 2)).toEqual(['A 2/6 (1 not built)', 'B not built']);
    expect(lines.slice(2).map((line) => line.split('\n')[0])).toEqual(['A-x1', 'A-x4', 'A-x6']);
    expect(lines[2]).toContain('wanted {"result":{"shorter":121}}');
    expect(failed).toBe(true);
    expect(report(made.slice(0, 1))).toEqual({ lines: ['B not built'], failed: false, results: {} });
  });
  it('keeps the outcome of all that was run', () => {
    expect(Object.keys(results)).toEqual(['A-x1', 'A-x2', 'A-x3', 'A-x4', 'A-x6']);
    expect(results['A-x3']).toEqual({ error: 'bad-target' });
  });
});
