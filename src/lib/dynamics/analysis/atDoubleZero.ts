import { coefficientsOf, type Coefficients } from '../model/coefficients';
import type { ModelSpec } from '../model/spec';
import { INTERVAL, signOf, type Interval } from '../numeric/interval';
import { REAL } from '../numeric/ring';
import { higherTerms, signOfWeighed } from './normalForm';
import type { DecidedBy, EquilibriumClass, Stability } from './results';

/** What is found at a point, and by which argument. */
export interface Verdict {
  class: EquilibriumClass;
  stability: Stability;
  decidedBy: DecidedBy;
  remark: string | null;
}

export const UNDECIDED: Verdict = {
  class: 'non-hyperbolic',
  stability: 'undetermined',
  decidedBy: 'undecided',
  remark: 'The linearisation decides nothing here, nor do the next terms.'
};

/** Sign of a per-head rate for abundances just above 0: that of its first coefficient that is not 0; null when unclear. */
function signNearZero(coefficients: readonly Interval[]): -1 | 0 | 1 | null {
  for (const c of coefficients) {
    const sign = signOf(c);
    if (sign !== 0) return sign;
  }
  return 0;
}

/**
 * The loss of both, where nothing is added or taken by the unit. A species that grows on its own leaves along its axis. Where
 * neither does, x + y falls under competition, and so does e x + y under feeding, which only turns one into the other: the
 * parts of the quadrant below such a line are left by nobody.
 */
function atOrigin(k: Coefficients<Interval>): Verdict | null {
  if (!INTERVAL.isZero(k.s1) || !INTERVAL.isZero(k.s2) || !INTERVAL.isZero(k.leslie)) return null;
  const [first, second] = [signNearZero(k.p), signNearZero(k.q)];
  if (first === 1 || second === 1) {
    const who = first === 1 ? 'first' : 'second';
    return {
      class: 'non-hyperbolic',
      stability: 'unstable',
      decidedBy: 'motion along an axis',
      remark: `A few of the ${who} species increase by themselves, slowly at first.`
    };
  }
  if (first !== -1 || second !== -1) return null;
  return {
    class: 'non-hyperbolic',
    stability: 'stable',
    decidedBy: 'trapping argument',
    remark: 'Attracts slowly: a weighted sum of the two abundances falls along every path near it.'
  };
}

/**
 * One species that moves by itself, n' = n P(n) + s, at a multiple root: whatever the other does, states on one side leave.
 * @returns null where it attracts from both sides, which leaves the rest open
 */
function alone(perHead: readonly [number, number, number], n: number, who: string): Verdict | null {
  const [, c1, c2] = perHead;
  const curvature = { value: c1 + 3 * c2 * n, size: Math.abs(c1) + 3 * Math.abs(c2 * n) };
  const leaves = signOfWeighed(curvature) !== 0 || c2 > 0;
  if (!leaves || !(n > 0)) return null;
  return {
    class: 'non-hyperbolic',
    stability: 'unstable',
    decidedBy: 'motion along an axis',
    remark: `Lets go on one side: the ${who} species by itself leaves the level from there.`
  };
}

/**
 * A Jacobian that is nilpotent but not 0. With J v0 = 0 and w J = 0 the flow is u' = v, v' = a u^2 + ..., a cusp wherever a,
 * which is w B(v0, v0) up to a factor, is not 0.
 * @source kuznetsov2004 §8.4
 */
function cusp(spec: ModelSpec, x: number, y: number, j: readonly [number, number, number, number]): Verdict | null {
  const [a, b, c] = j;
  if (b === 0 && c === 0) return null;
  // (b, -a) spans the null space of the first row, (a, -c) that of the second, as c = -a^2/b and d = -a.
  const v0 = b !== 0 ? [b, -a] : [0, c];
  const w = b !== 0 ? [a / b, 1] : [1, 0];
  const square = higherTerms(spec, x, y).second(v0, v0);
  const parts = [w[0]! * square[0], w[1]! * square[1]];
  const bend = { value: parts[0]! + parts[1]!, size: Math.abs(parts[0]!) + Math.abs(parts[1]!) };
  if (signOfWeighed(bend) === 0) return null;
  return {
    class: 'non-hyperbolic',
    stability: 'unstable',
    decidedBy: 'normal form',
    remark: 'A cusp: both eigenvalues are zero, and paths come in along one line and leave along another.'
  };
}

/**
 * What can be shown where both eigenvalues are zero, or the centre manifold decides nothing.
 * @param spec a sound model. @param x, y the equilibrium
 * @param j row-major Jacobian with what is zero within rounding set to 0
 * @returns a verdict with its argument, or UNDECIDED. Never throws.
 */
export function atDoubleZero(
  spec: ModelSpec,
  x: number,
  y: number,
  j: readonly [number, number, number, number]
): Verdict {
  if (x === 0 && y === 0) return atOrigin(coefficientsOf(INTERVAL, spec)) ?? UNDECIDED;
  const k = coefficientsOf(REAL, spec);
  const rivals = k.interaction === 'competition';
  const firstAlone = (y === 0 && k.s2 === 0) || (rivals && k.c12 === 0);
  const secondAlone = k.leslie === 0 && ((x === 0 && k.s1 === 0) || (rivals ? k.c21 === 0 : k.e === 0));
  const flat = (slope: number) => slope === 0;
  return (
    (firstAlone && flat(j[0]) ? alone(k.p, x, 'first') : null) ??
    (secondAlone && flat(j[3]) ? alone(k.q, y, 'second') : null) ??
    (x > 0 && y > 0 ? cusp(spec, x, y, j) : null) ??
    UNDECIDED
  );
}
