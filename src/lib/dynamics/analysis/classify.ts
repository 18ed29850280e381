import {
  add,
  contains,
  distanceToZero,
  interval,
  middle,
  multiply,
  subtract,
  type Interval
} from '../numeric/interval';
import { coefficientsOf } from '../model/coefficients';
import type { ModelSpec } from '../model/spec';
import { REAL } from '../numeric/ring';
import { atDoubleZero, UNDECIDED, type Verdict } from './atDoubleZero';
import type { LinearEnclosure } from './certify';
import { centreManifold, firstLyapunov, higherTerms, signOfWeighed, type CentreManifold } from './normalForm';
import type { Complex, Equilibrium, EquilibriumClass, Stability } from './results';

type Matrix = readonly [number, number, number, number];

/** What classify adds to a point. */
export type Classification = Pick<
  Equilibrium,
  | 'jacobian'
  | 'trace'
  | 'determinant'
  | 'eigenvalues'
  | 'class'
  | 'stability'
  | 'decidedBy'
  | 'borderline'
  | 'returnTime'
  | 'period'
  | 'remark'
>;

/** Zero tests of the linear part, already decided. */
interface Linear {
  trace: number;
  determinant: number;
  /** trace^2 - 4 determinant, computed as (a - d)^2 + 4 b c. */
  discriminant: number;
  traceIsZero: boolean;
  determinantIsZero: boolean;
  discriminantIsZero: boolean;
  isScalar: boolean;
  nearBorder: boolean;
}

/** Rounding left in a double-precision Jacobian when no enclosure is at hand. */
const ROUNDING = 1e-13;
/** Within this share of its own scale a quantity could change sign with the last digits of a rate. */
const BORDER = 1e-9;

function linearPart(j: Matrix, over: LinearEnclosure | null): Linear {
  const [a, b, c, d] = j;
  // s is the same in whatever unit each population is counted.
  const s = Math.abs(a) + Math.abs(d) + Math.sqrt(Math.abs(b * c));
  const trace = a + d;
  const direct = a * d - b * c;
  const closer = over?.determinant;
  const determinant = closer && !contains(closer, direct) ? middle(closer) : direct;
  const discriminant = (a - d) ** 2 + 4 * b * c;
  const near = (value: number, scale: number, share: number) => Math.abs(value) <= share * scale;
  const triangular = b === 0 || c === 0;
  // The eigenvalues of a triangular matrix are its diagonal, each with a scale of its own.
  const weak = triangular
    ? Math.min(Math.abs(a), Math.abs(d)) / (Math.abs(a) + Math.abs(d) || 1)
    : Math.abs(determinant) / s ** 2;
  const nearBorder =
    s === 0 || weak <= BORDER || near(discriminant, s * s, BORDER) || (discriminant < 0 && near(trace, s, BORDER));
  if (over === null) {
    return {
      trace,
      determinant,
      discriminant,
      traceIsZero: near(trace, s, ROUNDING),
      determinantIsZero: near(determinant, s * s, ROUNDING),
      discriminantIsZero: near(discriminant, s * s, ROUNDING),
      // A single off-diagonal entry has no scale of its own: only its absence makes a multiple of the identity.
      isScalar: near(a - d, s, ROUNDING) && b === 0 && c === 0,
      nearBorder
    };
  }
  const [ia, ib, ic, id] = over.entries;
  const gap = subtract(ia, id);
  const coupling = multiply(ib, ic);
  const iDiscriminant = add(multiply(gap, gap), multiply(interval(4, 4), coupling));
  const isZero = (value: Interval) => contains(value, 0);
  const discriminantIsZero = isZero(iDiscriminant) || (isZero(gap) && isZero(coupling));
  return {
    trace,
    determinant,
    discriminant,
    traceIsZero: isZero(add(ia, id)),
    determinantIsZero: isZero(over.determinant ?? subtract(multiply(ia, id), coupling)),
    discriminantIsZero,
    isScalar: discriminantIsZero && isZero(gap) && isZero(ib) && isZero(ic),
    nearBorder
  };
}

function eigenvaluesOf(part: Linear): [Complex, Complex] {
  const { trace, determinant, discriminant } = part;
  if (part.determinantIsZero) {
    const other = part.traceIsZero ? 0 : trace;
    const pair: [Complex, Complex] = [
      { re: Math.max(other, 0), im: 0 },
      { re: Math.min(other, 0), im: 0 }
    ];
    return pair;
  }
  if (part.discriminantIsZero)
    return [
      { re: trace / 2, im: 0 },
      { re: trace / 2, im: 0 }
    ];
  const root = Math.sqrt(Math.abs(discriminant)) / 2;
  if (discriminant < 0) {
    const re = part.traceIsZero ? 0 : trace / 2;
    return [
      { re, im: root },
      { re, im: -root }
    ];
  }
  // The larger one by sum, the smaller by quotient: no cancellation.
  const strong = trace / 2 + (trace < 0 ? -root : root);
  const weak = determinant / strong;
  return [
    { re: Math.max(strong, weak), im: 0 },
    { re: Math.min(strong, weak), im: 0 }
  ];
}

function hyperbolicClass(part: Linear): EquilibriumClass {
  if (part.determinant < 0) return 'saddle';
  const side = part.trace < 0 ? 'stable' : 'unstable';
  if (part.discriminantIsZero) return part.isScalar ? `${side} star` : `${side} degenerate node`;
  return part.discriminant < 0 ? `${side} spiral` : `${side} node`;
}

/**
 * Models in which swings around an equilibrium with trace 0 never change in size. Exponential resource and plain mortality,
 * nothing added or taken by the unit, with one of
 * - a proportional response: e a x - m ln x + a y - r ln y is kept;
 * - holling-3, where trace 0 means e = 2 m h: with psi = 1/(a x) + h x the paths obey psi' = psi_x (r psi - y) and
 *   (ln y)' = m psi_x, so that d psi/d ln y = (r psi - y)/m, a linear equation with an integral.
 */
function hasConservedQuantity(spec: ModelSpec): boolean {
  if (spec.interaction !== 'consumer-resource') return false;
  const k = coefficientsOf(REAL, spec);
  const absent = [k.p[1], k.p[2], k.q[1], k.leslie, k.w, k.s1, k.s2];
  return absent.every((value) => value === 0) && (k.h === 0 || k.power === 2) && k.p[0] > 0 && k.q[0] < 0;
}

function atImaginaryPair(spec: ModelSpec, x: number, y: number, j: Matrix): Verdict {
  if (x > 0 && y > 0 && hasConservedQuantity(spec)) {
    return {
      class: 'centre',
      stability: 'neutral',
      decidedBy: 'conserved quantity',
      remark: 'Closed orbits around it: a quantity is conserved along every path.'
    };
  }
  const sign = signOfWeighed(firstLyapunov(j, higherTerms(spec, x, y)));
  if (sign === 0) return UNDECIDED;
  const stability: Stability = sign < 0 ? 'stable' : 'unstable';
  const [motion, sort, word] =
    sign < 0 ? ['attracting', 'supercritical', 'negative'] : ['repelling', 'subcritical', 'positive'];
  return {
    class: 'non-hyperbolic',
    stability,
    decidedBy: 'first Lyapunov coefficient',
    remark: `Centre of the linearisation; a weakly ${motion} spiral in truth: the first Lyapunov coefficient is ${word} (${sort} Hopf point).`
  };
}

/**
 * Which half of the centre direction is feasible at a point on an axis: 1 or -1, or 0 when both are (inside the quadrant, or
 * along the axis).
 */
function feasibleSide(x: number, y: number, { direction: [dx, dy] }: CentreManifold): number {
  if (x === 0 && dx !== 0) return Math.sign(dx);
  return y === 0 ? Math.sign(dy) : 0;
}

function atZeroEigenvalue(spec: ModelSpec, x: number, y: number, j: Matrix, trace: number): Verdict {
  const base = { class: 'non-hyperbolic', decidedBy: 'centre manifold' } as const;
  const manifold = centreManifold(j, higherTerms(spec, x, y));
  const quadratic = signOfWeighed(manifold.quadratic);
  const cubic = signOfWeighed(manifold.cubic);
  if (trace > 0) {
    return { ...base, stability: 'unstable', remark: 'One eigenvalue is zero, the other positive.' };
  }
  if (quadratic === 0 && cubic === 0) return atDoubleZero(spec, x, y, j);
  if (quadratic === 0) {
    return cubic < 0
      ? { ...base, stability: 'stable', remark: 'Attracts slowly: the cubic term of the centre manifold is negative.' }
      : { ...base, stability: 'unstable', remark: 'Repels slowly: the cubic term of the centre manifold is positive.' };
  }
  const side = feasibleSide(x, y, manifold);
  if (side !== 0) {
    return quadratic * side < 0
      ? { ...base, stability: 'stable', remark: 'Attracts all feasible states near it, but only slowly (as 1/t).' }
      : { ...base, stability: 'unstable', remark: 'Repels feasible states, slowly at first.' };
  }
  return {
    ...base,
    stability: 'unstable',
    remark: 'Half-stable: attracts from one side and lets go on the other, as where two equilibria merge.'
  };
}

/**
 * Kind of an equilibrium: by the linearisation where it decides, by the next terms where it does not.
 * @param spec a sound model
 * @param x, y the equilibrium
 * @param j row-major Jacobian there, 1/time
 * @param over what is certain of `j` (see jacobianOver), or null: then entries are taken to be good to 1e-13
 * @returns class, stability, which argument decided, and times. Never throws.
 * @source strogatz2015 §5.2, guckenheimer1983 §3.2, §3.4
 */
export function classify(
  spec: ModelSpec,
  x: number,
  y: number,
  j: Matrix,
  over: LinearEnclosure | null
): Classification {
  const part = linearPart(j, over);
  const eigenvalues = eigenvaluesOf(part);
  const hyperbolic = !part.determinantIsZero && !(part.traceIsZero && part.determinant > 0);
  // What is zero within rounding is zero from here on: noise must not choose the null vectors.
  const clean = j.map((entry, i) => (over && distanceToZero(over.entries[i]!) === 0 ? 0 : entry)) as unknown as Matrix;
  let verdict: Verdict;
  if (hyperbolic) {
    const kind = hyperbolicClass(part);
    const stability = kind.startsWith('stable') ? 'stable' : 'unstable';
    verdict = { class: kind, stability, decidedBy: 'linearisation', remark: null };
  } else if (!part.determinantIsZero) verdict = atImaginaryPair(spec, x, y, clean);
  else if (part.traceIsZero) verdict = atDoubleZero(spec, x, y, clean);
  else verdict = atZeroEigenvalue(spec, x, y, clean, part.trace);
  const slowest = Math.max(eigenvalues[0].re, eigenvalues[1].re);
  const im = eigenvalues[0].im;
  return {
    jacobian: [
      [j[0], j[1]],
      [j[2], j[3]]
    ],
    trace: part.traceIsZero ? 0 : part.trace,
    determinant: part.determinantIsZero ? 0 : part.determinant,
    eigenvalues,
    ...verdict,
    borderline: part.nearBorder || !hyperbolic || part.discriminantIsZero,
    returnTime: hyperbolic && verdict.stability === 'stable' && slowest < 0 ? -1 / slowest : null,
    period: im > 0 ? (2 * Math.PI) / im : null
  };
}
