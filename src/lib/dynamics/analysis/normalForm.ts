import { REAL } from '../numeric/ring';
import { JETS, type Jet } from '../numeric/jet';
import { coefficientsOf } from '../model/coefficients';
import type { ModelSpec } from '../model/spec';
import { mapCoefficients, rates } from './elimination';

/** Second and third derivatives of the rates at a point, as multilinear forms. */
export interface HigherTerms {
  /** B(u, v), component by component. */
  second(u: readonly number[], v: readonly number[]): [number, number];
  /** C(u, v, w). */
  third(u: readonly number[], v: readonly number[], w: readonly number[]): [number, number];
}

/**
 * Derivatives of the rates beyond the Jacobian.
 * @param spec a sound model
 * @param x, y where; under leslie growth x > 0
 * @returns the symmetric forms of order 2 and 3, 1/time per abundance and per abundance squared. Never throws.
 */
export function higherTerms(spec: ModelSpec, x: number, y: number): HigherTerms {
  const k = mapCoefficients(coefficientsOf(REAL, spec), JETS.constant);
  const f = rates(JETS, k, JETS.variable(x, 0), JETS.variable(y, 1));
  const second = (jet: Jet, u: readonly number[], v: readonly number[]) =>
    2 * jet[3]! * u[0]! * v[0]! + jet[4]! * (u[0]! * v[1]! + u[1]! * v[0]!) + 2 * jet[5]! * u[1]! * v[1]!;
  const third = (jet: Jet, u: readonly number[], v: readonly number[], w: readonly number[]) =>
    6 * jet[6]! * u[0]! * v[0]! * w[0]! +
    2 * jet[7]! * (u[0]! * v[0]! * w[1]! + u[0]! * v[1]! * w[0]! + u[1]! * v[0]! * w[0]!) +
    2 * jet[8]! * (u[0]! * v[1]! * w[1]! + u[1]! * v[0]! * w[1]! + u[1]! * v[1]! * w[0]!) +
    6 * jet[9]! * u[1]! * v[1]! * w[1]!;
  return {
    second: (u, v) => [second(f[0], u, v), second(f[1], u, v)],
    third: (u, v, w) => [third(f[0], u, v, w), third(f[1], u, v, w)]
  };
}

/** A number with the size of what it was summed from: |value| far below `size` is rounding, not a finding. */
export interface Weighed {
  value: number;
  size: number;
}

/** Below this share of its own terms a coefficient counts as zero. */
const ROUNDING = 1e-9;

export function signOfWeighed(weighed: Weighed): -1 | 0 | 1 {
  if (!(Math.abs(weighed.value) > ROUNDING * weighed.size)) return 0;
  return weighed.value > 0 ? 1 : -1;
}

/**
 * First Lyapunov coefficient at a purely imaginary pair, up to a positive factor.
 * @param j Jacobian with trace 0 and determinant > 0
 * @returns negative: the point attracts weakly (supercritical); positive: it repels (subcritical)
 * @source guckenheimer1983 §3.4
 */
export function firstLyapunov(j: readonly [number, number, number, number], terms: HigherTerms): Weighed {
  const [a, b, c, d] = j;
  const omega = Math.sqrt(a * d - b * c);
  // In the basis e1 = (b, (d - a)/2), e2 = (0, omega) the trace-free part turns as [[0, omega], [-omega, 0]].
  // Species are scaled so that neither the unit of x nor that of y matters.
  const e1 = [b, (d - a) / 2];
  const e2 = [0, omega];
  const det = e1[0]! * e2[1]!;
  const inBasis = (w: readonly number[]) => [
    (w[0]! * e2[1]! - w[1]! * e2[0]!) / det,
    (e1[0]! * w[1]! - e1[1]! * w[0]!) / det
  ];
  const [xx, xy, yy] = [terms.second(e1, e1), terms.second(e1, e2), terms.second(e2, e2)].map(inBasis);
  const xxx = inBasis(terms.third(e1, e1, e1));
  const xyy = inBasis(terms.third(e1, e2, e2));
  const xxy = inBasis(terms.third(e1, e1, e2));
  const yyy = inBasis(terms.third(e2, e2, e2));
  // With u' = omega v + f, v' = -omega u + g the textbook formula has -omega for its omega.
  const parts = [
    xxx[0]!,
    xyy[0]!,
    xxy[1]!,
    yyy[1]!,
    (xy![0]! * (xx![0]! + yy![0]!)) / -omega,
    (-xy![1]! * (xx![1]! + yy![1]!)) / -omega,
    (-xx![0]! * xx![1]!) / -omega,
    (yy![0]! * yy![1]!) / -omega
  ];
  return {
    value: parts.reduce((sum, part) => sum + part, 0) / 16,
    size: parts.reduce((sum, part) => sum + Math.abs(part), 0) / 16
  };
}

/** The flow on the centre manifold, u' = quadratic u^2 + cubic u^3 + ..., along `direction`. */
export interface CentreManifold {
  direction: [number, number];
  quadratic: Weighed;
  cubic: Weighed;
}

/**
 * Centre manifold at one zero eigenvalue.
 * @param j Jacobian with determinant 0 and trace `trace` != 0
 * @source guckenheimer1983 §3.2
 */
export function centreManifold(j: readonly [number, number, number, number], terms: HigherTerms): CentreManifold {
  const [a, b, c, d] = j;
  const trace = a + d;
  // Null vectors from the larger row or column: (b, -a) or (d, -c); adj(J) = trace-free mirror gives both at once.
  const v = Math.abs(a) + Math.abs(b) > Math.abs(c) + Math.abs(d) ? [-b, a] : [d, -c];
  const w = Math.abs(a) + Math.abs(c) > Math.abs(b) + Math.abs(d) ? [-c, a] : [d, -b];
  const orientation = v[0]! + v[1]! < 0 ? -1 : 1;
  const direction: [number, number] = [orientation * v[0]!, orientation * v[1]!];
  const scale = w[0]! * direction[0] + w[1]! * direction[1];
  const left = [w[0]! / scale, w[1]! / scale];
  const project = (value: readonly [number, number]): Weighed => ({
    value: left[0]! * value[0] + left[1]! * value[1],
    size: Math.abs(left[0]! * value[0]) + Math.abs(left[1]! * value[1])
  });
  const square = terms.second(direction, direction);
  const quadratic = project(square);
  // The curved part h of the manifold: J h = -(B(v, v) - <w, B(v, v)> v), along the other eigenvector, eigenvalue trace.
  const h = [
    -(square[0] - quadratic.value * direction[0]) / trace,
    -(square[1] - quadratic.value * direction[1]) / trace
  ];
  const bent = project(terms.second(direction, h));
  const straight = project(terms.third(direction, direction, direction));
  return {
    direction,
    quadratic: { value: quadratic.value / 2, size: quadratic.size / 2 },
    cubic: { value: (straight.value + 3 * bent.value) / 6, size: (straight.size + 3 * bent.size) / 6 }
  };
}
