/**
 * Units as types. Inside the domain a millimetre is not a degree; at the edge (forms, JSON) both are plain numbers.
 * The makers below are the only way in, and they refuse what is not a finite number.
 */
import { DomainError } from './domain-error';

declare const unit: unique symbol;

/** A number that carries its unit in its type only. */
export type Quantity<U extends string> = number & { readonly [unit]: U };

/** Millimetres. */
export type Mm = Quantity<'mm'>;
/** Degrees of angle, clockwise positive from straight ahead, as seen from above. */
export type Degrees = Quantity<'deg'>;
/** Seconds of time. */
export type Seconds = Quantity<'s'>;

/** Two lengths within this many millimetres of each other are equal in geometry. */
export const EPS = 1e-9;

function finite<Q extends number>(value: number, what: string): Q {
  if (!Number.isFinite(value)) throw new DomainError('bad-number', `${what} must be a number.`);
  return value as Q;
}

/** @throws DomainError `bad-number` when not finite. */
export const mm = (value: number): Mm => finite<Mm>(value, 'A length in millimetres');
/** @throws DomainError `bad-number` when not finite. */
export const degrees = (value: number): Degrees => finite<Degrees>(value, 'An angle in degrees');
/** @throws DomainError `bad-number` when not finite. */
export const seconds = (value: number): Seconds => finite<Seconds>(value, 'A time in seconds');
