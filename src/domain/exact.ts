/**
 * Exact rational numbers. Everything that decides a score, a place or a sum goes through here; a float never does.
 *
 * A number comes in as decimal text ("12.5"), as a whole number, or as a ratio ("25/2"), and means exactly that rational.
 */
import Fraction from 'fraction.js';
import { DomainError } from './domain-error';

/** An exact rational number, always in lowest terms with a positive denominator. */
export type Exact = Fraction;

/** Two integers as decimal text, the form in which an exact number is stored. */
export interface StoredExact {
  numerator: string;
  denominator: string;
}

const DECIMAL = /^-?\d+(?:\.\d+)?$/;
const RATIO = /^(-?\d+)\/(\d+)$/;
/** Longer decimal text is nobody's measurement; refusing it keeps the arithmetic cheap. */
const LONGEST_DECIMAL = 100;

export const ZERO: Exact = new Fraction(0);
export const ONE: Exact = new Fraction(1);
const HALF: Exact = new Fraction(1, 2);

/** Whether `text` is plain decimal text: optional minus, digits, optionally a point and more digits. */
export function isDecimalText(text: string): boolean {
  return text.length <= LONGEST_DECIMAL && DECIMAL.test(text);
}

/**
 * The rational that `value` means, or null when it means none. A number that is not whole is null: its decimals were lost
 * before it came here.
 */
export function tryExact(value: unknown): Exact | null {
  if (value instanceof Fraction) return value;
  if (typeof value === 'bigint') return new Fraction(value);
  if (typeof value === 'number') return Number.isSafeInteger(value) ? new Fraction(BigInt(value)) : null;
  if (typeof value !== 'string' || !isDecimalText(value)) return null;
  const [whole = '', decimals = ''] = value.split('.');
  return new Fraction(BigInt(whole + decimals), 10n ** BigInt(decimals.length));
}

/**
 * The rational that `value` means.
 * @throws DomainError `bad-number` for anything that is not decimal text or a whole number.
 */
export function exact(value: string | number | bigint | Exact): Exact {
  const result = tryExact(value);
  if (result === null) throw new DomainError('bad-number', 'That is not a number we can keep exactly.');
  return result;
}

/** "p/q" in lowest terms, q ≥ 1: "90/1", "-5/2". */
export function toRatioText(value: Exact): string {
  return `${value.s * value.n}/${value.d}`;
}

/**
 * The rational written "p/q".
 * @throws DomainError `bad-number` when the text has another form or q is 0.
 */
export function fromRatioText(text: string): Exact {
  const match = RATIO.exec(text);
  const [, p = '', q = '0'] = match ?? [];
  if (match === null || BigInt(q) === 0n) throw new DomainError('bad-number', 'That is not a ratio of two whole numbers.');
  return new Fraction(BigInt(p), BigInt(q));
}

/** Numerator and denominator as decimal text, for two numeric columns. */
export function toStored(value: Exact): StoredExact {
  return { numerator: String(value.s * value.n), denominator: String(value.d) };
}

/** @throws DomainError `bad-number` when the two are not integers or the denominator is not positive. */
export function fromStored(stored: StoredExact): Exact {
  return fromRatioText(`${stored.numerator}/${stored.denominator}`);
}

/** Negative, zero or positive as `a` is less than, equal to or greater than `b`. */
export function compareExact(a: Exact, b: Exact): number {
  const left = a.s * a.n * b.d;
  const right = b.s * b.n * a.d;
  return left < right ? -1 : left > right ? 1 : 0;
}

/** The sum; 0 for none. */
export function sumExact(values: Iterable<Exact>): Exact {
  let total = ZERO;
  for (const value of values) total = total.add(value);
  return total;
}

/** Whether the number is a whole number of halves: 3, 12.5. */
export function isHalfStep(value: Exact): boolean {
  return value.d === 1n || value.d === 2n;
}

/** Whether the number has at most `places` decimals. */
export function hasAtMostDecimals(value: Exact, places: number): boolean {
  return 10n ** BigInt(places) % value.d === 0n;
}

/** The greatest whole number not above the rational. */
function floorOf(value: Exact): bigint {
  const n = value.s * value.n;
  const q = n / value.d;
  return n < 0n && n % value.d !== 0n ? q - 1n : q;
}

function decimalOf(scaled: bigint, places: number): string {
  const negative = scaled < 0n;
  const digits = String(negative ? -scaled : scaled).padStart(places + 1, '0');
  const cut = digits.length - places;
  return (negative ? '-' : '') + (places === 0 ? digits : `${digits.slice(0, cut)}.${digits.slice(cut)}`);
}

/**
 * Rounded half up (towards +∞) from the exact value, always with `places` decimals: 7873/200 gives "39.37" at two.
 */
export function roundHalfUp(value: Exact, places: number): string {
  return decimalOf(floorOf(value.mul(10n ** BigInt(places), 1n).add(HALF)), places);
}

/** The exact decimal text without trailing zeros, or null when the decimals never end (1/3). */
export function toDecimalText(value: Exact): string | null {
  let rest = value.d;
  let twos = 0;
  let fives = 0;
  while (rest % 2n === 0n) {
    rest /= 2n;
    twos += 1;
  }
  while (rest % 5n === 0n) {
    rest /= 5n;
    fives += 1;
  }
  if (rest !== 1n) return null;
  const places = Math.max(twos, fives);
  return decimalOf(floorOf(value.mul(10n ** BigInt(places), 1n)), places);
}

/** The exact decimal where it ends, otherwise rounded half up to `places`. For people, not for further sums. */
export function toShortText(value: Exact, places = 2): string {
  const text = hasAtMostDecimals(value, places) ? toDecimalText(value) : null;
  return text ?? roundHalfUp(value, places);
}

/** Decimal text with its thousands set apart for reading: "1600" gives "1,600"; a four-digit decimal too. */
export function groupThousands(text: string): string {
  const [whole = '', decimals] = text.split('.');
  const grouped = whole.replace(/\B(?=(?:\d{3})+$)/g, ',');
  return decimals === undefined ? grouped : `${grouped}.${decimals}`;
}

/**
 * What a person typed as a number, as canonical decimal text ("012.50" gives "12.5"), or null when it is none or could be
 * read in two ways. A comma may stand for the decimal point ("12,5"), but "1,200" could mean two things and is null.
 */
export function readDecimal(typed: string): string | null {
  const trimmed = typed.trim();
  const text = /^-?\d+,\d{1,2}$/.test(trimmed) ? trimmed.replace(',', '.') : trimmed;
  const value = tryExact(text.startsWith('.') ? `0${text}` : text);
  return value === null ? null : toDecimalText(value);
}
