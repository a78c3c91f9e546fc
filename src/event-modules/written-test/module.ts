/** A written test: points, higher first; question groups settle ties in the order the office gives. */
import * as z from 'zod/mini';
import type { CsvCell } from '~/domain/csv';
import { compareExact, exact, groupThousands, roundHalfUp, toRatioText, toShortText, type Exact } from '~/domain/exact';
import { UNKNOWN_FIELDS } from '~/domain/fields';
import { competitionRank, placePoints } from '~/domain/ranking/places';
import { groupsAddUp, pointsFit, questionGroupsField, testMaxField, type QuestionGroup, type TestPoints } from '~/domain/scoring/test-points';
import type { EventModule, EventRow, EventScore, EventTeam, Line, ResultColumn, SetupFinding } from '../contract';
import { testCells, testPart } from '../test-part';

export interface WrittenTestSetup {
  /** The most points, decimal text. */
  max: string;
  groups: QuestionGroup[];
  /** Keys of all groups, the one that settles first in front. */
  tieBreak: string[];
}

export type WrittenTestParts = {
  test: TestPoints;
};

const setupSchema: z.ZodMiniType<WrittenTestSetup> = z
  .strictObject(
    { max: testMaxField(), groups: questionGroupsField(), tieBreak: z.array(z.string('Choose a question group.'), 'Put the question groups in order.') },
    { error: (issue) => (issue.code === 'unrecognized_keys' ? UNKNOWN_FIELDS : 'The set-up is missing.') },
  )
  .check((ctx) => {
    const { groups, tieBreak } = ctx.value;
    const sum = groupsAddUp(ctx.value);
    if (sum !== null) ctx.issues.push({ code: 'custom', message: sum, path: ['groups'], input: groups });
    const keys = new Set(groups.map((group) => group.key));
    if (tieBreak.length !== keys.size || new Set(tieBreak).size !== keys.size || !tieBreak.every((key) => keys.has(key))) {
      ctx.issues.push({ code: 'custom', message: 'Put all question groups in order, each once.', path: ['tieBreak'], input: tieBreak });
    }
  });

function findings(setup: WrittenTestSetup): SetupFinding[] {
  const found: SetupFinding[] = [];
  if (setup.groups.length === 0) {
    found.push({ code: 'no-groups', field: 'groups', message: 'No question groups are named: teams with equal points will share a place.' });
  }
  if (compareExact(exact(setup.max), exact(10)) < 0) {
    found.push({ code: 'few-points', field: 'max', message: 'So few points will leave many teams equal.' });
  }
  return found;
}

function tieBreakWords(setup: WrittenTestSetup): string[] {
  const name = (key: string): string => setup.groups.find((group) => group.key === key)?.name ?? key;
  const unknown = setup.tieBreak.length === 0 ? [] : ['A team whose group points were not kept stands after those with'];
  return [...setup.tieBreak.map((key) => `More points in ${name(key)}`), ...unknown, 'Still equal: the place is shared'];
}

function summary(setup: WrittenTestSetup): Line[] {
  return [
    { label: 'Written test', value: `out of ${groupThousands(setup.max)}` },
    ...setup.groups.map((group) => ({ label: group.name, value: `out of ${groupThousands(group.max)}` })),
    { label: 'Equal points', value: tieBreakWords(setup).join(' → ') },
  ];
}

function score(setup: WrittenTestSetup, { test }: Partial<WrittenTestParts>): EventScore<'test'> {
  const none = { score: null, display: null, details: [] };
  if (test === undefined) return { complete: false, missing: ['test'], faults: [], ...none };
  if (!pointsFit(setup, test)) {
    const message = `The points no longer fit a test out of ${groupThousands(setup.max)} and its groups.`;
    return { complete: false, missing: [], faults: [{ part: 'test', message }], ...none };
  }
  const line = (key: string, label: string, text: string, max: string) => ({
    key,
    label,
    display: `${groupThousands(text)} of ${groupThousands(max)}`,
    exact: toRatioText(exact(text)),
    outOf: toRatioText(exact(max)),
  });
  const groups = setup.groups.flatMap((group) => {
    const text = test.groups?.[group.key];
    return text === undefined ? [] : [line(`group.${group.key}`, group.name, text, group.max)];
  });
  const points = exact(test.points);
  return { complete: true, missing: [], faults: [], score: points, display: toShortText(points), details: [line('points', 'Points', test.points, setup.max), ...groups] };
}

function rank(setup: WrittenTestSetup, teams: readonly EventTeam<WrittenTestParts>[]): EventRow[] {
  const unplaced = ({ id, status }: EventTeam<WrittenTestParts>, complete: boolean): EventRow => ({
    id,
    status,
    complete,
    place: null,
    points: complete ? placePoints(status, null, teams.length) : null,
    score: null,
    display: null,
  });
  const scored: { id: string; score: Exact; display: string | null; groups: (Exact | null)[] }[] = [];
  const incomplete: EventRow[] = [];
  for (const team of teams.filter(({ status }) => status === 'scored')) {
    const result = score(setup, team.parts);
    if (result.score === null) {
      incomplete.push(unplaced(team, false));
      continue;
    }
    const groups = setup.tieBreak.map((key) => {
      const text = team.parts.test?.groups?.[key];
      return text === undefined ? null : exact(text);
    });
    scored.push({ id: team.id, score: result.score, display: result.display, groups });
  }
  const compare = (a: (typeof scored)[number], b: (typeof scored)[number]): number => {
    const byScore = compareExact(b.score, a.score);
    if (byScore !== 0) return byScore;
    for (const [i, x] of a.groups.entries()) {
      const y = b.groups[i] ?? null;
      const difference = x === null || y === null ? (x === null ? 1 : 0) - (y === null ? 1 : 0) : compareExact(y, x);
      if (difference !== 0) return difference;
    }
    return 0;
  };
  const placed = competitionRank(scored, compare).map(
    ({ item, place }): EventRow => ({ id: item.id, status: 'scored', complete: true, place, points: place, score: item.score, display: item.display }),
  );
  const withStatus = (status: 'dns' | 'dq'): EventRow[] => teams.filter((team) => team.status === status).map((team) => unplaced(team, true));
  return [...placed, ...incomplete, ...withStatus('dns'), ...withStatus('dq')];
}

function resultColumns(setup: WrittenTestSetup): ResultColumn[] {
  return [
    { key: 'points', header: `Points, of ${setup.max}`, type: 'number' },
    ...setup.groups.map((group): ResultColumn => ({ key: `group.${group.key}`, header: `${group.name}, of ${group.max}`, type: 'number' })),
  ];
}

const resultCells = (setup: WrittenTestSetup, { test }: Partial<WrittenTestParts>): CsvCell[] => testCells(setup, test);

function sampleSetups(): { name: string; setup: WrittenTestSetup }[] {
  return [
    { name: 'Points only', setup: { max: '50', groups: [], tieBreak: [] } },
    {
      name: 'Three groups',
      setup: {
        max: '62.5',
        groups: [
          { key: 'part-a', name: 'Part A', max: '20' },
          { key: 'part-b', name: 'Part B', max: '30' },
          { key: 'part-c', name: 'Part C', max: '12.5' },
        ],
        tieBreak: ['part-c', 'part-b', 'part-a'],
      },
    },
  ];
}

/** Shares of the most points; the second and third team are equal in the total, and differ in the groups where there are some. */
const SHARES = ['0.9', '0.75', '0.75', '0.6', '0.4', '0'] as const;

function sampleTeams(setup: WrittenTestSetup): EventTeam<WrittenTestParts>[] {
  const whole = (max: string, share: string): Exact => exact(roundHalfUp(exact(max).mul(exact(share)).mul(2).floor(), 0)).div(2);
  return SHARES.map((share, i): EventTeam<WrittenTestParts> => {
    const id = String.fromCharCode(65 + i);
    if (setup.groups.length === 0) return { id, status: 'scored', parts: { test: { points: toShortText(whole(setup.max, share)) } } };
    const values = setup.groups.map((group) => whole(group.max, share));
    const [first, second] = [values[0], values[1]];
    const [low, high] = [setup.groups[0], setup.groups[1]];
    const half = exact('0.5');
    // Half a point moved from the first group to the second, where both have room.
    if (i === 2 && first && second && low && high && compareExact(first, half) >= 0 && compareExact(second.add(half), exact(high.max)) <= 0) {
      values[0] = first.sub(half);
      values[1] = second.add(half);
    }
    const groups = Object.fromEntries(setup.groups.map((group, at) => [group.key, toShortText(values[at] ?? exact(0))]));
    const points = toShortText(values.reduce((sum, value) => sum.add(value), exact(0)));
    return { id, status: 'scored', parts: { test: { points, groups } } };
  });
}

export const writtenTest: EventModule<WrittenTestSetup, WrittenTestParts, 'written-test'> = {
  key: 'written-test',
  name: 'Written test',
  manner: 'written',
  setup: { schema: setupSchema, defaults: () => ({ max: '50', groups: [], tieBreak: [] }), findings, summary },
  parts: [testPart((setup) => setup)],
  score,
  rank,
  scoreScale: (setup) => ({ label: 'Points', least: '0', most: setup.max }),
  tieBreakWords,
  resultColumns,
  resultCells,
  publicSetup: summary,
  sampleSetups,
  sampleTeams,
};
