/**
 * The fast way through the plane: explicit steps on the abundances themselves, with relative control, by the kernel of the
 * model's family. What it cannot finish (a quota that exhausts, a stiff stretch, a dip below the range of numbers) it
 * says, and the general integrator does.
 */
import type { ModelSpec } from '../model/spec';
import {
  ACCEPTED,
  ATOL,
  BEFORE,
  EDGE,
  END,
  F,
  G,
  LEFT,
  LOG_GROW,
  LOG_MEMORY,
  LONGEST,
  MOST,
  NEXT,
  PLANAR_KERNELS,
  PLANAR_STATE,
  RTOL,
  SHORTEST,
  SIZE,
  T,
  X,
  Y,
  type PlanarFamily,
  type PlanarKernel
} from './planarKernels';
import { PLANAR_RATES, planarFamilyOf, S1, S2, writePlanarRates } from './planarRates';

export type PlanarEnd = 'reached' | 'stepTooSmall' | 'tooManySteps' | 'underflow' | 'stiff' | 'stopped';

export interface PlanarOptions {
  /** Relative tolerance of a step, default 1e-8. */
  rtol?: number;
  /** Absolute tolerance of a step in abundance, default next to nothing: a deep dip then keeps its digits, and its phase. */
  atol?: number;
  /** Longest step; default the span. */
  maxStep?: number;
  /** Budget of tries, default 200 000. */
  maxSteps?: number;
  /** Asked every few hundred tries. */
  shouldStop?: () => boolean;
}

/** Work space of one integration, used again and again; `end` and the counts are those of the last run. */
export interface PlanarRun {
  end: PlanarEnd;
  t: number;
  x: number;
  y: number;
  accepted: number;
  rejected: number;
  evaluations: number;
  /** Output times written. */
  written: number;
}

/** Tries a call of the kernel: short enough for the compiler, long enough for the call not to count. */
const CHUNK = 32;
const POLL_EVERY = 16;
/** Smallest numbers with all their digits, with room for a relative tolerance. */
const FAINT = 1e-290;
/** Squares of |h lambda|: held by stability beyond this, see the driver of the general integrator. */
const EDGE_SQUARED = 1.25 ** 2;
const STIFF_REMAINDER = 1000;
const STRETCH = 2;
const NO_TOLERANCE = 1e-300;

/** Output times as the kernels want them: closed by a time that is never reached. */
export function planarTimes(times: ArrayLike<number>): Float64Array {
  const padded = new Float64Array(times.length + 1).fill(Infinity);
  padded.set(times);
  return padded;
}

/** Whether a model can be followed here: no species is taken by the unit faster than it is added. */
export function isPlanar(k: Float64Array): boolean {
  return k[S1]! >= 0 && k[S2]! >= 0;
}

/** First step, positive: hairer1993 §II.4 for the plane. */
function firstSize(kernel: PlanarKernel, k: Float64Array, s: Float64Array, slopes: Float64Array): number {
  const x = s[X]!;
  const y = s[Y]!;
  const f = s[F]!;
  const g = s[G]!;
  const length = s[LONGEST]!;
  const sx = s[ATOL]! + s[RTOL]! * x;
  const sy = s[ATOL]! + s[RTOL]! * y;
  // An absent species has neither size nor slope.
  const px = x > 0 ? x / sx : 0;
  const py = y > 0 ? y / sy : 0;
  const vx = f === 0 ? 0 : f / sx;
  const vy = g === 0 ? 0 : g / sy;
  const state = Math.sqrt(px * px + py * py);
  const speed = Math.sqrt(vx * vx + vy * vy);
  const guess = state > 1e-5 && speed > 1e-5 ? (0.01 * state) / speed : 1e-6;
  const h0 = Math.min(guess > 0 ? guess : 1e-6, length);
  kernel.slopes(x + h0 * f, y + h0 * g, k, slopes);
  const bx = f === slopes[0] ? 0 : (slopes[0]! - f) / sx;
  const by = g === slopes[1] ? 0 : (slopes[1]! - g) / sy;
  const largest = Math.max(Math.sqrt(bx * bx + by * by) / h0, speed);
  if (!(largest < Infinity)) return Math.min(h0 * 1e-3, length);
  const h1 = largest <= 1e-15 ? Math.max(1e-6, h0 * 1e-3) : (0.01 / largest) ** 0.2;
  return Math.min(100 * h0, h1, length);
}

/** What a run needs beside the model and the start; see makePlanarIntegrator. */
export interface PlanarIntegrator {
  /**
   * @param kernel, k the model; @param x, y start, both >= 0; @param t0, t1 span, t1 >= t0.
   * @param times output times within the span, closed by Infinity (planarTimes); @param out, base where pairs go.
   * @returns the same object every time, overwritten.
   */
  run(
    kernel: PlanarKernel,
    k: Float64Array,
    x: number,
    y: number,
    t0: number,
    t1: number,
    times: Float64Array,
    out: Float64Array,
    base: number
  ): PlanarRun;
}

/**
 * An integrator with its own work space; runs allocate nothing.
 * @throws RangeError for tolerances that are not positive. Failures of the mathematics are values.
 */
export function makePlanarIntegrator(options: PlanarOptions = {}): PlanarIntegrator {
  const { rtol = 1e-8, atol = 0, maxSteps = 200_000, maxStep = Infinity, shouldStop } = options;
  if (!(rtol > 0) || !(atol >= 0)) throw new RangeError('tolerances must be above 0');
  const s = new Float64Array(PLANAR_STATE);
  const slopes = new Float64Array(2);
  const run: PlanarRun = { end: 'reached', t: 0, x: 0, y: 0, accepted: 0, rejected: 0, evaluations: 0, written: 0 };

  return {
    run(kernel, k, x, y, t0, t1, times, out, base) {
      s.fill(0);
      s[T] = t0;
      s[END] = t1;
      s[X] = x;
      s[Y] = y;
      s[RTOL] = rtol;
      s[ATOL] = atol > NO_TOLERANCE ? atol : NO_TOLERANCE;
      s[BEFORE] = LOG_MEMORY;
      s[MOST] = LOG_GROW;
      s[LONGEST] = Math.min(maxStep, t1 - t0);
      s[SHORTEST] = 8 * Number.EPSILON * Math.max(Math.abs(t0), Math.abs(t1), (t1 - t0) * 1e-6);
      let next = 0;
      while (times[next]! <= t0) {
        out[base + 2 * next] = x;
        out[base + 2 * next + 1] = y;
        next += 1;
      }
      s[NEXT] = next;
      let end: PlanarEnd | null = t1 > t0 ? null : 'reached';
      let tries = 0;
      if (end === null) {
        kernel.slopes(x, y, k, slopes);
        s[F] = slopes[0]!;
        s[G] = slopes[1]!;
        s[SIZE] = firstSize(kernel, k, s, slopes);
      }
      let calls = 0;
      let atEdge = 0;
      while (end === null) {
        const most = maxSteps - tries < CHUNK ? maxSteps - tries : CHUNK;
        if (most <= 0) {
          end = 'tooManySteps';
          break;
        }
        const status = kernel.advance(s, k, times, out, base, most);
        tries += most;
        if (status !== 0) tries -= s[LEFT]! - 1;
        calls += 1;
        if ((s[X]! < FAINT && x > 0) || (s[Y]! < FAINT && y > 0)) end = 'underflow';
        else if (status !== 0) end = status === 1 ? 'reached' : 'stepTooSmall';
        else if (s[EDGE]! > EDGE_SQUARED && s[END]! - s[T]! > STIFF_REMAINDER * s[SIZE]!) {
          atEdge += 1;
          if (atEdge >= STRETCH) end = 'stiff';
        } else {
          atEdge = 0;
          if (shouldStop && calls % POLL_EVERY === 0 && shouldStop()) end = 'stopped';
        }
      }
      run.end = end;
      run.t = s[T]!;
      run.x = s[X]!;
      run.y = s[Y]!;
      run.accepted = s[ACCEPTED]!;
      run.rejected = tries - s[ACCEPTED]!;
      run.evaluations = 6 * tries + (t1 > t0 ? 2 : 0);
      run.written = s[NEXT]!;
      return run;
    }
  };
}

const primed = new Set<PlanarFamily>();

/**
 * Shows a kernel every branch it has, a few times, before it is compiled: accepted and rejected steps, outputs, both ends.
 * Without it the first rare branch throws the compiled code away. Costs about a millisecond, once a family.
 */
export function primePlanar(kernel: PlanarKernel, k: Float64Array, x: number, y: number, length: number): void {
  if (primed.has(kernel.family) || !(length > 0) || !(length < Infinity)) return;
  primed.add(kernel.family);
  const times = planarTimes(Array.from({ length: 9 }, (_, i) => (i * length) / 8));
  const none = planarTimes([]);
  const out = new Float64Array(18);
  const integrator = makePlanarIntegrator({ rtol: 1e-5, maxSteps: 200 });
  const s = new Float64Array(PLANAR_STATE);
  for (let i = 0; i < 4; i++) {
    integrator.run(kernel, k, x, y, 0, length, times, out, 0);
    integrator.run(kernel, k, x, y, 0, length / 64, none, out, 0);
    for (const shortest of [0, Infinity]) {
      // A step a thousand times too long, allowed to shrink and then not.
      s.set([0, length, x, y]);
      kernel.slopes(x, y, k, s.subarray(F, G + 1));
      s[END] = 1000 * length;
      s[LONGEST] = 1000 * length;
      s[RTOL] = 1e-9;
      s[ATOL] = NO_TOLERANCE;
      s[NEXT] = 0;
      s[MOST] = LOG_GROW;
      s[SHORTEST] = shortest;
      kernel.advance(s, k, none, out, 0, CHUNK);
    }
  }
}

/** A model made ready for the fast way. */
export interface PlanarModel {
  readonly kernel: PlanarKernel;
  /** PLANAR_RATES long. */
  readonly rates: Float64Array;
}

/** @param spec a model without issues. @returns its kernel and rates. Never throws. */
export function planarModelOf(spec: ModelSpec): PlanarModel {
  const rates = new Float64Array(PLANAR_RATES);
  writePlanarRates(spec, rates);
  return { kernel: PLANAR_KERNELS[planarFamilyOf(spec, rates)], rates };
}

export interface PlanarPath extends PlanarRun {
  /** Pairs of abundances at the output times written. */
  values: Float64Array;
}

/**
 * One path. @param model see planarModelOf; @param start abundances >= 0; @param span forwards; @param times output times
 * in order within the span.
 * @returns pairs at the times reached, and how it ended. Accuracy: each step errs by rtol, relative, or less.
 */
export function integratePlanar(
  model: PlanarModel,
  start: { x: number; y: number },
  span: readonly [number, number],
  times: ArrayLike<number>,
  options: PlanarOptions = {}
): PlanarPath {
  const values = new Float64Array(2 * times.length);
  const { kernel, rates } = model;
  const padded = planarTimes(times);
  const run = makePlanarIntegrator(options).run(kernel, rates, start.x, start.y, span[0], span[1], padded, values, 0);
  return { ...run, values };
}
