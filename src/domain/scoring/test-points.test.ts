import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exact, toShortText } from '../exact';
import { checkValue } from '../fields';
import { groupsAddUp, pointsFit, questionGroupsField, testMaxField, testPointsSchema, type TestShape } from './test-points';

const SHAPE: TestShape = {
  max: '50',
  groups: [
    { key: 'a', name: 'Part A', max: '20' },
    { key: 'b', name: 'Part B', max: '30' },
  ],
};
const check = (value: unknown, shape = SHAPE) => checkValue(testPointsSchema(shape), value);

describe('points of a test', () => {
  it.each([
    [{ points: '12.50' }, { points: '12.5' }],
    [{ points: '0' }, { points: '0' }],
    [{ points: '50' }, { points: '50' }],
    [{ points: '12,5', groups: {} }, { points: '12.5' }],
    [{ points: '31', groups: { a: '', b: ' ' } }, { points: '31' }],
    [{ groups: { a: '12.5', b: '19' } }, { points: '31.5', groups: { a: '12.5', b: '19' } }],
    [{ points: '', groups: { a: '12.5', b: '19' } }, { points: '31.5', groups: { a: '12.5', b: '19' } }],
    [{ points: '31.5', groups: { b: '19', a: '12.5' } }, { points: '31.5', groups: { a: '12.5', b: '19' } }],
  ])('%j are kept as %j, and once more unchanged', (typed, kept) => {
    const result = check(typed);
    expect(result).toEqual({ ok: true, value: kept });
    expect(check(kept)).toEqual({ ok: true, value: kept });
    expect(pointsFit(SHAPE, kept)).toBe(true);
  });

  it.each([
    [{}, 'points', 'Write the points of the test.'],
    [{ points: ' ' }, 'points', 'Write the points of the test.'],
    [{ points: 'ten' }, 'points', 'Write the points as a number, such as 12.5.'],
    [{ points: 12 }, 'points', 'Write the points as a number, such as 12.5.'],
    [{ points: '50.5' }, 'points', 'The test is out of 50: the points can be 0 to 50.'],
    [{ points: '-1' }, 'points', 'The test is out of 50: the points can be 0 to 50.'],
    [{ points: '12.25' }, 'points', 'Points go by whole or half numbers, such as 12 or 12.5.'],
    [{ points: '32', groups: { a: '12.5', b: '19' } }, 'points', 'The groups add up to 31.5, but the total says 32.'],
    [{ points: '12.5', groups: { a: '12.5' } }, 'groups.b', 'Write the points of Part B too, or leave all groups blank.'],
    [{ groups: { a: '20.5', b: '1' } }, 'groups.a', 'Part A is out of 20: the points can be 0 to 20.'],
    [{ groups: { a: '1', b: '1', c: '1' } }, 'groups.c', 'This test has no such question group.'],
    [{ points: '1', bonus: '3' }, '', 'Something here does not belong to this form. Load the page again.'],
    [null, '', 'Write the points of the test.'],
  ])('%j are refused beside “%s”', (typed, path, message) => {
    const result = check(typed);
    expect(result.ok ? [] : result.fields).toContainEqual({ path, message });
  });

  it('have a total that is the sum of their groups, exactly', () => {
    const halves = (max: number) => fc.integer({ min: 0, max: max * 2 }).map((n) => toShortText(exact(n).div(2), 1));
    fc.assert(
      fc.property(halves(20), halves(30), (a, b) => {
        const result = check({ groups: { a, b } });
        expect(result.ok && result.value.points).toBe(toShortText(exact(a).add(exact(b)), 1));
      }),
    );
  });

  it('no longer fit when the test was made smaller or its groups changed', () => {
    expect(pointsFit({ max: '30', groups: [] }, { points: '30.5' })).toBe(false);
    expect(pointsFit({ max: '50', groups: [] }, { points: '31.5', groups: { a: '12.5', b: '19' } })).toBe(false);
    expect(pointsFit({ ...SHAPE, groups: [{ key: 'a', name: 'A', max: '10' }, { key: 'b', name: 'B', max: '40' }] }, { points: '31.5', groups: { a: '12.5', b: '19' } })).toBe(false);
    expect(pointsFit(SHAPE, { points: '40', groups: { a: '12.5', b: '19' } })).toBe(false);
    expect(pointsFit(SHAPE, { points: 'many' })).toBe(false);
  });
});

describe('the shape of a test', () => {
  it('has a most of whole or half points above 0', () => {
    expect(checkValue(testMaxField(), '45.5')).toEqual({ ok: true, value: '45.5' });
    for (const bad of ['0', '-1', '1.25', 'x', 30, '10000.5']) expect(checkValue(testMaxField(), bad).ok).toBe(false);
  });
  it('has groups that add up', () => {
    expect(groupsAddUp(SHAPE)).toBeNull();
    expect(groupsAddUp({ max: '50', groups: [] })).toBeNull();
    expect(groupsAddUp({ ...SHAPE, max: '45' })).toBe('The groups’ points add up to 50, but the test is out of 45.');
  });
  it('has groups that can be told apart', () => {
    const field = questionGroupsField();
    expect(checkValue(field, SHAPE.groups)).toEqual({ ok: true, value: SHAPE.groups });
    const twice = checkValue(field, [SHAPE.groups[0], { ...SHAPE.groups[0], name: 'part a' }]);
    expect(twice.ok ? [] : twice.fields.map(({ path }) => path)).toEqual(['1.key', '1.name']);
    expect(checkValue(field, [{ key: 'A B', name: 'x', max: '1' }])).toMatchObject({ ok: false, fields: [{ path: '0.key' }] });
    expect(checkValue(field, [{ key: 'a', name: ' ', max: '1' }])).toMatchObject({ ok: false, fields: [{ path: '0.name' }] });
  });
});
