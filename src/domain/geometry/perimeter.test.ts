import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { DomainError } from '../domain-error';
import { exact, toDecimalText, toShortText } from '../exact';
import {
  directDistance,
  exactPerimeterDistance,
  perimeterDistance,
  tapeToOffset,
  tapeWords,
  USUAL_TAPES,
  wallLength,
  WALLS,
  type PerimeterInput,
  type Wall,
  type WallTapes,
} from './perimeter';

const tenths = (n: number): string => toShortText(exact(n).div(10), 1);
/** A box, a target and a spot, all in whole tenths of a millimetre. */
const situation = fc
  .record({ W: fc.integer({ min: 1, max: 50_000 }), D: fc.integer({ min: 1, max: 50_000 }), wall: fc.constantFrom(...WALLS) })
  .chain(({ W, D, wall }) =>
    fc.record({
      W: fc.constant(W),
      D: fc.constant(D),
      wall: fc.constant(wall),
      tx: fc.integer({ min: 0, max: W }),
      offset: fc.integer({ min: 0, max: wall === 'front' || wall === 'back' ? W : D }),
    }),
  );
const numbers = (s: { W: number; D: number; wall: Wall; tx: number; offset: number }): PerimeterInput => ({
  box: { W: s.W / 10, D: s.D / 10 },
  target: { tx: s.tx / 10 },
  hit: { wall: s.wall, offset: s.offset / 10 },
});
const exactly = (s: { W: number; D: number; wall: Wall; tx: number; offset: number }) =>
  exactPerimeterDistance({ box: { W: tenths(s.W), D: tenths(s.D) }, tx: tenths(s.tx), hit: { wall: s.wall, offset: tenths(s.offset) } });

/** An independent walk: the box as a ring of four corners, the target reached by going along its sides one after another. */
function walk(s: { W: number; D: number; wall: Wall; tx: number; offset: number }): number {
  const point: Record<Wall, [number, number]> = { front: [s.offset, 0], back: [s.offset, s.D], left: [0, s.offset], right: [s.W, s.offset] };
  const [x, y] = point[s.wall];
  // Going round by the left or by the right; along the back wall straight away.
  if (s.wall === 'back') return Math.min(Math.abs(x - s.tx), 2 * (s.W + s.D) - Math.abs(x - s.tx));
  const byRight = s.wall === 'left' ? s.D - y + s.tx : s.W - x + (s.D - y) + (s.W - s.tx);
  return Math.min(byRight, 2 * (s.W + s.D) - byRight);
}

describe('perimeterDistance', () => {
  it('gives two ways that make the whole perimeter, and the shorter is at most half', () => {
    fc.assert(
      fc.property(situation, (s) => {
        const r = perimeterDistance(numbers(s));
        expect(r.perimeter).toBeCloseTo((2 * (s.W + s.D)) / 10, 8);
        expect(r.ccw + r.cw).toBeCloseTo(r.perimeter, 8);
        expect(r.shorter).toBeLessThanOrEqual(r.maxPossible + 1e-9);
        expect(r.shorter).toBe(Math.min(r.ccw, r.cw));
      }),
    );
  });

  it('agrees with the exact walk, and both with a walk of another kind', () => {
    fc.assert(
      fc.property(situation, (s) => {
        const inNumbers = perimeterDistance(numbers(s));
        const inFractions = exactly(s);
        for (const key of ['perimeter', 'maxPossible', 'ccw', 'cw', 'shorter'] as const) {
          expect(inNumbers[key]).toBeCloseTo(inFractions[key].valueOf(), 7);
        }
        expect(inNumbers.way).toBe(inFractions.way);
        expect(inFractions.shorter.mul(10).valueOf()).toBe(walk(s));
      }),
      { numRuns: 500 },
    );
  });

  it('changes by as much as the spot is moved round the box, whatever the distance', () => {
    const at = (W: number, D: number, s: number): { wall: Wall; offset: number } => {
      const P = 2 * (W + D);
      const c = ((s % P) + P) % P;
      if (c < W) return { wall: 'front', offset: c };
      if (c < W + D) return { wall: 'right', offset: c - W };
      if (c < 2 * W + D) return { wall: 'back', offset: 2 * W + D - c };
      return { wall: 'left', offset: 2 * (W + D) - c };
    };
    const size = fc.integer({ min: 1, max: 5000 });
    fc.assert(
      fc.property(size, size, fc.nat({ max: 40_000 }), fc.integer({ min: -40_000, max: 40_000 }), fc.nat(), (W, D, start, step, t) => {
        const tx = t % (W + 1);
        const P = 2 * (W + D);
        const before = exactPerimeterDistance({ box: { W, D }, tx, hit: at(W, D, start) });
        const after = exactPerimeterDistance({ box: { W, D }, tx, hit: at(W, D, start + step) });
        const turn = ((before.ccw.valueOf() - after.ccw.valueOf() - step) % P) + 0;
        expect(Math.abs(turn) % P).toBe(0);
      }),
    );
  });

  it('names a corner on either wall alike', () => {
    fc.assert(
      fc.property(situation, ({ W, D, tx }) => {
        const pairs: [Wall, number, Wall, number][] = [
          ['front', 0, 'left', 0],
          ['front', W, 'right', 0],
          ['back', 0, 'left', D],
          ['back', W, 'right', D],
        ];
        for (const [wallA, a, wallB, b] of pairs) {
          const one = exactPerimeterDistance({ box: { W, D }, tx, hit: { wall: wallA, offset: a } });
          const other = exactPerimeterDistance({ box: { W, D }, tx, hit: { wall: wallB, offset: b } });
          expect(toDecimalText(one.ccw)).toBe(toDecimalText(other.ccw));
          expect(one.way).toBe(other.way);
        }
      }),
    );
  });

  it('is a tie exactly opposite the target, and nowhere else', () => {
    fc.assert(
      fc.property(situation, (s) => {
        const opposite = { ...s, wall: 'front' as const, offset: s.W - s.tx };
        expect(exactly(opposite).way).toBe('tie');
        expect(perimeterDistance(numbers(opposite)).way).toBe('tie');
        const same = s.wall === 'front' && s.offset === s.W - s.tx;
        const corner = (s.wall === 'left' && s.offset === 0 && s.tx === s.W) || (s.wall === 'right' && s.offset === 0 && s.tx === 0);
        if (!same && !corner) expect(exactly(s).way).not.toBe('tie');
      }),
    );
  });

  it('is nothing on the target itself', () => {
    const r = exactPerimeterDistance({ box: { W: '812.4', D: '1219.2' }, tx: '406.2', hit: { wall: 'back', offset: '406.2' } });
    expect([r.ccw, r.cw, r.shorter].map(toDecimalText)).toEqual(['0', '4063.2', '0']);
    expect(r.way).toBe('none');
  });

  it('clamps what is within a billionth of a millimetre', () => {
    const hit = (offset: number) => perimeterDistance({ box: { W: 1000, D: 600 }, target: { tx: 500 }, hit: { wall: 'back', offset } });
    expect(hit(1000 + 5e-10).shorter).toBe(500);
    expect(hit(-5e-10).shorter).toBe(500);
    expect(() => hit(1000 + 2e-9)).toThrow(expect.objectContaining({ code: 'bad-offset' }) as DomainError);
  });

  it.each([
    ['bad-box', { box: { W: '1000', D: 600 }, target: null, hit: null }],
    ['bad-box', { box: { W: NaN, D: 600 }, target: { tx: 1 }, hit: { wall: 'back', offset: 1 } }],
    ['bad-box', { target: { tx: 1 } }],
    ['bad-target', { box: { W: 1000, D: 600 }, target: { tx: null }, hit: { wall: 'roof', offset: 1 } }],
    ['bad-wall', { box: { W: 1000, D: 600 }, target: { tx: 1000 }, hit: { wall: 'roof', offset: -1 } }],
    ['bad-wall', { box: { W: 1000, D: 600 }, target: { tx: 0 } }],
    ['bad-offset', { box: { W: 1000, D: 600 }, target: { tx: 1 }, hit: { wall: 'left', offset: 700 } }],
    ['bad-offset', { box: { W: 1000, D: 600 }, target: { tx: 1 }, hit: { wall: 'left', offset: '1' } }],
    ['bad-offset', { box: { W: 1000, D: 600 }, target: { tx: 1 }, hit: { wall: 'left', offset: true } }],
  ])('reports the first thing that is wrong: %s', (code, input) => {
    expect(() => perimeterDistance(input as unknown as PerimeterInput)).toThrow(expect.objectContaining({ code }) as DomainError);
  });

  it.each([
    ['bad-box', { box: { W: '0', D: '600' }, tx: '0', hit: { wall: 'back' as const, offset: '0' } }],
    ['bad-target', { box: { W: '1000', D: '600' }, tx: '1000.1', hit: { wall: 'back' as const, offset: '0' } }],
    ['bad-wall', { box: { W: '1000', D: '600' }, tx: '1000', hit: { wall: 'roof' as Wall, offset: '0' } }],
    ['bad-offset', { box: { W: '1000', D: '600' }, tx: '1000', hit: { wall: 'right' as const, offset: '600.1' } }],
    ['bad-number', { box: { W: '1000', D: '600' }, tx: 12.5, hit: { wall: 'right' as const, offset: '0' } }],
  ])('the exact walk reports %s as well', (code, input) => {
    expect(() => exactPerimeterDistance(input)).toThrow(expect.objectContaining({ code }) as DomainError);
  });
});

describe('tape readings', () => {
  const box = { W: '1000', D: '600.5' };
  const turned: WallTapes = { front: 'right', back: 'right', left: 'back', right: 'back' };

  it('are the offset itself where the tape begins at the left or the front', () => {
    for (const wall of WALLS) expect(toDecimalText(tapeToOffset(box, wall, '12.5', USUAL_TAPES))).toBe('12.5');
  });
  it('count from the other end where it begins there', () => {
    expect(WALLS.map((wall) => toDecimalText(tapeToOffset(box, wall, '12.5', turned)))).toEqual(['987.5', '588', '987.5', '588']);
  });
  it('give the reading back when converted twice', () => {
    fc.assert(
      fc.property(situation, ({ W, D, wall, offset }) => {
        const size = { W: tenths(W), D: tenths(D) };
        expect(toDecimalText(tapeToOffset(size, wall, tapeToOffset(size, wall, tenths(offset), turned), turned))).toBe(tenths(offset));
      }),
    );
  });
  it('end at the corner', () => {
    expect(toDecimalText(tapeToOffset(box, 'left', '600.5'))).toBe('600.5');
    expect(() => tapeToOffset(box, 'left', '600.6')).toThrow(expect.objectContaining({ code: 'bad-offset' }) as DomainError);
    expect(() => tapeToOffset(box, 'left', '-0.1', turned)).toThrow(expect.objectContaining({ code: 'bad-offset' }) as DomainError);
    expect(() => tapeToOffset(box, 'roof' as Wall, '1')).toThrow(expect.objectContaining({ code: 'bad-wall' }) as DomainError);
  });
  it('say where they begin', () => {
    expect(WALLS.map((wall) => tapeWords(wall, turned))).toEqual([
      'from the right corner to the left',
      'from the back corner to the front',
      'from the right corner to the left',
      'from the back corner to the front',
    ]);
    expect(tapeWords('left', USUAL_TAPES)).toBe('from the front corner to the back');
    expect(tapeWords('front', USUAL_TAPES)).toBe('from the left corner to the right');
  });
});

describe('a distance measured directly', () => {
  const box = { W: '812.4', D: '1219.2' };
  it('goes from nothing to half the perimeter', () => {
    expect(toDecimalText(directDistance(box, '0'))).toBe('0');
    expect(toDecimalText(directDistance(box, '2031.6'))).toBe('2031.6');
  });
  it.each(['-0.1', '2031.7'])('refuses %s', (text) => {
    expect(() => directDistance(box, text)).toThrow(expect.objectContaining({ code: 'bad-distance' }) as DomainError);
  });
});

it('walls are as long as the box is wide or deep', () => {
  expect(WALLS.map((wall) => wallLength({ W: 1000, D: 600 }, wall))).toEqual([1000, 600, 1000, 600]);
});
