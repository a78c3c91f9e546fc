import { describe, expect, it } from 'vitest';
import { DomainError } from './domain-error';
import { degrees, mm, seconds } from './units';

describe('units', () => {
  it('take finite numbers as they are', () => expect([mm(12.5), degrees(-90), seconds(0)]).toEqual([12.5, -90, 0]));
  it.each([NaN, Infinity, -Infinity])('refuse %s', (value) => {
    for (const make of [mm, degrees, seconds]) expect(() => make(value)).toThrow(DomainError);
  });
});
