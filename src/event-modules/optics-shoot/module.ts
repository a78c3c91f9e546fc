/** The optics shoot: a run at the box and a written test, scored by weights. Formula: `~/domain/scoring/optics`. */
import { csvNumber, type CsvCell } from '~/domain/csv';
import { DomainError } from '~/domain/domain-error';
import { exact, fromRatioText, groupThousands, roundHalfUp, toDecimalText, toRatioText, toShortText, type Exact } from '~/domain/exact';
import { opticsRank, opticsScore, type OpticsScore, type OpticsTeam } from '~/domain/scoring/optics';
import { pointsFit, type TestPoints, type TestShape } from '~/domain/scoring/test-points';
import type { EventModule, EventPart, EventRow, EventScore, EventTeam, PartFault, ResultColumn, ScoreDetail } from '../contract';
import { testCells, testPart } from '../test-part';
import { barriersRangeWords, describeRun, mirrorsRangeWords, opticsRunSchema, readingDistances, runWorkings, type OpticsRun } from './run';
import { opticsSampleSetups, opticsSampleTeams, type OpticsParts } from './samples';
import {
  opticsDefaults,
  opticsFindings,
  opticsPublic,
  opticsRules,
  opticsSummary,
  opticsTieBreakWords,
  type OpticsSetup,
} from './setup';
import { opticsSetupSchema } from './setup-schema';

const testShape = (setup: OpticsSetup): TestShape => ({ max: setup.testMax, groups: setup.testGroups });

const runPart: EventPart<OpticsSetup, 'run', OpticsRun> = {
  key: 'run',
  name: 'Run',
  schema: opticsRunSchema,
  describe: describeRun,
  workings: runWorkings,
  nothing: () => ({ reading: { kind: 'none' }, mirrorsUsed: 0, barriersUsed: 0 }),
  csv: null,
};

/** What a team has that fits the set-up, and what it lacks. The run comes with its distance. */
interface Usable {
  run: { run: OpticsRun; distance: Exact | null } | null;
  test: TestPoints | null;
  missing: ('run' | 'test')[];
  faults: PartFault<'run' | 'test'>[];
}

function usableParts(setup: OpticsSetup, { run, test }: Partial<OpticsParts>): Usable {
  const usable: Usable = { run: null, test: null, missing: [], faults: [] };
  if (run === undefined) {
    usable.missing.push('run');
  } else if (run.mirrorsUsed > setup.mirrorsAllowed) {
    usable.faults.push({ part: 'run', message: mirrorsRangeWords(setup) });
  } else if (run.barriersUsed > setup.barriersStanding) {
    usable.faults.push({ part: 'run', message: barriersRangeWords(setup) });
  } else {
    try {
      usable.run = { run, distance: readingDistances(setup, run.reading).shorter };
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      usable.faults.push({ part: 'run', message: error.message });
    }
  }
  if (test === undefined) {
    usable.missing.push('test');
  } else if (pointsFit(testShape(setup), test)) {
    usable.test = test;
  } else {
    usable.faults.push({ part: 'test', message: `The points no longer fit a test out of ${groupThousands(setup.testMax)} and its groups.` });
  }
  return usable;
}

/** A run and a test as the score takes them. Lengths and points end after a decimal, so the text is exact. */
function toOpticsTeam(id: string, { run, test }: Pick<Usable, 'run' | 'test'>): OpticsTeam {
  return {
    team: id,
    d: run?.distance == null ? null : toDecimalText(run.distance),
    barriersUsed: run?.run.barriersUsed ?? 0,
    testRaw: test?.points ?? 0,
    mirrorsUsed: run?.run.mirrorsUsed ?? null,
    timeUsed: run?.run.timeUsedSeconds ?? null,
  };
}

/** Where a team's points come from: the distance, then each share times its weight. */
function detailsOf(setup: OpticsSetup, { run, test }: Usable, result: OpticsScore): ScoreDetail[] {
  const { weights } = setup;
  const details: ScoreDetail[] = [];
  const share = (key: string, label: string, ratio: string, weight: number): void => {
    const value = fromRatioText(ratio).mul(weight);
    details.push({ key, label, display: `${roundHalfUp(value, 2)} of ${weight}`, exact: toRatioText(value), outOf: toRatioText(exact(weight)) });
  };
  if (run !== null) {
    const d = run.distance;
    const display = d === null ? 'no spot' : `${groupThousands(toShortText(d))} mm`;
    details.push({ key: 'distance', label: 'Distance', display, exact: d === null ? null : toRatioText(d), outOf: null });
    share('accuracy', 'Accuracy', result.accuracy, weights.accuracy);
    share('barriers', 'Barriers used', result.barrier, weights.barriers);
  }
  if (test !== null) share('test', 'Written test', result.test, weights.test);
  return details;
}

function score(setup: OpticsSetup, parts: Partial<OpticsParts>): EventScore<keyof OpticsParts> {
  const usable = usableParts(setup, parts);
  const { missing, faults } = usable;
  // What is not there counts as nothing, which leaves the other shares as they are.
  const result = opticsScore({ rules: opticsRules(setup), team: toOpticsTeam('', usable) });
  const complete = missing.length === 0 && faults.length === 0;
  return {
    complete,
    missing,
    faults,
    score: complete ? fromRatioText(result.score) : null,
    display: complete ? result.display : null,
    details: detailsOf(setup, usable, result),
  };
}

function rank(setup: OpticsSetup, teams: readonly EventTeam<OpticsParts>[]): EventRow[] {
  const counted: OpticsTeam[] = [];
  const incomplete: EventRow[] = [];
  for (const { id, status, parts } of teams) {
    if (status !== 'scored') {
      // Results of teams that did not start or were disqualified are not read.
      counted.push({ team: id, d: null, barriersUsed: 0, testRaw: 0, status });
      continue;
    }
    const usable = usableParts(setup, parts);
    if (usable.run !== null && usable.test !== null) counted.push({ ...toOpticsTeam(id, usable), status });
    else incomplete.push({ id, status, complete: false, place: null, points: null, score: null, display: null });
  }
  const { rows } = opticsRank({ rules: opticsRules(setup), teams: counted }, { tieBreak: setup.tieBreak, fieldSize: teams.length });
  const ranked = rows.map(
    (row): EventRow => ({
      id: row.team,
      status: row.status,
      complete: true,
      place: row.place,
      points: row.points,
      score: row.score === null ? null : fromRatioText(row.score),
      display: row.display,
    }),
  );
  return [...ranked.filter(({ status }) => status === 'scored'), ...incomplete, ...ranked.filter(({ status }) => status !== 'scored')];
}

function resultColumns(setup: OpticsSetup): ResultColumn[] {
  const number = (key: string, header: string): ResultColumn => ({ key, header, type: 'number' });
  return [
    { key: 'spot', header: 'Spot', type: 'text' },
    number('distance', 'Distance (mm)'),
    number('mirrors', 'Mirrors used'),
    number('barriers', 'Barriers used'),
    number('time', 'Time used (s)'),
    number('testPoints', 'Test points'),
    ...setup.testGroups.map((group) => number(`group.${group.key}`, `Test: ${group.name}`)),
    number('accuracyShare', `Accuracy, of ${setup.weights.accuracy}`),
    number('barriersShare', `Barriers, of ${setup.weights.barriers}`),
    number('testShare', `Test, of ${setup.weights.test}`),
  ];
}

const SPOT_WORDS = { distance: 'measured directly', none: 'no spot' } as const;

function resultCells(setup: OpticsSetup, parts: Partial<OpticsParts>): CsvCell[] {
  const usable = usableParts(setup, parts);
  const { run, test } = usable;
  const result = opticsScore({ rules: opticsRules(setup), team: toOpticsTeam('', usable) });
  const share = (there: boolean, ratio: string, weight: number): CsvCell =>
    there ? csvNumber(roundHalfUp(fromRatioText(ratio).mul(weight), 2)) : null;
  const reading = run?.run.reading;
  return [
    reading === undefined ? null : reading.kind === 'tape' ? `${reading.wall} wall` : SPOT_WORDS[reading.kind],
    run?.distance == null ? null : csvNumber(toShortText(run.distance)),
    run?.run.mirrorsUsed ?? null,
    run?.run.barriersUsed ?? null,
    run?.run.timeUsedSeconds === undefined ? null : csvNumber(run.run.timeUsedSeconds),
    ...testCells(testShape(setup), test ?? undefined),
    share(run !== null, result.accuracy, setup.weights.accuracy),
    share(run !== null, result.barrier, setup.weights.barriers),
    share(test !== null, result.test, setup.weights.test),
  ];
}

export const opticsShoot: EventModule<OpticsSetup, OpticsParts, 'optics-shoot'> = {
  key: 'optics-shoot',
  name: 'Optics shoot',
  manner: 'built on the spot, written',
  setup: { schema: opticsSetupSchema, defaults: opticsDefaults, findings: opticsFindings, summary: opticsSummary },
  parts: [runPart, testPart(testShape)],
  score,
  rank,
  scoreScale: () => ({ label: 'Score', least: '0', most: '100' }),
  tieBreakWords: opticsTieBreakWords,
  resultColumns,
  resultCells,
  publicSetup: opticsPublic,
  sampleSetups: opticsSampleSetups,
  sampleTeams: opticsSampleTeams,
};
