import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DomainError } from './domain-error';
import {
  compareExact,
  exact,
  fromRatioText,
  fromStored,
  groupThousands,
  hasAtMostDecimals,
  isHalfStep,
  readDecimal,
  roundHalfUp,
  sumExact,
  toDecimalText,
  toRatioText,
  toShortText,
  toStored,
  tryExact,
} from './exact';

const decimals = fc.tuple(fc.bigInt({ min: -(10n ** 12n), max: 10n ** 12n }), fc.integer({ min: 0, max: 6 }));
const decimalText = decimals.map(([n, places]) => {
  const digits = String(n < 0n ? -n : n).padStart(places + 1, '0');
  const text = places === 0 ? digits : `${digits.slice(0, -places)}.${digits.slice(-places)}`;
  return n < 0n ? `-${text}` : text;
});
const ratio = fc.tuple(fc.bigInt({ min: -(10n ** 15n), max: 10n ** 15n }), fc.bigInt({ min: 1n, max: 10n ** 9n }));

describe('what is a number', () => {
  it.each([
    ['12.5', '25/2'],
    ['0', '0/1'],
    ['-0', '0/1'],
    ['007.50', '15/2'],
    [42, '42/1'],
    [-3n, '-3/1'],
    ['-1.25', '-5/4'],
    ['0.1', '1/10'],
    ['99999999999999999999.9', '999999999999999999999/10'],
  ])('%s is %s', (value, text) => expect(toRatioText(exact(value))).toBe(text));

  it.each(['', ' ', '12,5', '1e3', '.5', '5.', '+5', '1/2', '0x10', '1.(3)', '1 1/2', 'NaN', 'Infinity', '--1', '1'.repeat(101)])(
    'the text “%s” is none',
    (text) => expect(tryExact(text)).toBeNull(),
  );
  it.each([12.5, NaN, Infinity, 2 ** 53, null, undefined, true, {}, []])('%s is none', (value) => expect(tryExact(value)).toBeNull());
  it('is refused with a code', () => {
    expect(() => exact('twelve')).toThrow(expect.objectContaining({ code: 'bad-number' }) as DomainError);
    expect(() => fromRatioText('1/0')).toThrow(DomainError);
    expect(() => fromRatioText('1.5/2')).toThrow(DomainError);
    expect(() => fromStored({ numerator: '1', denominator: '-2' })).toThrow(DomainError);
  });
});

describe('text and storage', () => {
  it('gives back the ratio that was stored, in lowest terms', () => {
    fc.assert(
      fc.property(ratio, ([p, q]) => {
        const value = fromRatioText(`${p}/${q}`);
        expect(compareExact(fromStored(toStored(value)), value)).toBe(0);
        expect(compareExact(fromRatioText(toRatioText(value)), value)).toBe(0);
        expect(value.s * value.n * q).toBe(p * value.d);
        expect(value.d > 0n).toBe(true);
      }),
    );
  });

  it('gives back decimal text without its trailing zeros', () => {
    fc.assert(
      fc.property(decimalText, (text) => {
        const out = toDecimalText(exact(text));
        expect(out).not.toBeNull();
        expect(compareExact(exact(out ?? ''), exact(text))).toBe(0);
        expect(out).not.toMatch(/\.\d*0$/);
      }),
    );
    expect(toDecimalText(fromRatioText('1/3'))).toBeNull();
  });

  it('shows the exact decimal where it is short, else two places', () => {
    expect(toShortText(exact('612.50'))).toBe('612.5');
    expect(toShortText(fromRatioText('130/3'))).toBe('43.33');
    expect(toShortText(exact('0.125'))).toBe('0.13');
  });

  it('sets thousands apart, not in the decimals', () => {
    expect(['0', '999', '1000', '1234567.8901', '-1600.5'].map(groupThousands)).toEqual(['0', '999', '1,000', '1,234,567.8901', '-1,600.5']);
  });
});

describe('rounding half up from the exact value', () => {
  it.each([
    ['7873/200', 2, '39.37'],
    ['15239/200', 2, '76.20'],
    ['5693/80', 2, '71.16'],
    ['130/3', 2, '43.33'],
    ['1/200', 2, '0.01'],
    ['-1/200', 2, '0.00'],
    ['-3/200', 2, '-0.01'],
    ['1/2', 0, '1'],
    ['100/1', 2, '100.00'],
  ])('%s at %i places is %s', (text, places, out) => expect(roundHalfUp(fromRatioText(text), places)).toBe(out));

  it('is at most half a unit off, and up when exactly half', () => {
    fc.assert(
      fc.property(ratio, fc.integer({ min: 0, max: 4 }), ([p, q], places) => {
        const value = fromRatioText(`${p}/${q}`);
        const off = exact(roundHalfUp(value, places)).sub(value).mul(10n ** BigInt(places), 1n);
        expect(off.compare('-1/2') > 0).toBe(true);
        expect(off.compare('1/2') <= 0).toBe(true);
      }),
    );
  });
});

describe('order and sums', () => {
  it('orders as cross-multiplied integers do', () => {
    fc.assert(
      fc.property(ratio, ratio, ([a, b], [c, d]) => {
        const left = a * d;
        const right = c * b;
        expect(compareExact(fromRatioText(`${a}/${b}`), fromRatioText(`${c}/${d}`))).toBe(left < right ? -1 : left > right ? 1 : 0);
      }),
    );
  });
  it('does not care in which order a sum is taken', () => {
    fc.assert(fc.property(fc.array(decimalText), (texts) => {
      expect(compareExact(sumExact(texts.map(exact)), sumExact([...texts].reverse().map(exact)))).toBe(0);
    }));
    expect(toRatioText(sumExact(['0.1', '0.2'].map(exact)))).toBe('3/10');
    expect(toRatioText(sumExact([]))).toBe('0/1');
  });
  it('knows halves and decimals', () => {
    expect(['3', '3.5', '3.25', '0'].map((text) => isHalfStep(exact(text)))).toEqual([true, true, false, true]);
    expect(isHalfStep(fromRatioText('1/3'))).toBe(false);
    expect(hasAtMostDecimals(exact('12.5'), 1)).toBe(true);
    expect(hasAtMostDecimals(exact('12.55'), 1)).toBe(false);
  });
});

describe('what people type', () => {
  it.each([
    ['12.5', '12.5'],
    [' 012.50 ', '12.5'],
    ['12,5', '12.5'],
    ['12,55', '12.55'],
    ['.5', '0.5'],
    ['-4', '-4'],
    ['1,200', null],
    ['1,200.5', null],
    ['1.200,5', null],
    ['12 mm', null],
    ['', null],
    ['1e2', null],
    ['½', null],
  ])('“%s” is read as %s', (typed, text) => expect(readDecimal(typed)).toBe(text));
});
