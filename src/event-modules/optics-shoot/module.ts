/** The optics shoot: a run at the box and a written test, scored by weights. Formula: `~/domain/scoring/optics`. */
import { csvNumber, type CsvCell } from '~/domain/csv';
import { DomainError } from '~/domain/domain-error';
import { exact, fromRatioText, groupThousands, roundHalfUp, toDecimalText, toRatioText, toShortText, type Exact } from '~/domain/exact';
import { opticsRank, opticsScore, type OpticsTeam } from '~/domain/scoring/optics';
import { pointsFit, type TestPoints, type TestShape } from '~/domain/scoring/test-points';
import type { EventModule, EventPart, EventRow, EventScore, EventTeam, ResultColumn, ScoreDetail } from '../contract';
import { testCells, testPart } from '../test-part';
import { barriersRangeWords, describeRun, mirrorsRangeWords, opticsRunSchema, readingDistances, type OpticsRun } from './run';
import { opticsSampleSetups, opticsSampleTeams, type OpticsParts } from './samples';
import {
  opticsDefaults,
  opticsFindings,
  opticsPublic,
  opticsRules,
  opticsSetupSchema,
  opticsSummary,
  opticsTieBreakWords,
  type OpticsSetup,
} from './setup';

const testShape = (setup: OpticsSetup): TestShape => ({ max: setup.testMax, groups: setup.testGroups });

const runPart: EventPart<OpticsSetup, 'run', OpticsRun> = {
  key: 'run',
  name: 'Run',
  schema: opticsRunSchema,
  describe: describeRun,
  csv: null,
};

/** Why a kept run does not fit the set-up, or null. */
function runFault(setup: OpticsSetup, run: OpticsRun): string | null {
  if (run.mirrorsUsed > setup.mirrorsAllowed) return mirrorsRangeWords(setup);
  if (run.barriersUsed > setup.barriersStanding) return barriersRangeWords(setup);
  try {
    readingDistances(setup, run.reading);
    return null;
  } catch (error) {
    if (error instanceof DomainError) return error.message;
    throw error;
  }
}

const distanceOf = (setup: OpticsSetup, run: OpticsRun): Exact | null => readingDistances(setup, run.reading).shorter;

/** A run and a test as the score takes them. Lengths and points end after a decimal, so the text is exact. */
function toOpticsTeam(setup: OpticsSetup, id: string, run: OpticsRun | undefined, test: TestPoints | undefined): OpticsTeam {
  const d = run === undefined ? null : distanceOf(setup, run);
  return {
    team: id,
    d: d === null ? null : toDecimalText(d),
    barriersUsed: run?.barriersUsed ?? 0,
    testRaw: test?.points ?? 0,
    mirrorsUsed: run?.mirrorsUsed ?? null,
    timeUsed: run?.timeUsedSeconds ?? null,
  };
}

/** Where a team's points come from: the distance, then each share times its weight. */
function sharesOf(setup: OpticsSetup, run: OpticsRun | undefined, test: TestPoints | undefined): { score: Exact; display: string; details: ScoreDetail[] } {
  const rules = opticsRules(setup);
  const result = opticsScore({ rules, team: toOpticsTeam(setup, '', run, test) });
  const details: ScoreDetail[] = [];
  const share = (key: string, label: string, ratio: string, weight: number): void => {
    const value = fromRatioText(ratio).mul(weight);
    details.push({ key, label, display: `${roundHalfUp(value, 2)} of ${weight}`, exact: toRatioText(value), outOf: toRatioText(exact(weight)) });
  };
  if (run !== undefined) {
    const d = distanceOf(setup, run);
    const display = d === null ? 'no spot' : `${groupThousands(toShortText(d))} mm`;
    details.push({ key: 'distance', label: 'Distance', display, exact: d === null ? null : toRatioText(d), outOf: null });
    share('accuracy', 'Accuracy', result.accuracy, rules.wA);
    share('barriers', 'Barriers used', result.barrier, rules.wB);
  }
  if (test !== undefined) share('test', 'Written test', result.test, rules.wT);
  return { score: fromRatioText(result.score), display: result.display, details };
}

function score(setup: OpticsSetup, parts: Partial<OpticsParts>): EventScore<keyof OpticsParts> {
  const missing = (['run', 'test'] as const).filter((key) => parts[key] === undefined);
  const faults: { part: 'run' | 'test'; message: string }[] = [];
  const runMessage = parts.run === undefined ? null : runFault(setup, parts.run);
  if (runMessage !== null) faults.push({ part: 'run', message: runMessage });
  if (parts.test !== undefined && !pointsFit(testShape(setup), parts.test)) {
    faults.push({ part: 'test', message: `The points no longer fit a test out of ${groupThousands(setup.testMax)} and its groups.` });
  }
  const usable = (key: 'run' | 'test'): boolean => !faults.some(({ part }) => part === key);
  const shares = sharesOf(setup, usable('run') ? parts.run : undefined, usable('test') ? parts.test : undefined);
  const complete = missing.length === 0 && faults.length === 0;
  return {
    complete,
    missing,
    faults,
    score: complete ? shares.score : null,
    display: complete ? shares.display : null,
    details: shares.details,
  };
}

function rank(setup: OpticsSetup, teams: readonly EventTeam<OpticsParts>[]): EventRow[] {
  const isComplete = new Map(teams.map((team) => [team.id, team.status !== 'scored' || score(setup, team.parts).complete]));
  const ranked = opticsRank(
    {
      rules: opticsRules(setup),
      teams: teams
        .filter(({ id }) => isComplete.get(id) === true)
        .map(({ id, status, parts }) => ({
          // Results of teams that did not start or were disqualified are not read.
          ...(status === 'scored' ? toOpticsTeam(setup, id, parts.run, parts.test) : { team: id, d: null, barriersUsed: 0, testRaw: 0 }),
          status,
        })),
    },
    { tieBreak: setup.tieBreak, fieldSize: teams.length },
  ).rows.map(
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
  const incomplete = teams
    .filter(({ id }) => isComplete.get(id) !== true)
    .map(({ id, status }): EventRow => ({ id, status, complete: false, place: null, points: null, score: null, display: null }));
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
  const { details, faults } = score(setup, parts);
  const run = faults.some(({ part }) => part === 'run') ? undefined : parts.run;
  const share = (key: string): CsvCell => {
    const detail = details.find((line) => line.key === key);
    return detail?.exact == null ? null : csvNumber(roundHalfUp(fromRatioText(detail.exact), 2));
  };
  const distance = run === undefined ? null : distanceOf(setup, run);
  return [
    run === undefined ? null : run.reading.kind === 'tape' ? `${run.reading.wall} wall` : SPOT_WORDS[run.reading.kind],
    distance === null ? null : csvNumber(toShortText(distance)),
    run?.mirrorsUsed ?? null,
    run?.barriersUsed ?? null,
    run?.timeUsedSeconds === undefined ? null : csvNumber(run.timeUsedSeconds),
    ...testCells(testShape(setup), parts.test),
    share('accuracy'),
    share('barriers'),
    share('test'),
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
