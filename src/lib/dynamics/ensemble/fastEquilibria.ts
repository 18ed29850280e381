/**
 * All equilibria of a model in floating point, for ensembles: thousands of times faster than the proven search, and without
 * its proof. One species is eliminated; real roots of what remains give the rest.
 */
import type { EquilibriumClass } from '../analysis/results';
import { A, C, D, E, H, L, P0, P1, P2, Q0, Q1, Q2, S1, S2, W } from '../solve/planarRates';
import { positiveRootsInto } from './floatRoots';

/** Codes of classes in the tables below, by index. A zero or purely imaginary eigenvalue is `non-hyperbolic` here. */
export const CLASS_CODES = [
  'stable node',
  'stable spiral',
  'stable star',
  'stable degenerate node',
  'saddle',
  'unstable node',
  'unstable spiral',
  'unstable star',
  'unstable degenerate node',
  'non-hyperbolic'
] as const satisfies readonly EquilibriumClass[];
/** Codes below this are stable. */
export const STABLE_CODES = 4;
export const SADDLE = 4;
export const NON_HYPERBOLIC = 9;

/** Most equilibria of one model that are kept. */
export const MOST_EQUILIBRIA = 16;
/** Numbers a point: x, y, the Jacobian row by row, and both eigenvalues as real and imaginary part. */
export const POINT_WIDTH = 10;

export interface EquilibriaTable {
  count: number;
  /** POINT_WIDTH numbers a point. */
  points: Float64Array;
  /** CLASS_CODES a point. */
  classes: Uint8Array;
}

/** An empty table, to be written again and again. */
export function makeEquilibriaTable(): EquilibriaTable {
  return {
    count: 0,
    points: new Float64Array(MOST_EQUILIBRIA * POINT_WIDTH),
    classes: new Uint8Array(MOST_EQUILIBRIA)
  };
}

/** Share of its own terms below which a determinant, trace or discriminant counts as zero. */
const ROUNDING = 1e-13;
const abs = (n: number): number => (n < 0 ? -n : n);

/**
 * Class and eigenvalues of place `i`, whose Jacobian stands in the table. Numbers travel in the table and not as arguments:
 * a call that is not inlined would put each of them on the heap.
 */
function classifyPlace(points: Float64Array, classes: Uint8Array, i: number): void {
  const at = i * POINT_WIDTH;
  const a = points[at + 2]!;
  const b = points[at + 3]!;
  const c = points[at + 4]!;
  const d = points[at + 5]!;
  const trace = a + d;
  const coupling = b * c;
  const determinant = a * d - coupling;
  const gap = a - d;
  const discriminant = gap * gap + 4 * coupling;
  const scale = abs(a) + abs(d);
  const s2 = scale * scale + abs(coupling);
  let code: number;
  if (coupling === 0) {
    // A triangular matrix has its eigenvalues on the diagonal, each with a scale of its own; so it is on the axes.
    points[at + 6] = a > d ? a : d;
    points[at + 7] = 0;
    points[at + 8] = a > d ? d : a;
    points[at + 9] = 0;
    if (a === 0 || d === 0) code = NON_HYPERBOLIC;
    else if (a < 0 !== d < 0) code = SADDLE;
    else {
      code = a < 0 ? 0 : 5;
      if (gap * gap <= ROUNDING * s2) code += b === 0 && c === 0 ? 2 : 3;
    }
  } else if (discriminant < 0 && -discriminant > ROUNDING * s2) {
    const im = 0.5 * Math.sqrt(-discriminant);
    const re = 0.5 * trace;
    points[at + 6] = re;
    points[at + 7] = im;
    points[at + 8] = re;
    points[at + 9] = -im;
    code = trace * trace <= ROUNDING * ROUNDING * s2 ? NON_HYPERBOLIC : trace < 0 ? 1 : 6;
  } else {
    const root = discriminant > 0 ? 0.5 * Math.sqrt(discriminant) : 0;
    // The larger one by sum, the smaller by quotient: no cancellation.
    const strong = 0.5 * trace + (trace < 0 ? -root : root);
    const weak = strong === 0 ? 0 : determinant / strong;
    points[at + 6] = strong > weak ? strong : weak;
    points[at + 7] = 0;
    points[at + 8] = strong > weak ? weak : strong;
    points[at + 9] = 0;
    if (abs(determinant) <= ROUNDING * s2) code = NON_HYPERBOLIC;
    else if (determinant < 0) code = SADDLE;
    else {
      code = trace < 0 ? 0 : 5;
      if (abs(discriminant) <= ROUNDING * s2) code += 3;
    }
  }
  classes[i] = code;
}

/** The rest of a place whose x and y stand in the table; not for x = 0 under a ceiling that follows the resource. */
function fillPlace(table: EquilibriaTable, k: Float64Array, isSigmoid: boolean, i: number): void {
  const { points } = table;
  const at = i * POINT_WIDTH;
  const x = points[at]!;
  const y = points[at + 1]!;
  const a = k[A]!;
  let j11 = k[P0]! + (2 * k[P1]! + 3 * k[P2]! * x) * x - k[C]! * y;
  let j12 = -k[C]! * x;
  let j21 = -k[D]! * y;
  let j22 = k[Q0]! + (2 * k[Q1]! + 3 * k[Q2]! * y) * y - k[D]! * x;
  if (a !== 0) {
    const ah = a * k[H]!;
    const load = isSigmoid ? ah * x * x : ah * x;
    const crowd = k[W]! * y;
    const u = 1 / (1 + load + crowd);
    const byX = (isSigmoid ? 2 * a * x : a) * y * (1 + crowd) * u * u;
    const byY = (isSigmoid ? a * x * x : a * x) * (1 + load) * u * u;
    j11 -= byX;
    j12 -= byY;
    j21 += k[E]! * byX;
    j22 += k[E]! * byY;
  }
  const l = k[L]!;
  if (l !== 0 && y !== 0) {
    const ratio = y / x;
    j21 += l * ratio * ratio;
    j22 -= 2 * l * ratio;
  }
  points[at + 2] = j11;
  points[at + 3] = j12;
  points[at + 4] = j21;
  points[at + 5] = j22;
  classifyPlace(points, table.classes, i);
}

/** Adds a point to a table that has room. */
function putPoint(table: EquilibriaTable, k: Float64Array, isSigmoid: boolean, x: number, y: number): void {
  const i = table.count;
  if (i >= MOST_EQUILIBRIA) return;
  table.points[i * POINT_WIDTH] = x;
  table.points[i * POINT_WIDTH + 1] = y;
  table.count = i + 1;
  fillPlace(table, k, isSigmoid, i);
}

const poly = new Float64Array(16);
const roots = new Float64Array(16);
const others = new Float64Array(16);
const first = new Float64Array(8);
const crowding = new Float64Array(8);
const bottom = new Float64Array(8);
const scratch = new Float64Array(16);
const scratch2 = new Float64Array(16);

/** out = a b, of degrees da and db; @returns the degree. */
function times(a: Float64Array, da: number, b: Float64Array, db: number, out: Float64Array): number {
  const degree = da + db;
  for (let i = 0; i <= degree; i++) out[i] = 0;
  for (let i = 0; i <= da; i++) {
    for (let j = 0; j <= db; j++) out[i + j] = out[i + j]! + a[i]! * b[j]!;
  }
  return degree;
}

/** Numbers of one place, all but its eigenvalues. Small enough to be inlined. */
function write(p: Float64Array, i: number, x: number, y: number, a: number, b: number, c: number, d: number): void {
  const at = i * POINT_WIDTH;
  p[at] = x;
  p[at + 1] = y;
  p[at + 2] = a;
  p[at + 3] = b;
  p[at + 4] = c;
  p[at + 5] = d;
}

/** All equilibria of two species that touch by encounters alone, without an Allee effect. */
function linearEquilibria(table: EquilibriaTable, k: Float64Array): void {
  const { points, classes } = table;
  const p0 = k[P0]!;
  const p1 = k[P1]!;
  const q0 = k[Q0]!;
  const q1 = k[Q1]!;
  const c = k[C]!;
  const d = k[D]!;
  let n = 1;
  write(points, 0, 0, 0, p0, 0, 0, q0);
  const xAlone = -p0 / p1;
  if (xAlone > 0 && xAlone < Infinity) write(points, n++, xAlone, 0, -p0, -c * xAlone, 0, q0 - d * xAlone);
  const yAlone = -q0 / q1;
  if (yAlone > 0 && yAlone < Infinity) write(points, n++, 0, yAlone, p0 - c * yAlone, 0, -d * yAlone, -q0);
  // p1 x - c y = -p0, -d x + q1 y = -q0
  const determinant = p1 * q1 - c * d;
  const x = -(p0 * q1 + c * q0) / determinant;
  const y = -(p1 * q0 + d * p0) / determinant;
  if (x > 0 && y > 0 && x < Infinity && y < Infinity) write(points, n++, x, y, p1 * x, -c * x, -d * y, q1 * y);
  for (let i = 0; i < n; i++) classifyPlace(points, classes, i);
  table.count = n;
}

/** Roots of n's growth per head less a loss, n = 0 left out. @param p place of its rates. */
function alone(k: Float64Array, p: number, loss: number, out: Float64Array): number {
  first[0] = k[p]! - loss;
  first[1] = k[p + 1]!;
  first[2] = k[p + 2]!;
  return positiveRootsInto(first, 2, out);
}

/** The same with an Allee effect: one equation put into the other, or one after the other where one does not depend. */
function cubicInterior(table: EquilibriaTable, k: Float64Array): void {
  const c = k[C]!;
  const d = k[D]!;
  if (c === 0 || d === 0) {
    const p = c === 0 ? P0 : Q0;
    const q = c === 0 ? Q0 : P0;
    const n = alone(k, p, 0, roots);
    for (let i = 0; i < n; i++) {
      const t = roots[i]!;
      const m = alone(k, q, (c === 0 ? d : c) * t, others);
      for (let j = 0; j < m; j++) putPoint(table, k, false, c === 0 ? t : others[j]!, c === 0 ? others[j]! : t);
    }
    return;
  }
  // y = P(x)/c in Q(y) = q0 + (q1 + q2 y) y = d x
  first[0] = k[P0]!;
  first[1] = k[P1]!;
  first[2] = k[P2]!;
  const square = times(first, 2, first, 2, scratch);
  for (let i = 0; i <= square; i++) {
    const linear = i === 0 ? k[Q0]! : i === 1 ? -d : 0;
    poly[i] = linear + (i <= 2 ? (k[Q1]! * first[i]!) / c : 0) + (k[Q2]! * scratch[i]!) / (c * c);
  }
  const n = positiveRootsInto(poly, square, roots);
  for (let i = 0; i < n; i++) {
    const x = roots[i]!;
    const y = (k[P0]! + (k[P1]! + k[P2]! * x) * x) / c;
    if (y > 0) putPoint(table, k, false, x, y);
  }
}

/**
 * Equilibria off the axes of a consumer. With psi = phi/x, H = 1 + h phi and V = psi - w P the resource rests where
 * y = P H/V, and there phi/D = x V/H: the consumer's equation becomes a polynomial in x.
 */
function consumerInterior(table: EquilibriaTable, k: Float64Array, isSigmoid: boolean): void {
  const a = k[A]!;
  const ah = a * k[H]!;
  const e = k[E]!;
  const w = k[W]!;
  const l = k[L]!;
  const q0 = k[Q0]!;
  const q1 = k[Q1]!;
  const p0 = k[P0]!;
  const p1 = k[P1]!;
  const p2 = k[P2]!;
  let n: number;
  if (q1 === 0 && w === 0 && l === 0) {
    const level = -q0 / (e * a + q0 * ah);
    if (!(level > 0 && level < Infinity)) return;
    roots[0] = isSigmoid ? Math.sqrt(level) : level;
    n = 1;
  } else {
    const dh = isSigmoid ? 2 : 1;
    crowding[0] = 1;
    crowding[1] = isSigmoid ? 0 : ah;
    crowding[2] = ah;
    first[0] = p0;
    first[1] = p1;
    first[2] = p2;
    const dp = p2 === 0 ? 1 : 2;
    bottom[0] = (isSigmoid ? 0 : a) - w * p0;
    bottom[1] = (isSigmoid ? a : 0) - w * p1;
    bottom[2] = -w * p2;
    const dv = w === 0 ? dh - 1 : dp === 2 ? 2 : 1;
    poly.fill(0);
    // (q0 H + e x V) V
    const inner = Math.max(dh, dv + 1);
    for (let i = 0; i <= inner; i++) {
      scratch[i] = (i <= dh ? q0 * crowding[i]! : 0) + (i > 0 && i <= dv + 1 ? e * bottom[i - 1]! : 0);
    }
    const shift = l === 0 ? 0 : 1;
    let degree = inner;
    if (q1 === 0 && l === 0) {
      // V is left out as a common factor.
      for (let i = 0; i <= inner; i++) poly[i] = scratch[i]!;
    } else {
      degree = times(scratch, inner, bottom, dv, scratch2) + shift;
      for (let i = shift; i <= degree; i++) poly[i] = scratch2[i - shift]!;
      // and (q1 - l/x) P H^2
      const dph = times(first, dp, crowding, dh, scratch);
      const dphh = times(scratch, dph, crowding, dh, scratch2);
      if (dphh + shift > degree) degree = dphh + shift;
      for (let i = 0; i <= dphh; i++) {
        poly[i] = poly[i]! + (l === 0 ? q1 : -l) * scratch2[i]!;
        if (l !== 0) poly[i + 1] = poly[i + 1]! + q1 * scratch2[i]!;
      }
    }
    n = positiveRootsInto(poly, degree, roots);
  }
  for (let i = 0; i < n; i++) {
    const x = roots[i]!;
    const own = p0 + (p1 + p2 * x) * x;
    const psi = isSigmoid ? a * x : a;
    const y = (own * (1 + (isSigmoid ? ah * x * x : ah * x))) / (psi - w * own);
    if (y > 0 && y < Infinity) putPoint(table, k, isSigmoid, x, y);
  }
}

/**
 * All equilibria of a consumer in the commonest case, written out: no Allee effect, no interference, no ceiling that
 * follows the resource.
 */
function leanConsumer(table: EquilibriaTable, k: Float64Array, isSigmoid: boolean): void {
  const { points, classes } = table;
  const a = k[A]!;
  const ah = a * k[H]!;
  const e = k[E]!;
  const q0 = k[Q0]!;
  const q1 = k[Q1]!;
  const p0 = k[P0]!;
  const p1 = k[P1]!;
  let n = 1;
  write(points, 0, 0, 0, p0, 0, 0, q0);
  const K = -p0 / p1;
  if (K > 0 && K < Infinity) {
    const square = isSigmoid ? K * K : K;
    const eaten = (a * square) / (1 + ah * square);
    write(points, n++, K, 0, -p0, -eaten, 0, q0 + e * eaten);
  }
  const alone2 = -q0 / q1;
  if (alone2 > 0 && alone2 < Infinity) {
    const byX = isSigmoid ? 0 : a * alone2;
    write(points, n++, 0, alone2, p0 - byX, 0, e * byX, -q0);
  }
  let nRoots = 0;
  if (q1 === 0) {
    const level = -q0 / (e * a + q0 * ah);
    if (level > 0 && level < Infinity) {
      roots[0] = isSigmoid ? Math.sqrt(level) : level;
      nRoots = 1;
    }
  } else {
    // (q0 H + e a x^power) psi + q1 (p0 + p1 x) H^2
    let degree = 3;
    if (isSigmoid) {
      poly[0] = q1 * p0;
      poly[1] = q0 * a + q1 * p1;
      poly[2] = 2 * ah * q1 * p0;
      poly[3] = (q0 * ah + e * a) * a + 2 * ah * q1 * p1;
      poly[4] = ah * ah * q1 * p0;
      poly[5] = ah * ah * q1 * p1;
      degree = 5;
    } else {
      poly[0] = q0 * a + q1 * p0;
      poly[1] = (q0 * ah + e * a) * a + q1 * (p1 + 2 * ah * p0);
      poly[2] = q1 * ah * (2 * p1 + ah * p0);
      poly[3] = q1 * ah * ah * p1;
    }
    nRoots = positiveRootsInto(poly, degree, roots);
  }
  for (let i = 0; i < nRoots; i++) {
    const x = roots[i]!;
    const load = isSigmoid ? ah * x * x : ah * x;
    const psi = isSigmoid ? a * x : a;
    const y = ((p0 + p1 * x) * (1 + load)) / psi;
    if (!(y > 0 && y < Infinity)) continue;
    const u = 1 / (1 + load);
    const byX = (isSigmoid ? 2 * psi : psi) * y * u * u;
    const byY = psi * x * u;
    write(points, n++, x, y, p0 + 2 * p1 * x - byX, -byY, e * byX, q0 + 2 * q1 * y + e * byY);
  }
  for (let i = 0; i < n; i++) classifyPlace(points, classes, i);
  table.count = n;
}

/** Whether a model is one that `equilibriaFast` takes: nothing added or taken by the unit. */
export function hasFastEquilibria(k: Float64Array): boolean {
  return k[S1] === 0 && k[S2] === 0;
}

/**
 * Equilibria with both abundances >= 0, in floating point, without a proof that none is missing.
 * @param k rates as `writePlanarRates` gives them, for which `hasFastEquilibria` is true. @param isSigmoid holling-3.
 * @param table overwritten: the origin, each species alone, both together. A curve of equilibria is not recognised.
 *   Under a ceiling that follows the resource nothing is claimed at x = 0. Never throws, allocates nothing.
 * @source rosenzweigMacArthur1963 (the elimination); strogatz2015 §5.2 (classes)
 */
export function equilibriaFast(k: Float64Array, isSigmoid: boolean, table: EquilibriaTable): void {
  table.count = 0;
  const p0 = k[P0]!;
  const p1 = k[P1]!;
  const q0 = k[Q0]!;
  const q1 = k[Q1]!;
  if (k[A] === 0 && k[L] === 0 && k[P2] === 0 && k[Q2] === 0) {
    linearEquilibria(table, k);
    return;
  }
  if (k[A] !== 0 && k[L] === 0 && k[W] === 0 && k[P2] === 0 && k[Q2] === 0) {
    leanConsumer(table, k, isSigmoid);
    return;
  }
  const follows = k[L] !== 0;
  if (!follows) putPoint(table, k, isSigmoid, 0, 0);
  if (k[P2] === 0) {
    const x = -p0 / p1;
    if (x > 0 && x < Infinity) putPoint(table, k, isSigmoid, x, 0);
  } else {
    first[0] = p0;
    first[1] = p1;
    first[2] = k[P2]!;
    const n = positiveRootsInto(first, 2, roots);
    for (let i = 0; i < n; i++) putPoint(table, k, isSigmoid, roots[i]!, 0);
  }
  if (!follows) {
    first[0] = q0;
    first[1] = q1;
    first[2] = k[Q2]!;
    const n = positiveRootsInto(first, 2, roots);
    for (let i = 0; i < n; i++) putPoint(table, k, isSigmoid, 0, roots[i]!);
  }
  if (k[A] === 0) cubicInterior(table, k);
  else consumerInterior(table, k, isSigmoid);
}
