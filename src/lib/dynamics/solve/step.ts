/**
 * One step of a method, as the driver sees it. The driver knows neither tableaux nor Newton iterations; a method knows
 * neither output times nor events.
 */
import { errorNorm, type Tolerances } from './control';
import { makeQuartic } from './interpolant';
import type { Rhs } from './problem';
import {
  A21,
  A31,
  A32,
  A41,
  A42,
  A43,
  A51,
  A52,
  A53,
  A54,
  A61,
  A62,
  A63,
  A64,
  A65,
  B1,
  B3,
  B4,
  B5,
  B6,
  E1,
  E3,
  E4,
  E5,
  E6,
  E7,
  NODES
} from './tableau';

export interface StepMethod {
  /** Order used for the first step. */
  readonly order: number;
  /** State at the end of the last attempt, length n. */
  readonly y1: Float64Array;
  /** Right-hand side at the start of the coming step, length n. */
  readonly slope: Float64Array;
  readonly evaluations: number;
  /** Forget the past: the next step starts at (t, y). */
  begin(t: number, y: Float64Array): void;
  /** Try a step of signed size h; error in units of the tolerance, NaN when something was not finite. */
  attempt(t: number, y: Float64Array, h: number): number;
  /** Ready `interpolate` for the step just tried; call before `accept`. */
  prepare(y: Float64Array, h: number): void;
  /** State at t + theta h, 0 <= theta <= 1, of the step last prepared. */
  interpolate(theta: number, out: Float64Array): void;
  /** A copy of `interpolate` that outlives the step. */
  keep(): (theta: number, out: Float64Array) => void;
  /** The step from y of size h to (tNext, y1) counts: shift what the next one reuses. */
  accept(tNext: number, y: Float64Array, h: number): void;
  /** |h lambda| of the step just tried, an estimate; 0 when there is none. */
  stiffness(h: number): number;
}

/**
 * The Dormand–Prince step: six evaluations a step, error estimate of order 4, quartic dense output.
 * @param rhs writes n slopes. @param n number of components. @returns a method that allocates nothing after this call.
 * @source dormandPrince1980; stiffness estimate hairer1996 §IV.2 (2.31)
 */
export function makeDormandPrince(rhs: Rhs, n: number, tolerances: Tolerances): StepMethod {
  const k1 = new Float64Array(n);
  const k2 = new Float64Array(n);
  const k3 = new Float64Array(n);
  const k4 = new Float64Array(n);
  const k5 = new Float64Array(n);
  const k6 = new Float64Array(n);
  const k7 = new Float64Array(n);
  const stage = new Float64Array(n);
  const stage6 = new Float64Array(n);
  const y1 = new Float64Array(n);
  const error = new Float64Array(n);
  const quartic = makeQuartic(n);
  let evaluations = 0;

  return {
    order: 5,
    y1,
    slope: k1,
    get evaluations() {
      return evaluations;
    },
    begin(t, y) {
      rhs(t, y, k1);
      evaluations += 1;
    },
    attempt(t, y, h) {
      for (let i = 0; i < n; i++) stage[i] = y[i]! + h * A21 * k1[i]!;
      rhs(t + NODES[1] * h, stage, k2);
      for (let i = 0; i < n; i++) stage[i] = y[i]! + h * (A31 * k1[i]! + A32 * k2[i]!);
      rhs(t + NODES[2] * h, stage, k3);
      for (let i = 0; i < n; i++) stage[i] = y[i]! + h * (A41 * k1[i]! + A42 * k2[i]! + A43 * k3[i]!);
      rhs(t + NODES[3] * h, stage, k4);
      for (let i = 0; i < n; i++) {
        stage[i] = y[i]! + h * (A51 * k1[i]! + A52 * k2[i]! + A53 * k3[i]! + A54 * k4[i]!);
      }
      rhs(t + NODES[4] * h, stage, k5);
      for (let i = 0; i < n; i++) {
        stage6[i] = y[i]! + h * (A61 * k1[i]! + A62 * k2[i]! + A63 * k3[i]! + A64 * k4[i]! + A65 * k5[i]!);
      }
      rhs(t + h, stage6, k6);
      for (let i = 0; i < n; i++) {
        y1[i] = y[i]! + h * (B1 * k1[i]! + B3 * k3[i]! + B4 * k4[i]! + B5 * k5[i]! + B6 * k6[i]!);
      }
      rhs(t + h, y1, k7);
      evaluations += 6;
      for (let i = 0; i < n; i++) {
        error[i] = h * (E1 * k1[i]! + E3 * k3[i]! + E4 * k4[i]! + E5 * k5[i]! + E6 * k6[i]! + E7 * k7[i]!);
      }
      return errorNorm(error, y, y1, tolerances);
    },
    prepare(y, h) {
      quartic.set(y, y1, h, k1, k3, k4, k5, k6, k7);
    },
    interpolate: quartic.at,
    keep: quartic.keep,
    accept() {
      for (let i = 0; i < n; i++) k1[i] = k7[i]!;
    },
    stiffness(h) {
      let slopes = 0;
      let states = 0;
      for (let i = 0; i < n; i++) {
        slopes += (k7[i]! - k6[i]!) ** 2;
        states += (y1[i]! - stage6[i]!) ** 2;
      }
      return states > 0 ? Math.abs(h) * Math.sqrt(slopes / states) : 0;
    }
  };
}
