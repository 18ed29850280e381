/**
 * Problems and solutions of the integrator. The solver is n-dimensional and knows nothing of species: Floquet multipliers
 * and sensitivities integrate augmented systems with it.
 */

/** Right-hand side of dy/dt = f(t, y): writes into `out`, allocates nothing. */
export type Rhs = (t: number, y: Float64Array, out: Float64Array) => void;

export interface EventSpec {
  /** Scalar function of time and state whose sign change is the event. */
  value: (t: number, y: Float64Array) => number;
  /** -1: only falling through zero; 1: only rising; 0: both. */
  direction: -1 | 0 | 1;
  /** Stop the integration there. */
  terminal: boolean;
  /** Looked at only between steps: for what does not come back once crossed, and much cheaper. Default false. */
  betweenSteps?: boolean;
}

export interface Problem {
  rhs: Rhs;
  y0: ArrayLike<number>;
  /** [t0, t1]; t1 < t0 integrates backwards. */
  span: readonly [number, number];
  events?: readonly EventSpec[];
  /** Row-major n x n slopes of `rhs` by state into `out`; used by the implicit method, by differences when absent. */
  jacobian?: (t: number, y: Float64Array, out: Float64Array) => void;
}

/** `auto` begins explicitly and turns implicit for good once stability, not accuracy, dictates very many steps. */
export type MethodChoice = 'auto' | 'dormand-prince' | 'radau';

export interface SolveOptions {
  method?: MethodChoice;
  /** Relative tolerance: one number or one a component, default 1e-8. */
  rtol?: number | ArrayLike<number>;
  /** Absolute tolerance: one number or one a component, default 1e-10. */
  atol?: number | ArrayLike<number>;
  /** Largest step size; default |t1 - t0|. */
  maxStep?: number;
  /** Every step of this size, accepted whatever its error: for measuring the order of the method. */
  fixedStep?: number;
  /** Budget of accepted and rejected steps together, default 200 000. */
  maxSteps?: number;
  /** Asked every few hundred steps; true stops with reason 'budget'. The clock is the caller's. */
  shouldStop?: () => boolean;
  /** Output times, monotone in the direction of integration; filled by dense output. Absent: the steps themselves. */
  times?: ArrayLike<number>;
  /** Keep the dense solution so that any time can be asked for later. */
  dense?: boolean;
}

/** Findings of the mathematics are values, never exceptions. */
export type Outcome =
  | { status: 'reached' }
  | { status: 'event'; event: number; t: number }
  | { status: 'failed'; reason: 'stepTooSmall' | 'tooManySteps' | 'notFinite' | 'budget' | 'stiff'; t: number };

export interface Solution {
  outcome: Outcome;
  /** Output times actually reached. */
  t: Float64Array;
  /** Row-major states at `t`: n values a time. */
  y: Float64Array;
  events: { event: number; t: number; y: Float64Array }[];
  steps: { accepted: number; rejected: number; evaluations: number };
  /** Present when `dense` was asked: state at any time inside what was integrated. */
  at?: (t: number, out: Float64Array) => void;
  /** True when the step size was held down by stability rather than accuracy for a long stretch. */
  stiff: boolean;
  /** The method that took the last step. */
  method: 'dormand-prince' | 'radau';
  /** Time and state where the integration ended. */
  tEnd: number;
  yEnd: Float64Array;
}
