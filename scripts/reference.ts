/**
 * Runs a file of reference cases through the product's own functions.
 *
 *   npm run --silent reference -- FILE.json [--results OUT.json]
 *
 * Prints one line per letter, then every failing case with what came and what was wanted. Exit status: 0 when nothing failed, 1
 * when a case failed, 2 when the file could not be run. What is not built yet is said and neither passes nor fails.
 */
import { readFileSync, writeFileSync } from 'node:fs';
import { DomainError } from '~/domain/domain-error';
import { perimeterDistance } from '~/domain/geometry/perimeter';
import { opticsRank, opticsScore } from '~/domain/scoring/optics';
import { teamTotals } from '~/domain/ranking/team-totals';

/** The functions under test, by the name a case gives. Input is JSON that nobody has checked: the functions do. */
const FUNCTIONS: Record<string, (input: never) => unknown> = { perimeterDistance, opticsScore, opticsRank, teamTotals };

export interface ReferenceCase {
  id: string;
  fn: string;
  input: unknown;
  expect?: unknown;
  error?: string;
  tol?: { abs?: number; rel?: number };
}

/** What came of a case; null when its function is not built. */
export type Outcome = { result: unknown } | { error: string } | null;

/** Runs one case. A refusal gives its code; anything else that is thrown gives the error's own text. */
export function runCase(testCase: Pick<ReferenceCase, 'fn' | 'input'>): Outcome {
  const fn = Object.hasOwn(FUNCTIONS, testCase.fn) ? FUNCTIONS[testCase.fn] : undefined;
  if (fn === undefined) return null;
  try {
    return { result: fn(testCase.input as never) };
  } catch (error) {
    return { error: error instanceof DomainError ? error.code : `unexpected: ${String(error)}` };
  }
}

/**
 * Whether `got` is `want`: every field of `want` is compared, lists have the same length, a number passes within
 * abs + rel·|want|, everything else is equal.
 */
export function agrees(got: unknown, want: unknown, tol: { abs?: number; rel?: number } = {}): boolean {
  if (typeof want === 'number') {
    if (typeof got !== 'number' || !Number.isFinite(got)) return false;
    return Math.abs(got - want) <= (tol.abs ?? 0) + (tol.rel ?? 0) * Math.abs(want);
  }
  if (Array.isArray(want)) return Array.isArray(got) && got.length === want.length && want.every((item, i) => agrees(got[i], item, tol));
  if (typeof want === 'object' && want !== null) {
    if (typeof got !== 'object' || got === null || Array.isArray(got)) return false;
    return Object.entries(want).every(([key, value]) => Object.hasOwn(got, key) && agrees((got as Record<string, unknown>)[key], value, tol));
  }
  return got === want;
}

/** Whether a case that was run came out as it should. */
export function passes(testCase: ReferenceCase, outcome: NonNullable<Outcome>): boolean {
  if (testCase.error !== undefined) return 'error' in outcome && outcome.error === testCase.error;
  return testCase.expect !== undefined && 'result' in outcome && agrees(outcome.result, testCase.expect, testCase.tol);
}

/** The report's lines, whether anything failed, and the outcome of every case that was run. */
export function report(cases: readonly ReferenceCase[]): { lines: string[]; failed: boolean; results: Record<string, unknown> } {
  const letters = new Map<string, { passed: number; run: number; notBuilt: number }>();
  const failures: string[] = [];
  const results: Record<string, unknown> = {};
  for (const testCase of cases) {
    const letter = testCase.id.charAt(0);
    const tally = letters.get(letter) ?? { passed: 0, run: 0, notBuilt: 0 };
    letters.set(letter, tally);
    const outcome = runCase(testCase);
    if (outcome === null) {
      tally.notBuilt += 1;
      continue;
    }
    results[testCase.id] = outcome;
    tally.run += 1;
    if (passes(testCase, outcome)) {
      tally.passed += 1;
    } else {
      const want = testCase.error === undefined ? { result: testCase.expect } : { error: testCase.error };
      failures.push(`${testCase.id}\n  got    ${JSON.stringify(outcome)}\n  wanted ${JSON.stringify(want)}`);
    }
  }
  const lines = [...letters.entries()]
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([letter, { passed, run, notBuilt }]) => {
      if (run === 0) return `${letter} not built`;
      return `${letter} ${passed}/${run + notBuilt}${notBuilt === 0 ? '' : ` (${notBuilt} not built)`}`;
    });
  return { lines: [...lines, ...failures], failed: failures.length > 0, results };
}

function main(args: string[]): number {
  const usage = 'Usage: npm run --silent reference -- FILE.json [--results OUT.json]';
  const at = args.indexOf('--results');
  const out = at < 0 ? null : args[at + 1];
  const files = args.filter((_, i) => at < 0 || (i !== at && i !== at + 1));
  const [file] = files;
  if (file === undefined || files.length > 1 || out === undefined) {
    console.error(usage);
    return 2;
  }
  let cases: ReferenceCase[];
  try {
    ({ cases } = JSON.parse(readFileSync(file, 'utf8')) as { cases: ReferenceCase[] });
    if (!Array.isArray(cases)) throw new Error('it has no list of cases');
  } catch (error) {
    console.error(`${file} could not be read: ${error instanceof Error ? error.message : String(error)}`);
    return 2;
  }
  const { lines, failed, results } = report(cases);
  console.log(lines.join('\n'));
  if (out !== null) writeFileSync(out, `${JSON.stringify(results, null, 1)}\n`);
  return failed ? 1 : 0;
}

if (process.argv[1]?.endsWith('reference.ts') === true) process.exitCode = main(process.argv.slice(2));
