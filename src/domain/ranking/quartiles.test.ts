import { quantile } from 'd3-array';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exact, toDecimalText } from '../exact';
import { quartiles } from './quartiles';

describe('quartiles', () => {
  it('are d3-array’s quantile, which uses the same method', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 1, maxLength: 40 }), (values) => {
        const q = quartiles(values.map(exact));
        expect(q?.count).toBe(values.length);
        const pairs = [[q?.least, 0], [q?.lower, 0.25], [q?.median, 0.5], [q?.upper, 0.75], [q?.most, 1]] as const;
        for (const [got, p] of pairs) expect(got?.valueOf()).toBeCloseTo(quantile(values, p) ?? NaN, 9);
      }),
    );
  });
  it('are exact, and there are none of an empty field', () => {
    // The example of the spreadsheet function QUARTILE.INC in its documentation: 1, 2, 4, 7, 8, 9, 10, 12 has lower quartile 3.5.
    const q = quartiles([1, 2, 4, 7, 8, 9, 10, 12].map(exact));
    expect(q && [q.least, q.lower, q.median, q.upper, q.most].map(toDecimalText)).toEqual(['1', '3.5', '7.5', '9.25', '12']);
    expect(quartiles([])).toBeNull();
    expect(toDecimalText(quartiles([exact('71.16')])?.upper ?? exact(0))).toBe('71.16');
  });
});
