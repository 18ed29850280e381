import type { Ring } from './ring';

/** A closed interval; every operation rounds outwards, so that the true result is always inside. */
export interface Interval {
  readonly lo: number;
  readonly hi: number;
}

/** 2^27 + 1: splits a double into two halves whose products are exact. */
const SPLIT = 134217729;
/** At least one unit in the last place of a double of size 1; above half of one, as directed rounding needs. */
const ULP = 2 ** -52;
const TINY = Number.MIN_VALUE;
/** Above this size splitting could overflow, below it products lose their exact error. */
const SPLIT_LIMIT = 2 ** 480;

export const ZERO: Interval = { lo: 0, hi: 0 };
export const ONE: Interval = { lo: 1, hi: 1 };

export function interval(lo: number, hi: number): Interval {
  return { lo, hi };
}

export function point(value: number): Interval {
  return { lo: value, hi: value };
}

const down = (value: number) => value - Math.abs(value) * ULP - TINY;
const up = (value: number) => value + Math.abs(value) * ULP + TINY;

/** Rounding error of a + b, exactly. */
function sumError(a: number, b: number, sum: number): number {
  const part = sum - a;
  return a - (sum - part) + (b - part);
}

/** Rounding error of a * b, exactly within the split limits; NaN outside them. */
function productError(a: number, b: number, product: number): number {
  const size = Math.abs(product);
  if (!(size < SPLIT_LIMIT && size > 1 / SPLIT_LIMIT && Math.abs(a) < SPLIT_LIMIT && Math.abs(b) < SPLIT_LIMIT))
    return NaN;
  const ta = SPLIT * a;
  const aHigh = ta - (ta - a);
  const aLow = a - aHigh;
  const tb = SPLIT * b;
  const bHigh = tb - (tb - b);
  const bLow = b - bHigh;
  return aLow * bLow - (product - aHigh * bHigh - aLow * bHigh - aHigh * bLow);
}

function sumDown(a: number, b: number): number {
  const sum = a + b;
  return sumError(a, b, sum) >= 0 ? sum : down(sum);
}

function sumUp(a: number, b: number): number {
  const sum = a + b;
  return sumError(a, b, sum) <= 0 ? sum : up(sum);
}

function productDown(a: number, b: number): number {
  const product = a * b;
  if (a === 0 || b === 0) return 0;
  return productError(a, b, product) >= 0 ? product : down(product);
}

function productUp(a: number, b: number): number {
  const product = a * b;
  if (a === 0 || b === 0) return 0;
  return productError(a, b, product) <= 0 ? product : up(product);
}

export function add(a: Interval, b: Interval): Interval {
  return { lo: sumDown(a.lo, b.lo), hi: sumUp(a.hi, b.hi) };
}

export function negate(a: Interval): Interval {
  return { lo: -a.hi, hi: -a.lo };
}

export function subtract(a: Interval, b: Interval): Interval {
  return { lo: sumDown(a.lo, -b.hi), hi: sumUp(a.hi, -b.lo) };
}

export function multiply(a: Interval, b: Interval): Interval {
  if (a.lo >= 0 && b.lo >= 0) return { lo: productDown(a.lo, b.lo), hi: productUp(a.hi, b.hi) };
  if (a.hi <= 0 && b.hi <= 0) return { lo: productDown(a.hi, b.hi), hi: productUp(a.lo, b.lo) };
  if (a.lo >= 0 && b.hi <= 0) return { lo: productDown(a.hi, b.lo), hi: productUp(a.lo, b.hi) };
  if (a.hi <= 0 && b.lo >= 0) return { lo: productDown(a.lo, b.hi), hi: productUp(a.hi, b.lo) };
  return {
    lo: Math.min(productDown(a.lo, b.lo), productDown(a.lo, b.hi), productDown(a.hi, b.lo), productDown(a.hi, b.hi)),
    hi: Math.max(productUp(a.lo, b.lo), productUp(a.lo, b.hi), productUp(a.hi, b.lo), productUp(a.hi, b.hi))
  };
}

function quotientBound(a: number, b: number, direction: -1 | 1): number {
  const quotient = a / b;
  if (a === 0) return 0;
  const product = quotient * b;
  if (product === a && productError(quotient, b, product) === 0) return quotient;
  return direction < 0 ? down(quotient) : up(quotient);
}

/** a / b; the whole line when b contains 0. */
export function divide(a: Interval, b: Interval): Interval {
  if (b.lo <= 0 && b.hi >= 0) return { lo: -Infinity, hi: Infinity };
  const corners: [number, number][] = [
    [a.lo, b.lo],
    [a.lo, b.hi],
    [a.hi, b.lo],
    [a.hi, b.hi]
  ];
  let lo = Infinity;
  let hi = -Infinity;
  for (const [top, bottom] of corners) {
    lo = Math.min(lo, quotientBound(top, bottom, -1));
    hi = Math.max(hi, quotientBound(top, bottom, 1));
  }
  return { lo, hi };
}

export function contains(a: Interval, value: number): boolean {
  return a.lo <= value && value <= a.hi;
}

/** Largest absolute value in the interval. */
export function size(a: Interval): number {
  return Math.max(Math.abs(a.lo), Math.abs(a.hi));
}

/** Smallest absolute value in the interval. */
export function distanceToZero(a: Interval): number {
  if (a.lo > 0) return a.lo;
  return a.hi < 0 ? -a.hi : 0;
}

export function middle(a: Interval): number {
  return a.lo + (a.hi - a.lo) / 2;
}

/** 1 or -1 when the whole interval has that sign, 0 for an exact zero, null when it cannot be told. */
export function signOf(a: Interval): 1 | 0 | -1 | null {
  if (a.lo > 0) return 1;
  if (a.hi < 0) return -1;
  return a.lo === 0 && a.hi === 0 ? 0 : null;
}

/**
 * The decimal number that a person wrote lies within half a unit in the last place of the double. Short binary fractions
 * are what was written; anything else is widened by one unit on both sides.
 */
export function enclose(value: number): Interval {
  const short = value * 1024;
  if (Number.isSafeInteger(value) || (Number.isInteger(short) && Math.abs(value) < 1e5)) return point(value);
  return { lo: down(value), hi: up(value) };
}

/** Outward-rounded intervals as a ring. */
export const INTERVAL: Ring<Interval> = {
  zero: ZERO,
  one: ONE,
  of: enclose,
  add,
  sub: subtract,
  mul: multiply,
  div: divide,
  neg: negate,
  isZero: (a) => a.lo === 0 && a.hi === 0
};
