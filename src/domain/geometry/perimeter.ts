/**
 * Distances along the walls of an open box seen from above: x runs 0..W from left to right, y runs 0..D from front to back.
 * An offset on a wall is x for front and back, y for left and right. All lengths in millimetres.
 *
 * Definitions: tests/reference/CONVENTIONS.md, sections 1 and A.
 */
import { DomainError } from '../domain-error';
import { compareExact, exact, toShortText, type Exact, ZERO } from '../exact';
import { EPS, mm, type Mm } from '../units';

export const WALLS = ['front', 'right', 'back', 'left'] as const;
export type Wall = (typeof WALLS)[number];

/** The box's inside width (left to right) and depth (front to back), mm. */
export interface Box {
  W: number;
  D: number;
}

export interface PerimeterInput {
  box: Box;
  /** The target is the point (tx, D) on the back wall. */
  target: { tx: number };
  hit: { wall: Wall; offset: number };
}

/** Which way round is shorter; `tie` when both are the same, `none` when the spot is the target. */
export type Way = 'none' | 'tie' | 'ccw' | 'cw';

export interface PerimeterResult {
  perimeter: Mm;
  /** Half the perimeter, the farthest a spot can be. */
  maxPossible: Mm;
  /** From the spot to the target counter-clockwise: front wall left to right, right wall front to back, and on. */
  ccw: Mm;
  cw: Mm;
  shorter: Mm;
  way: Way;
}

const isWall = (value: unknown): value is Wall => (WALLS as readonly unknown[]).includes(value);
const isFiniteNumber = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value);
const clamp = (value: number, max: number): number => Math.min(Math.max(value, 0), max);

/** Length of a wall: W for front and back, D for left and right. */
export function wallLength(box: Box, wall: Wall): Mm {
  return mm(wall === 'front' || wall === 'back' ? box.W : box.D);
}

/** Perimeter coordinate, counter-clockwise from the front-left corner. */
function coordinate(box: Box, wall: Wall, offset: number): number {
  const { W, D } = box;
  switch (wall) {
    case 'front':
      return offset;
    case 'right':
      return W + offset;
    case 'back':
      return W + D + (W - offset);
    case 'left':
      return 2 * W + D + (D - offset);
  }
}

/**
 * Both ways round from a spot on a wall to the target, and the shorter.
 * @throws DomainError, the first that holds: `bad-box` W, D not finite and above 0; `bad-target` tx outside the back wall;
 *   `bad-wall`; `bad-offset` outside that wall. Within {@link EPS} of an end counts as the end.
 */
export function perimeterDistance(input: PerimeterInput): PerimeterResult {
  // Read as unknown: the same function answers for JSON that nobody has checked.
  const { box, target, hit } = input as unknown as Record<'box' | 'target' | 'hit', Record<string, unknown> | null | undefined>;
  const W = box?.['W'];
  const D = box?.['D'];
  if (!isFiniteNumber(W) || !isFiniteNumber(D) || W <= 0 || D <= 0) throw new DomainError('bad-box');
  const tx = target?.['tx'];
  if (!isFiniteNumber(tx) || tx < -EPS || tx > W + EPS) throw new DomainError('bad-target');
  const wall = hit?.['wall'];
  if (!isWall(wall)) throw new DomainError('bad-wall');
  const size = { W, D };
  const length = wallLength(size, wall);
  const offset = hit?.['offset'];
  if (!isFiniteNumber(offset) || offset < -EPS || offset > length + EPS) throw new DomainError('bad-offset');

  const P = 2 * (W + D);
  const difference = coordinate(size, 'back', clamp(tx, W)) - coordinate(size, wall, clamp(offset, length));
  const ccw = ((difference % P) + P) % P;
  const common = { perimeter: mm(P), maxPossible: mm(P / 2) };
  if (ccw <= EPS || P - ccw <= EPS) return { ...common, ccw: mm(0), cw: mm(P), shorter: mm(0), way: 'none' };
  const cw = P - ccw;
  const way = Math.abs(ccw - cw) <= EPS ? 'tie' : ccw < cw ? 'ccw' : 'cw';
  return { ...common, ccw: mm(ccw), cw: mm(cw), shorter: mm(Math.min(ccw, cw)), way };
}

/** A box whose sizes are decimal text or whole numbers, mm. */
export interface ExactBox {
  W: string | number | Exact;
  D: string | number | Exact;
}

export interface ExactPerimeter {
  perimeter: Exact;
  maxPossible: Exact;
  ccw: Exact;
  cw: Exact;
  shorter: Exact;
  way: Way;
}

/** Twice width and depth together, exactly. */
export function exactPerimeter(box: ExactBox): Exact {
  return exact(box.W).add(exact(box.D)).mul(2);
}

/** Length of a wall, exactly. */
export function exactWallLength(box: ExactBox, wall: Wall): Exact {
  return exact(wall === 'front' || wall === 'back' ? box.W : box.D);
}

function exactCoordinate(W: Exact, D: Exact, wall: Wall, offset: Exact): Exact {
  switch (wall) {
    case 'front':
      return offset;
    case 'right':
      return W.add(offset);
    case 'back':
      return W.add(D).add(W.sub(offset));
    case 'left':
      return W.mul(2).add(D).add(D.sub(offset));
  }
}

/**
 * {@link perimeterDistance} in exact arithmetic, for scoring: the same walk, with no tolerance anywhere.
 * @throws DomainError as {@link perimeterDistance}; `bad-number` when a length is not decimal text or a whole number.
 */
export function exactPerimeterDistance(input: {
  box: ExactBox;
  tx: string | number | Exact;
  hit: { wall: Wall; offset: string | number | Exact };
}): ExactPerimeter {
  const W = exact(input.box.W);
  const D = exact(input.box.D);
  if (compareExact(W, ZERO) <= 0 || compareExact(D, ZERO) <= 0) throw new DomainError('bad-box');
  const tx = exact(input.tx);
  if (compareExact(tx, ZERO) < 0 || compareExact(tx, W) > 0) throw new DomainError('bad-target');
  const { wall } = input.hit;
  if (!isWall(wall)) throw new DomainError('bad-wall');
  const offset = exact(input.hit.offset);
  if (compareExact(offset, ZERO) < 0 || compareExact(offset, exactWallLength({ W, D }, wall)) > 0) throw new DomainError('bad-offset');

  const perimeter = exactPerimeter({ W, D });
  const maxPossible = perimeter.div(2);
  let ccw = exactCoordinate(W, D, 'back', tx).sub(exactCoordinate(W, D, wall, offset));
  // Both coordinates lie in 0..P, so one turn either way is enough.
  if (compareExact(ccw, ZERO) < 0) ccw = ccw.add(perimeter);
  if (compareExact(ccw, perimeter) >= 0) ccw = ccw.sub(perimeter);
  const cw = perimeter.sub(ccw);
  const common = { perimeter, maxPossible, ccw, cw };
  if (compareExact(ccw, ZERO) === 0) return { ...common, shorter: ZERO, way: 'none' };
  const order = compareExact(ccw, cw);
  return { ...common, shorter: order <= 0 ? ccw : cw, way: order === 0 ? 'tie' : order < 0 ? 'ccw' : 'cw' };
}

/** The end of a wall where the tape's zero lies; it reads towards the other end. */
export type TapeOrigin<W extends Wall = Wall> = W extends 'front' | 'back' ? 'left' | 'right' : 'front' | 'back';

/** How the tape lies on each wall. */
export interface WallTapes {
  front: TapeOrigin<'front'>;
  back: TapeOrigin<'back'>;
  left: TapeOrigin<'left'>;
  right: TapeOrigin<'right'>;
}

/** Front and back walls read from the left, left and right walls from the front: the tape is then the offset itself. */
export const USUAL_TAPES: WallTapes = { front: 'left', back: 'left', left: 'front', right: 'front' };

/** Where the tape begins and which way it reads: 'from the left corner to the right'. */
export function tapeWords(wall: Wall, tapes: WallTapes): string {
  switch (tapes[wall]) {
    case 'left':
      return 'from the left corner to the right';
    case 'right':
      return 'from the right corner to the left';
    case 'front':
      return 'from the front corner to the back';
    case 'back':
      return 'from the back corner to the front';
  }
}

/**
 * The offset of a spot whose tape reading is `reading` mm on `wall`, exactly. The same conversion turns an offset into a
 * reading.
 * @throws DomainError `bad-wall`; `bad-offset` when the reading is past either end of the wall.
 */
export function tapeToOffset(box: ExactBox, wall: Wall, reading: string | number | Exact, tapes: WallTapes = USUAL_TAPES): Exact {
  if (!isWall(wall)) throw new DomainError('bad-wall');
  const length = exactWallLength(box, wall);
  const value = exact(reading);
  if (compareExact(value, ZERO) < 0 || compareExact(value, length) > 0) {
    throw new DomainError('bad-offset', `The ${wall} wall is ${toShortText(length)} mm long.`);
  }
  return tapes[wall] === USUAL_TAPES[wall] ? value : length.sub(value);
}

/**
 * A distance measured directly along the walls, checked against the farthest there can be (half the perimeter), exactly.
 * @throws DomainError `bad-distance` below 0 or above P/2.
 */
export function directDistance(box: ExactBox, distance: string | number | Exact): Exact {
  const value = exact(distance);
  const most = exactPerimeter(box).div(2);
  if (compareExact(value, ZERO) < 0 || compareExact(value, most) > 0) {
    throw new DomainError('bad-distance', `Half way round the box is ${toShortText(most)} mm.`);
  }
  return value;
}
