/**
 * The five-stage Radau IIA method of order 9, worked out from its definition: collocation at the right Radau points.
 * @source hairer1996 §IV.5 (the family), §IV.8 (error estimate and start of the Newton iteration)
 */
import { factorise, substitute } from './linear';

export const STAGES = 5;

/** Legendre polynomials P_s and P_{s-1} at z. */
function legendre(s: number, z: number): [number, number] {
  let before = 1;
  let now = z;
  for (let k = 2; k <= s; k++) [before, now] = [now, ((2 * k - 1) * z * now - (k - 1) * before) / k];
  return [now, before];
}

/** Zeros of P_s - P_{s-1} mapped to (0, 1], in order: sign changes on a fine grid, then bisection to the last bit. */
function radauNodes(s: number): number[] {
  const f = (c: number): number => {
    const [now, before] = legendre(s, 2 * c - 1);
    return now - before;
  };
  const nodes: number[] = [];
  const cells = 400;
  for (let i = 0; i < cells - 1; i++) {
    let low = i / cells;
    let high = (i + 1) / cells;
    if (f(low) * f(high) > 0) continue;
    const sign = Math.sign(f(low));
    for (let j = 0; j < 60; j++) {
      const middle = (low + high) / 2;
      if (sign * f(middle) > 0) low = middle;
      else high = middle;
    }
    nodes.push((low + high) / 2);
  }
  return [...nodes, 1];
}

/** Inverse of a small row-major matrix. */
function invert(a: readonly number[], n: number): number[] {
  const lu = Float64Array.from(a);
  const pivots = new Int32Array(n);
  factorise(lu, n, pivots);
  const inverse = new Array<number>(n * n).fill(0);
  for (let j = 0; j < n; j++) {
    const unit = new Float64Array(n);
    unit[j] = 1;
    substitute(lu, n, pivots, unit);
    for (let i = 0; i < n; i++) inverse[i * n + j] = unit[i]!;
  }
  return inverse;
}

function determinant(a: readonly number[], n: number): number {
  const lu = Float64Array.from(a);
  const pivots = new Int32Array(n);
  if (!factorise(lu, n, pivots)) return 0;
  let product = 1;
  for (let i = 0; i < n; i++) product *= (pivots[i] === i ? 1 : -1) * lu[i * n + i]!;
  return product;
}

const s = STAGES;
export const RADAU_NODES: readonly number[] = radauNodes(s);
const powers = Array.from({ length: s * s }, (_, k) => RADAU_NODES[Math.floor(k / s)]! ** (k % s));
const powersInverse = invert(powers, s);

/** A = diag(c) V diag(1/k) V^-1, row-major: a_ij integrates the j-th cardinal polynomial from 0 to c_i. */
export const RADAU_MATRIX: readonly number[] = Array.from({ length: s * s }, (_, k) => {
  const i = Math.floor(k / s);
  let sum = 0;
  for (let m = 0; m < s; m++) sum += (RADAU_NODES[i]! ** (m + 1) / (m + 1)) * powersInverse[m * s + (k % s)]!;
  return sum;
});
export const RADAU_INVERSE: readonly number[] = invert(RADAU_MATRIX, s);

/** The one real eigenvalue of A; the weight of the slope at the start of the step in the error estimate. */
export const GAMMA = (() => {
  const f = (lambda: number): number =>
    determinant(
      RADAU_INVERSE.map((a, k) => (k % (s + 1) === 0 ? a - lambda : a)),
      s
    );
  let low = 1;
  let high = 20;
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (f(middle) * f(low) > 0) low = middle;
    else high = middle;
  }
  return 2 / (low + high);
})();

/**
 * Weights e of the stage increments Z in the error estimate gamma h f(y0) + sum e_i Z_i: the comparison formula has order 5
 * on the nodes 0, c_1 … c_5 with weight gamma at 0. Only the first moment differs from that of the method.
 */
export const RADAU_ERROR: readonly number[] = Array.from({ length: s }, (_, j) => {
  let sum = 0;
  for (let i = 0; i < s; i++) sum -= GAMMA * powersInverse[i]! * RADAU_INVERSE[i * s + j]!;
  return sum;
});

/** From Z_i / c_i to the coefficients of the collocation polynomial, row-major. */
export const RADAU_POLYNOMIAL: readonly number[] = powersInverse;
