/** Invented runs that show what a scoring profile does. Always the same, fitted to the set-up. */
import { compareExact, exact, roundHalfUp, toShortText, type Exact } from '~/domain/exact';
import { exactPerimeter } from '~/domain/geometry/perimeter';
import type { QuestionGroup, TestPoints } from '~/domain/scoring/test-points';
import type { EventTeam } from '../contract';
import type { OpticsRun } from './run';
import { opticsBox, opticsDefaults, type OpticsSetup } from './setup';

export type OpticsParts = {
  run: OpticsRun;
  test: TestPoints;
};

/** Distance as a share of full scale (null: no spot), barriers and test as shares of the most, mirrors, seconds. */
const RUNS: readonly { id: string; distance: string | null; barriers: string; test: string; mirrors: number; time: string }[] = [
  { id: 'A', distance: '0.02', barriers: '0', test: '0.5', mirrors: 2, time: '205' },
  { id: 'B', distance: '0.1', barriers: '1', test: '0.8', mirrors: 4, time: '240' },
  { id: 'C', distance: '0.25', barriers: '0.5', test: '0.95', mirrors: 3, time: '186.5' },
  { id: 'D', distance: '0.5', barriers: '1', test: '0.6', mirrors: 5, time: '240' },
  { id: 'E', distance: '1.2', barriers: '1', test: '0.9', mirrors: 1, time: '97' },
  { id: 'F', distance: null, barriers: '0', test: '1', mirrors: 0, time: '240' },
];

const halfDown = (value: Exact): Exact => value.mul(2).floor().div(2);

/** A share of a test, in halves, group by group where there are groups. */
export function sampleTest(max: string, groups: readonly QuestionGroup[], share: Exact): TestPoints {
  if (groups.length === 0) return { points: toShortText(halfDown(exact(max).mul(share))) };
  const parts = groups.map((group) => [group.key, halfDown(exact(group.max).mul(share))] as const);
  return {
    points: toShortText(parts.reduce((sum, [, value]) => sum.add(value), exact(0))),
    groups: Object.fromEntries(parts.map(([key, value]) => [key, toShortText(value)])),
  };
}

/** Six runs: near and far, with and without barriers, good and poor tests, and one without a spot. */
export function opticsSampleTeams(setup: OpticsSetup): EventTeam<OpticsParts>[] {
  const most = exactPerimeter(opticsBox(setup)).div(2);
  return RUNS.map(({ id, distance, barriers, test, mirrors, time }) => {
    const wanted = distance === null ? null : exact(roundHalfUp(exact(setup.fullScale).mul(exact(distance)), 1));
    const mm = wanted === null ? null : compareExact(wanted, most) > 0 ? most : wanted;
    return {
      id,
      status: 'scored',
      parts: {
        run: {
          reading: mm === null ? { kind: 'none' } : { kind: 'distance', mm: toShortText(mm, 1) },
          mirrorsUsed: Math.min(mirrors, setup.mirrorsAllowed),
          barriersUsed: Number(roundHalfUp(exact(setup.barriersStanding).mul(exact(barriers)), 0)),
          timeUsedSeconds: time,
        },
        test: sampleTest(setup.testMax, setup.testGroups, exact(test)),
      },
    };
  });
}

/** Three profiles that reward different things. */
export function opticsSampleSetups(): { name: string; setup: OpticsSetup }[] {
  const base = { ...opticsDefaults(), laser: { class: '2' as const, note: 'red, 1 mW' } };
  return [
    { name: 'Junior, balanced', setup: base },
    {
      name: 'Senior, accuracy first',
      setup: { ...base, barriersStanding: 3, weights: { accuracy: 70, barriers: 15, test: 15 }, fullScale: '300', tieBreak: ['distance', 'timeUsed', 'mirrorsUsed', 'barriersUsed', 'test'] },
    },
    {
      name: 'Senior, test in two groups',
      setup: {
        ...base,
        box: { width: '812.4', depth: '1219.2' },
        targetX: '406.2',
        barriersStanding: 3,
        weights: { accuracy: 40, barriers: 20, test: 40 },
        fullScale: '1250.5',
        testMax: '45.5',
        testGroups: [
          { key: 'rays', name: 'Rays and mirrors', max: '25' },
          { key: 'colour', name: 'Colour', max: '20.5' },
        ],
        tapes: { front: 'right', back: 'right', left: 'back', right: 'front' },
      },
    },
  ];
}
