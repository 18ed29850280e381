/** Choice of the step size: error norm, first step, and proportional–integral control. */
import type { Rhs } from './problem';

/** Tolerances of each component: the error of component i is measured against atol_i + rtol_i |y_i|. */
export interface Tolerances {
  rtol: Float64Array;
  atol: Float64Array;
}

/**
 * Tolerances spelled out for every component.
 * @param n number of components. @param rtol relative, one number or n. @param atol absolute, one number or n.
 * @returns two arrays of length n. @throws RangeError when a tolerance is negative or not a number, or when both are 0.
 */
export function tolerancesFor(
  n: number,
  rtol: number | ArrayLike<number>,
  atol: number | ArrayLike<number>
): Tolerances {
  const spread = (value: number | ArrayLike<number>): Float64Array => {
    const list = typeof value === 'number' ? new Float64Array(n).fill(value) : Float64Array.from(value);
    if (list.length !== n) throw new RangeError(`${n} tolerances are needed, not ${list.length}`);
    return list;
  };
  const tolerances = { rtol: spread(rtol), atol: spread(atol) };
  for (let i = 0; i < n; i++) {
    const r = tolerances.rtol[i]!;
    const a = tolerances.atol[i]!;
    if (!(r >= 0) || !(a >= 0) || !(r + a > 0)) throw new RangeError('tolerances must be >= 0 and not both 0');
  }
  return tolerances;
}

/**
 * Root mean square of an error vector in units of the tolerance; a step is good when this is at most 1.
 * @param error length n. @param from, to states at both ends, length n. @returns NaN when anything is not finite.
 * @source hairer1993 §II.4 (4.11)
 */
export function errorNorm(error: Float64Array, from: Float64Array, to: Float64Array, tolerances: Tolerances): number {
  const { rtol, atol } = tolerances;
  const n = error.length;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    const scale = atol[i]! + rtol[i]! * Math.max(Math.abs(from[i]!), Math.abs(to[i]!));
    const e = scale > 0 ? error[i]! / scale : error[i] === 0 ? 0 : Infinity;
    sum += e * e;
  }
  // A state that overflowed would make the scale infinite and the error look like nothing.
  for (let i = 0; i < n; i++) if (!Number.isFinite(to[i]!)) return NaN;
  return Math.sqrt(sum / n);
}

const SAFETY = 0.9;
const SHRINK_MOST = 0.2;
const GROW_MOST = 10;
/** Logarithm of the smallest error remembered, 1e-4: one lucky step must not hold the next ones back. */
const LOG_LEAST = Math.log(1e-4);

/** Proportional–integral control; remembers the error of the last accepted step. */
export interface StepControl {
  /** Factor for the next step after a good one. */
  afterAccepted(error: number): number;
  /** Factor for the next attempt after a bad one, below 1; NaN errors cut the step to a fifth. */
  afterRejected(error: number): number;
}

/**
 * A controller with exponents `proportional` on this error and `integral` on the last one.
 * The defaults belong to order 5: 0.17 = 1/5 - 0.75 * 0.04. Never grows right after a rejection.
 * @source gustafsson1991; hairer1996 §IV.2 (2.43)
 */
export function makeStepControl(proportional = 0.17, integral = 0.04): StepControl {
  let logLast = LOG_LEAST;
  let rejected = false;
  return {
    afterAccepted(error) {
      // Two logarithms and an exponential cost half of two powers.
      const log = Math.log(Math.max(error, 1e-12));
      const raw = SAFETY * Math.exp(integral * logLast - proportional * log);
      const factor = Math.min(GROW_MOST, Math.max(SHRINK_MOST, raw));
      logLast = Math.max(log, LOG_LEAST);
      const allowed = rejected ? Math.min(factor, 1) : factor;
      rejected = false;
      return allowed;
    },
    afterRejected(error) {
      rejected = true;
      if (!Number.isFinite(error)) return SHRINK_MOST;
      return Math.max(SHRINK_MOST, Math.min(SAFETY, SAFETY / Math.pow(error, proportional)));
    }
  };
}

/**
 * Size of the first step, positive: such that an explicit Euler step would be a good one for order `order`.
 * @param f0 right-hand side at (t0, y0). @param direction 1 or -1. @param longest upper bound. Two evaluations' worth of memory.
 * @source hairer1993 §II.4, "starting step size"
 */
export function firstStep(
  rhs: Rhs,
  t0: number,
  y0: Float64Array,
  f0: Float64Array,
  direction: number,
  longest: number,
  order: number,
  tolerances: Tolerances
): number {
  const n = y0.length;
  let stateSize = 0;
  let slopeSize = 0;
  const scale = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    scale[i] = tolerances.atol[i]! + tolerances.rtol[i]! * Math.abs(y0[i]!) || Number.MIN_VALUE;
    stateSize += (y0[i]! / scale[i]!) ** 2;
    slopeSize += (f0[i]! / scale[i]!) ** 2;
  }
  const guess = stateSize <= 1e-10 || slopeSize <= 1e-10 ? 1e-6 : 0.01 * Math.sqrt(stateSize / slopeSize);
  const h0 = Math.min(Number.isFinite(guess) && guess > 0 ? guess : 1e-6, longest);
  const y1 = new Float64Array(n);
  const f1 = new Float64Array(n);
  for (let i = 0; i < n; i++) y1[i] = y0[i]! + direction * h0 * f0[i]!;
  rhs(t0 + direction * h0, y1, f1);
  let curvature = 0;
  for (let i = 0; i < n; i++) curvature += ((f1[i]! - f0[i]!) / scale[i]!) ** 2;
  const largest = Math.max(Math.sqrt(curvature) / h0, Math.sqrt(slopeSize));
  if (!Number.isFinite(largest)) return Math.min(h0 * 1e-3, longest);
  const h1 = largest <= 1e-15 ? Math.max(1e-6, h0 * 1e-3) : Math.pow(0.01 / largest, 1 / order);
  return Math.min(100 * h0, h1, longest);
}
