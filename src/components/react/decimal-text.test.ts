import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compareDecimals, stepDecimal, tidyDecimal } from './decimal-text';

describe('tidyDecimal', () => {
  it.each([
    ['287', '287'],
    ['12,5', '12.5'],
    [' 1 513 ', '1513'],
    ['.5', '0.5'],
    ['−3', '-3'],
    ['7.', '7'],
  ])('reads %j as %j', (typed, tidy) => expect(tidyDecimal(typed)).toBe(tidy));

  it.each(['', 'abc', '1.2.3', '1e3', '--1', '12 mm'])('does not read %j', (typed) => expect(tidyDecimal(typed)).toBeNull());
});

describe('stepDecimal', () => {
  it('adds tenths without floating point', () => {
    expect(stepDecimal('0.1', '0.2', 1)).toBe('0.3');
    expect(stepDecimal('287', '0.5', 1)).toBe('287.5');
    expect(stepDecimal('0', '1', -1)).toBe('-1');
  });

  it('stays within its limits, and starts at the least', () => {
    expect(stepDecimal('400', '1', 1, { max: '400' })).toBe('400');
    expect(stepDecimal('399.5', '1', 1, { max: '400' })).toBe('400.0');
    expect(stepDecimal('0', '1', -1, { min: '0' })).toBe('0');
    expect(stepDecimal('', '1', 1, { min: '1' })).toBe('1');
    expect(stepDecimal('what', '1', 1)).toBe('0');
  });

  it('there and back again is where it was', () => {
    fc.assert(
      fc.property(fc.integer({ min: -99999, max: 99999 }), fc.constantFrom('1', '0.5', '0.1', '10'), fc.integer({ min: 1, max: 50 }), (n, step, times) => {
        const value = (n / 10).toFixed(1);
        const there = stepDecimal(value, step, times);
        expect(compareDecimals(there, value)).toBe(1);
        expect(compareDecimals(stepDecimal(there, step, -times), value)).toBe(0);
      }),
    );
  });
});
