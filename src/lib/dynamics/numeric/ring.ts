/**
 * Arithmetic as a value: the algebra of a model is written once over a ring and read in floating point (to compile), in
 * intervals (to prove) or in exact fractions (to decide).
 */
export interface Ring<T> {
  readonly zero: T;
  readonly one: T;
  /** A parameter of the document; an approximate ring encloses the decimal number that was written. */
  of(value: number): T;
  add(a: T, b: T): T;
  sub(a: T, b: T): T;
  mul(a: T, b: T): T;
  /** a / b; the callers divide by positive parameters only. */
  div(a: T, b: T): T;
  neg(a: T): T;
  /** True only for an exact zero. */
  isZero(a: T): boolean;
}

/** Plain double precision. */
export const REAL: Ring<number> = {
  zero: 0,
  one: 1,
  of: (value) => value,
  add: (a, b) => a + b,
  sub: (a, b) => a - b,
  mul: (a, b) => a * b,
  div: (a, b) => a / b,
  neg: (a) => -a,
  isZero: (a) => a === 0
};
