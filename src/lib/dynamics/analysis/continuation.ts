/**
 * Pseudo-arclength continuation: the curve on which n equations in n + 1 unknowns hold, followed through its turning
 * points. It knows nothing of species; equilibria, and cycles as fixed points of a return map, are both such curves.
 */
import { bracketedRoot } from '../solve/bracket';
import { factorise, substitute } from '../solve/linear';

export interface CurveEquations {
  /** Number of equations, 1 or 2; there is one unknown more. */
  n: 1 | 2;
  /** Values (length n) and their slopes, row-major n x (n + 1), at z. Not-finite values end the curve. */
  evaluate(z: Float64Array, values: Float64Array, slopes: Float64Array): void;
  /** Natural size of each unknown at z, positive: what counts as a long step. */
  scale(z: Float64Array, out: Float64Array): void;
  /** Newton's method stops at steps this small, in units of the scale; default 1e-13. */
  settled?: number;
}

export interface CurvePoint {
  z: Float64Array;
  /** Direction of the curve, of length 1 in units of the scale, going on as the walk goes. */
  tangent: Float64Array;
}

export interface WalkOptions {
  /** Longest step in units of the scale. */
  longest: number;
  /** Shortest step tried before the walk gives up; default 1e-9 of the longest. */
  shortest?: number;
  maxPoints?: number;
}

/** Consecutive tangents may differ by this angle at most, in radians: a sharper bend is walked in smaller steps. */
const BEND = 0.12;
/** Steps shorter than this part of the longest pass a crossing of two curves. */
const CROSSING = 1e-6;
const ITERATIONS = 8;

/** Unit null vector of the n x (n + 1) slopes in units of the scale, or null where they are of lower rank. */
function nullVector(n: 1 | 2, slopes: Float64Array, scale: Float64Array): Float64Array | null {
  const rows = Array.from({ length: n }, (_, i) => {
    const row = scale.map((size, j) => slopes[i * (n + 1) + j]! * size);
    const length = Math.hypot(...row);
    return row.map((entry) => entry / length);
  });
  const [a, b] = rows;
  const v =
    n === 1
      ? Float64Array.of(-a![1]!, a![0]!)
      : Float64Array.of(
          a![1]! * b![2]! - a![2]! * b![1]!,
          a![2]! * b![0]! - a![0]! * b![2]!,
          a![0]! * b![1]! - a![1]! * b![0]!
        );
  const length = Math.hypot(...v);
  if (!(length > 1e-13)) return null;
  return v.map((entry) => entry / length);
}

/** The tangent, and on which side of the slopes it points: the side changes only where two curves cross. */
function directionAt(
  curve: CurveEquations,
  z: Float64Array,
  along?: Float64Array
): { tangent: Float64Array; side: 1 | -1 } | null {
  const { n } = curve;
  const values = new Float64Array(n);
  const slopes = new Float64Array(n * (n + 1));
  const scale = new Float64Array(n + 1);
  curve.evaluate(z, values, slopes);
  curve.scale(z, scale);
  const unit = nullVector(n, slopes, scale);
  if (unit === null || !unit.every(Number.isFinite)) return null;
  const agreement = along ? unit.reduce((sum, entry, i) => sum + (entry * along[i]!) / scale[i]!, 0) : 1;
  const side = agreement < 0 ? -1 : 1;
  return { tangent: unit.map((entry, i) => side * entry * scale[i]!), side };
}

/**
 * Direction of the curve at a point on it.
 * @param along what the direction should agree with, in the same unknowns; either sense when absent
 * @returns components in the unknowns themselves, or null at a singular point
 */
export function tangentAt(curve: CurveEquations, z: Float64Array, along?: Float64Array): Float64Array | null {
  return directionAt(curve, z, along)?.tangent ?? null;
}

/**
 * Newton's method onto the curve within the plane through `anchor` across `direction`.
 * @returns the point, or null when it does not settle
 * @source kuznetsov2004 §10.2
 */
export function correct(curve: CurveEquations, anchor: Float64Array, direction: Float64Array): Float64Array | null {
  const { n, settled = 1e-13 } = curve;
  const m = n + 1;
  const z = Float64Array.from(anchor);
  const values = new Float64Array(n);
  const slopes = new Float64Array(n * m);
  const scale = new Float64Array(m);
  const matrix = new Float64Array(m * m);
  const step = new Float64Array(m);
  const pivots = new Int32Array(m);
  curve.scale(anchor, scale);
  let last = Infinity;
  for (let iteration = 0; iteration < ITERATIONS; iteration++) {
    curve.evaluate(z, values, slopes);
    for (let i = 0; i < n; i++) {
      let largest = 0;
      for (let j = 0; j < m; j++) largest = Math.max(largest, Math.abs(slopes[i * m + j]! * scale[j]!));
      for (let j = 0; j < m; j++) matrix[i * m + j] = (slopes[i * m + j]! * scale[j]!) / largest;
      step[i] = values[i]! / largest;
    }
    let off = 0;
    for (let j = 0; j < m; j++) {
      matrix[n * m + j] = direction[j]! / scale[j]!;
      off += ((z[j]! - anchor[j]!) / scale[j]!) * (direction[j]! / scale[j]!);
    }
    step[n] = off;
    if (!factorise(matrix, m, pivots)) return null;
    substitute(matrix, m, pivots, step);
    let size = 0;
    for (let j = 0; j < m; j++) {
      z[j] = z[j]! - step[j]! * scale[j]!;
      size = Math.max(size, Math.abs(step[j]!));
    }
    if (!Number.isFinite(size)) return null;
    // Once steps are at rounding level they stop shrinking.
    if (size <= settled || (size < 1e4 * settled && size >= last)) return z;
    last = size;
  }
  return last < 1e4 * settled ? z : null;
}

/**
 * The point of the curve in the plane that cuts the chord from a to b at a share of it.
 * @returns null when Newton's method does not settle
 */
export function between(curve: CurveEquations, a: CurvePoint, b: CurvePoint, share: number): Float64Array | null {
  if (share <= 0) return a.z;
  if (share >= 1) return b.z;
  const chord = b.z.map((value, i) => value - a.z[i]!);
  return correct(
    curve,
    a.z.map((value, i) => value + share * chord[i]!),
    chord
  );
}

/**
 * The place between two points of a walk where a function of the curve changes its sign.
 * @param test continuous along the curve, with values of opposite sign at a and b
 * @returns share of the chord and the point, as sharp as rounding allows; null when the curve is lost in between
 */
export function locate(
  curve: CurveEquations,
  a: CurvePoint,
  b: CurvePoint,
  test: (z: Float64Array) => number
): { share: number; z: Float64Array } | null {
  const value = (share: number): number => {
    const z = between(curve, a, b, share);
    return z === null ? NaN : test(z);
  };
  const share = bracketedRoot(value, 0, 1, test(a.z), test(b.z), 1e-15);
  const z = between(curve, a, b, share);
  return z === null ? null : { share, z };
}

/**
 * Walks along the curve from a point on it, one point at a time, with steps that follow its bends.
 * @param start on the curve. @param tangent its direction there, as tangentAt gives it.
 * @returns the points after the start; ends by itself only when the curve cannot be followed or the points are used up, and
 *   then returns which. Never throws.
 * @source kuznetsov2004 §10.2 (pseudo-arclength continuation)
 */
export function* walk(
  curve: CurveEquations,
  start: Float64Array,
  tangent: Float64Array,
  options: WalkOptions
): Generator<CurvePoint, 'lost' | 'longEnough', undefined> {
  const { longest, shortest = 1e-9 * longest, maxPoints = 4000 } = options;
  const scale = new Float64Array(curve.n + 1);
  let here: CurvePoint = { z: Float64Array.from(start), tangent };
  let side = directionAt(curve, start, tangent)?.side;
  let length = longest / 16;
  for (let count = 0; count < maxPoints;) {
    if (length < shortest) return 'lost';
    const ahead = here.z.map((value, i) => value + length * here.tangent[i]!);
    const z = correct(curve, ahead, here.tangent);
    const found = z && directionAt(curve, z, here.tangent);
    if (!z || !found) {
      length /= 4;
      continue;
    }
    curve.scale(here.z, scale);
    const next = found.tangent;
    let across = 0;
    let agreement = 0;
    let size = 0;
    for (let i = 0; i < scale.length; i++) {
      across = Math.max(across, Math.abs(z[i]! - ahead[i]!) / scale[i]!);
      agreement += (next[i]! / scale[i]!) * (here.tangent[i]! / scale[i]!);
      size += (next[i]! / scale[i]!) ** 2;
    }
    const bend = Math.acos(Math.min(1, agreement / Math.sqrt(size)));
    // A point far from where it was expected may lie on another curve, and so does one on the other side of the slopes,
    // unless two curves truly cross, which shows in that no shorter step helps.
    const jumped = side !== undefined && found.side !== side && length > CROSSING * longest;
    if (bend > BEND || across > 0.15 * length || jumped) {
      length /= 2;
      continue;
    }
    here = { z, tangent: next };
    side = found.side;
    count += 1;
    yield here;
    length = Math.min(longest, length * (bend < BEND / 4 ? 2 : bend < BEND / 2 ? 1.3 : 0.9));
  }
  return 'longEnough';
}
