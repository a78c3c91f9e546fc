import * as z from 'zod/mini';
import { describe, expect, it } from 'vitest';
import { exact } from './exact';
import { checkValue, choiceField, decimalField, orderField, textField, wholeField } from './fields';

const decimal = decimalField({ what: 'a number', range: '0 to 240', most: exact(240) });

describe('decimal fields', () => {
  it.each([['12.50', '12.5'], [' 7 ', '7'], ['12,5', '12.5'], ['0', '0'], ['240', '240'], ['-0', '0']])('%j is kept as %s', (typed, kept) => {
    expect(checkValue(decimal, typed)).toEqual({ ok: true, value: kept });
  });
  it.each([['', 'a number'], ['abc', 'a number'], [12, 'a number'], [null, 'a number'], [undefined, 'a number'], ['1.25', 'a number'], ['1,200', 'a number'], ['-0.1', '0 to 240'], ['240.1', '0 to 240']])(
    '%j is answered “%s”',
    (typed, message) => expect(checkValue(decimal, typed)).toEqual({ ok: false, fields: [{ path: '', message }] }),
  );
  it('can ask for more than the least, and for a step', () => {
    const above = decimalField({ what: 'what', range: 'range', above: true, fits: (value) => value.d === 1n });
    expect(checkValue(above, '0')).toMatchObject({ ok: false, fields: [{ message: 'range' }] });
    expect(checkValue(above, '0.5')).toMatchObject({ ok: false, fields: [{ message: 'range' }] });
    expect(checkValue(above, '1')).toEqual({ ok: true, value: '1' });
  });
});

describe('other fields', () => {
  it('whole numbers have one message for every way to be wrong', () => {
    const field = wholeField(0, 5, '0 to 5');
    expect(checkValue(field, 5)).toEqual({ ok: true, value: 5 });
    for (const bad of [6, -1, 2.5, '3', null, undefined, NaN]) expect(checkValue(field, bad)).toEqual({ ok: false, fields: [{ path: '', message: '0 to 5' }] });
  });
  it('texts are trimmed and held to their length', () => {
    const field = textField(5, { required: 'needed', tooLong: 'long' });
    expect(checkValue(field, '  ab\n ')).toEqual({ ok: true, value: 'ab' });
    expect(checkValue(field, ' ')).toMatchObject({ fields: [{ message: 'needed' }] });
    expect(checkValue(field, undefined)).toMatchObject({ fields: [{ message: 'needed' }] });
    expect(checkValue(field, 'abcdef')).toMatchObject({ fields: [{ message: 'long' }] });
    expect(checkValue(field, 'a\0b')).toMatchObject({ ok: false });
    expect(checkValue(textField(5, { tooLong: 'long' }), '')).toEqual({ ok: true, value: '' });
  });
  it('choices and orders', () => {
    expect(checkValue(choiceField(['a', 'b'], 'choose'), 'b')).toEqual({ ok: true, value: 'b' });
    expect(checkValue(choiceField(['a', 'b'], 'choose'), 'c')).toMatchObject({ fields: [{ message: 'choose' }] });
    const order = orderField(['a', 'b', 'c'], 'each once');
    expect(checkValue(order, ['c', 'a', 'b'])).toEqual({ ok: true, value: ['c', 'a', 'b'] });
    for (const bad of [['a', 'b'], ['a', 'b', 'b'], ['a', 'b', 'd'], 'abc', undefined]) {
      expect(checkValue(order, bad)).toMatchObject({ ok: false, fields: [{ message: 'each once' }] });
    }
  });
  it('give one message for each path, with dots for nesting', () => {
    const schema = z.object({ box: z.object({ width: decimal }), list: z.array(wholeField(0, 1, 'bit')) });
    expect(checkValue(schema, { box: { width: 'x' }, list: [0, 7] })).toEqual({
      ok: false,
      fields: [
        { path: 'box.width', message: 'a number' },
        { path: 'list.1', message: 'bit' },
      ],
    });
  });
});
