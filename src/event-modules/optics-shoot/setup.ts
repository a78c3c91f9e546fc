/** The set-up of an optics shoot: its box, what a team may use, and how it is scored. Lengths are decimal text in mm. */
import { compareExact, exact, groupThousands, ONE, toDecimalText } from '~/domain/exact';
import { exactPerimeter, tapeWords, USUAL_TAPES, WALLS, type ExactBox, type WallTapes } from '~/domain/geometry/perimeter';
import { OPTICS_TIE_BREAKS, type OpticsRules, type OpticsTieBreak } from '~/domain/scoring/optics';
import type { QuestionGroup } from '~/domain/scoring/test-points';
import type { Line, SetupFinding } from '../contract';

/** Laser classes of IEC 60825-1, as they stand on the label. */
export const LASER_CLASSES = ['not noted', '1', '1C', '1M', '2', '2M', '3R', '3B', '4'] as const;
export type LaserClass = (typeof LASER_CLASSES)[number];

/** The clock of a run, seconds. */
export const RUN_SECONDS = 240;

export interface OpticsSetup {
  /** Inside sizes. */
  box: { width: string; depth: string };
  /** The target on the back wall, from the left corner. */
  targetX: string;
  mirrorsAllowed: number;
  barriersStanding: number;
  laser: { class: LaserClass; note: string };
  /** Whole numbers that add to 100. */
  weights: { accuracy: number; barriers: number; test: number };
  /** At this distance and beyond accuracy is 0. */
  fullScale: string;
  testMax: string;
  /** Question groups of the test, if their points are kept too. They do not settle ties here. */
  testGroups: QuestionGroup[];
  /** What counts as a barrier used, in the office's words. */
  barrierRule: string;
  tieBreak: OpticsTieBreak[];
  /** Where the tape's zero lies on each wall. */
  tapes: WallTapes;
}

/** The rule a new set-up starts with; an office puts its own in its place. */
export const STARTING_BARRIER_RULE = 'A barrier counts as used when the beam strikes its reflecting face on the way to the spot.';

/** A set-up to start from. */
export function opticsDefaults(): OpticsSetup {
  return {
    box: { width: '1000', depth: '600' },
    targetX: '500',
    mirrorsAllowed: 5,
    barriersStanding: 1,
    laser: { class: 'not noted', note: '' },
    weights: { accuracy: 50, barriers: 20, test: 30 },
    fullScale: '600',
    testMax: '30',
    testGroups: [],
    barrierRule: STARTING_BARRIER_RULE,
    tieBreak: [...OPTICS_TIE_BREAKS],
    tapes: { ...USUAL_TAPES },
  };
}

/** The box as the geometry takes it. */
export function opticsBox(setup: OpticsSetup): ExactBox {
  return { W: setup.box.width, D: setup.box.depth };
}

/** The scoring profile as the score takes it. */
export function opticsRules(setup: OpticsSetup): OpticsRules {
  const { weights, fullScale, barriersStanding, testMax } = setup;
  return { wA: weights.accuracy, wB: weights.barriers, wT: weights.test, R: fullScale, barriersAvailable: barriersStanding, testMax };
}

/** What is unlikely, but may be meant. */
export function opticsFindings(setup: OpticsSetup): SetupFinding[] {
  const found: SetupFinding[] = [];
  const add = (code: string, field: string, message: string): void => {
    found.push({ code, field, message });
  };
  const outside = (value: string, least: string, most: string): boolean =>
    compareExact(exact(value), exact(least)) < 0 || compareExact(exact(value), exact(most)) > 0;

  for (const side of ['width', 'depth'] as const) {
    if (outside(setup.box[side], '300', '3000')) add(`box-${side}`, `box.${side}`, `A box ${groupThousands(setup.box[side])} mm ${side === 'width' ? 'wide' : 'deep'} is unusual. Is it in millimetres?`);
  }
  const edge = exact(10);
  if (compareExact(exact(setup.targetX), edge) < 0 || compareExact(exact(setup.box.width).sub(exact(setup.targetX)), edge) < 0) {
    add('target-corner', 'targetX', 'The target is within 10 mm of a corner: a spot there is hard to read.');
  }
  if (setup.mirrorsAllowed !== 5) add('mirrors-allowed', 'mirrorsAllowed', 'A team usually may use up to 5 mirrors.');
  const half = exactPerimeter(opticsBox(setup)).div(2);
  const fullScale = exact(setup.fullScale);
  if (compareExact(fullScale, half) > 0) {
    add('full-scale-long', 'fullScale', `No spot can be farther than ${groupThousands(toDecimalText(half) ?? '')} mm: every spot on a wall gets some accuracy.`);
  } else if (compareExact(fullScale, ONE.mul(50)) < 0) {
    add('full-scale-short', 'fullScale', 'With so short a full scale most teams get no accuracy at all.');
  }
  for (const [key, name] of [['accuracy', 'accuracy'], ['barriers', 'barriers used'], ['test', 'the written test']] as const) {
    if (setup.weights[key] === 0) add(`weight-${key}`, `weights.${key}`, `With weight 0, ${name} counts in ties only.`);
  }
  if (setup.barrierRule === STARTING_BARRIER_RULE) add('barrier-rule', 'barrierRule', 'This is the rule we start with. Is it your office’s too?');
  if (setup.laser.class === 'not noted') add('laser-class', 'laser.class', 'Note the class on the laser’s label.');
  if (setup.laser.class === '3R' || setup.laser.class === '3B' || setup.laser.class === '4') {
    add('laser-strong', 'laser.class', `Class ${setup.laser.class} is above class 2 of IEC 60825-1 (1 mW of visible light): check that your rules allow it beside students.`);
  }
  return found;
}

/** Each tie-break in words, and who is ahead. */
export const TIE_BREAK_WORDS: Record<OpticsTieBreak, string> = {
  distance: 'Shorter distance; no spot comes last',
  barriersUsed: 'More barriers used',
  test: 'More test points',
  mirrorsUsed: 'Fewer mirrors used',
  timeUsed: 'Shorter time; no time kept comes last',
};

/** How equal scores are settled, in order. */
export function opticsTieBreakWords(setup: OpticsSetup): string[] {
  return [...setup.tieBreak.map((key) => TIE_BREAK_WORDS[key]), 'Still equal: the place is shared'];
}

function scoringLines(setup: OpticsSetup): Line[] {
  const { weights } = setup;
  return [
    { label: 'Weights', value: `accuracy ${weights.accuracy}, barriers used ${weights.barriers}, written test ${weights.test}` },
    { label: 'Full scale', value: `${groupThousands(setup.fullScale)} mm` },
    { label: 'Written test', value: `out of ${groupThousands(setup.testMax)}` },
    ...setup.testGroups.map((group) => ({ label: group.name, value: `out of ${groupThousands(group.max)}` })),
    { label: 'Counts as a barrier used', value: setup.barrierRule },
    { label: 'Equal scores', value: opticsTieBreakWords(setup).join(' → ') },
  ];
}

const mirrorsLine = (setup: OpticsSetup): Line => ({ label: 'Mirrors a team may use', value: `up to ${setup.mirrorsAllowed}` });

/** Everything, for the people who run the event. */
export function opticsSummary(setup: OpticsSetup): Line[] {
  const { box, laser } = setup;
  return [
    { label: 'Box', value: `${groupThousands(box.width)} × ${groupThousands(box.depth)} mm` },
    { label: 'Target', value: `${groupThousands(setup.targetX)} mm from the left corner of the back wall` },
    mirrorsLine(setup),
    { label: 'Barriers standing', value: String(setup.barriersStanding) },
    { label: 'Laser', value: [laser.class === 'not noted' ? 'class not noted' : `class ${laser.class}`, laser.note].filter(Boolean).join(', ') },
    ...WALLS.map((wall) => ({ label: `Tape on the ${wall} wall`, value: tapeWords(wall, setup.tapes) })),
    ...scoringLines(setup),
  ];
}

/** What competitors may know before the day: how they are scored, not what stands in the box. */
export function opticsPublic(setup: OpticsSetup): Line[] {
  return [mirrorsLine(setup), { label: 'Time', value: `${RUN_SECONDS / 60} minutes` }, ...scoringLines(setup)];
}
