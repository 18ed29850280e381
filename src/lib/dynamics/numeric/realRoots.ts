/**
 * Positive real roots of a polynomial with interval coefficients, with a proof: Descartes' rule of signs in the Bernstein
 * basis on shells of the positive axis. What the rule cannot settle within rounding comes back as a cluster.
 * @source rouillier2004
 */
import {
  add,
  contains,
  distanceToZero,
  divide,
  INTERVAL,
  interval,
  middle,
  multiply,
  ONE,
  point,
  signOf,
  size,
  subtract,
  ZERO,
  type Interval
} from './interval';
import { polynomials, type Polynomial } from './polynomial';

/** One place on the axis: exactly one simple root (`single`), or a knot of roots that cannot be told apart. */
export interface RootPlace {
  /** Best estimate. */
  value: number;
  /** Encloses the root, or the whole knot. */
  lo: number;
  hi: number;
  single: boolean;
  /** For a knot, the largest number of roots it can hold, with multiplicity. */
  atMost: number;
}

export interface PositiveRoots {
  places: RootPlace[];
  /** Order of the root at 0 within rounding (0: none). */
  atZero: number;
  /**
   * Degree lost within rounding at the top: a root may have gone to infinity. 2 more where coefficients are so far apart
   * that part of the axis could not be searched in the numbers of a computer.
   */
  atInfinity: number;
  /** Every coefficient is 0 within rounding. */
  vanishes: boolean;
  /** `vanishes` rests on exact zeros, not on rounding. */
  exactlyZero: boolean;
}

const algebra = polynomials(INTERVAL);

/** Not a short binary fraction: round numbers, where people put their roots, must not fall on a cut. */
const SHELL_START = 0.7236067977499789;
const CUT: Interval = point(0.4871236459128);
const REST: Interval = subtract(point(1), CUT);
/** Two roots nearer than this, relatively, are handed on as a knot. */
const FINEST = 2 ** -31;
/** Exponents between which a shell and its ends are ordinary numbers. */
const LOWEST_SHELL = -1021;
const HIGHEST_SHELL = 1022;
/** More pieces at one level than this means a root of high order; going on would only pile them up. */
const WIDEST_FRONT = 24;

/**
 * Sign changes: fewest and most that the intervals allow. For each sign that the sequence so far could end on, the extremes
 * are carried along; an exact zero is skipped, as the rule says.
 */
function signChanges(coefficients: Polynomial<Interval>): { fewest: number; most: number } {
  let plusFewest = Infinity;
  let plusMost = -Infinity;
  let minusFewest = Infinity;
  let minusMost = -Infinity;
  let started = false;
  for (const c of coefficients) {
    const canBePlus = c.hi > 0;
    const canBeMinus = c.lo < 0;
    if (!canBePlus && !canBeMinus) continue;
    const nextPlusFewest = started ? Math.min(plusFewest, minusFewest + 1) : 0;
    const nextPlusMost = started ? Math.max(plusMost, minusMost + 1) : 0;
    const nextMinusFewest = started ? Math.min(minusFewest, plusFewest + 1) : 0;
    const nextMinusMost = started ? Math.max(minusMost, plusMost + 1) : 0;
    plusFewest = canBePlus ? nextPlusFewest : Infinity;
    plusMost = canBePlus ? nextPlusMost : -Infinity;
    minusFewest = canBeMinus ? nextMinusFewest : Infinity;
    minusMost = canBeMinus ? nextMinusMost : -Infinity;
    started = true;
  }
  if (!started) return { fewest: 0, most: 0 };
  return { fewest: Math.min(plusFewest, minusFewest), most: Math.max(plusMost, minusMost) };
}

/** a(scale * x). */
function rescale(a: Polynomial<Interval>, scale: Interval): Polynomial<Interval> {
  let power: Interval = ONE;
  return a.map((c, i) => {
    if (i > 0) power = multiply(power, scale);
    return multiply(c, power);
  });
}

const bernsteinWeights = new Map<number, Interval[][]>();

function binomial(n: number, k: number): number {
  let value = 1;
  for (let i = 1; i <= k; i++) value = (value * (n - k + i)) / i;
  return value;
}

/** Row i, column k: C(i, k) / C(n, k). */
function weightsFor(n: number): Interval[][] {
  const known = bernsteinWeights.get(n);
  if (known) return known;
  const rows: Interval[][] = [];
  for (let i = 0; i <= n; i++) {
    const row: Interval[] = [];
    for (let k = 0; k <= i; k++) row.push(divide(point(binomial(i, k)), point(binomial(n, k))));
    rows.push(row);
  }
  bernsteinWeights.set(n, rows);
  return rows;
}

/** Bernstein coefficients of a on [1, 1 + width]. */
function bernstein(a: Polynomial<Interval>, width: Interval): Interval[] {
  const shifted = [...a];
  for (let i = 0; i < shifted.length - 1; i++) {
    for (let j = shifted.length - 2; j >= i; j--) shifted[j] = add(shifted[j]!, shifted[j + 1]!);
  }
  const scaled = width.lo === 1 && width.hi === 1 ? shifted : rescale(shifted, width);
  return weightsFor(a.length - 1).map((row) =>
    row.reduce<Interval>((sum, weight, k) => add(sum, multiply(weight, scaled[k]!)), ZERO)
  );
}

/** Splits Bernstein coefficients at CUT by de Casteljau's scheme. */
function split(b: Interval[]): [Interval[], Interval[]] {
  const work = [...b];
  const left: Interval[] = [work[0]!];
  const right: Interval[] = [work[work.length - 1]!];
  for (let level = 1; level < b.length; level++) {
    for (let i = 0; i < b.length - level; i++) {
      work[i] = add(multiply(REST, work[i]!), multiply(CUT, work[i + 1]!));
    }
    left.push(work[0]!);
    right.unshift(work[b.length - level - 1]!);
  }
  return [left, right];
}

/** One term outweighs all the others on [1, 2]. */
function oneTermRules(a: Polynomial<Interval>): boolean {
  for (let k = 0; k < a.length; k++) {
    const own = distanceToZero(a[k]!);
    if (own === 0) continue;
    let others = 0;
    for (let i = 0; i < a.length && others < own; i++) {
      if (i !== k) others += size(a[i]!) * (i > k ? 2 ** (i - k) : 1);
    }
    // The factor covers the rounding of this very sum.
    if (others * (1 + 1e-12) < own) return true;
  }
  return false;
}

interface Piece {
  from: number;
  to: number;
  b: Interval[];
}

/** Sorts the roots of one shell [start, 2 start] into `single` and `knots`. */
function searchShell(b: Interval[], start: number, singles: Piece[], knots: Piece[]): void {
  let front: Piece[] = [{ from: 1, to: 2, b }];
  while (front.length > 0) {
    const next: Piece[] = [];
    const giveUp = front.length > WIDEST_FRONT;
    for (const piece of front) {
      const { fewest, most } = signChanges(piece.b);
      if (most === 0) continue;
      const scaled = { from: piece.from * start, to: piece.to * start, b: piece.b };
      if (most === 1 && fewest === 1) singles.push(scaled);
      else if (giveUp || piece.to - piece.from < FINEST) knots.push(scaled);
      else {
        const cut = piece.from + (piece.to - piece.from) * CUT.lo;
        const [left, right] = split(piece.b);
        next.push({ from: piece.from, to: cut, b: left }, { from: cut, to: piece.to, b: right });
      }
    }
    front = next;
  }
}

function evaluate(a: Polynomial<Interval>, x: number): Interval {
  return algebra.at(a, point(x));
}

/** Fujiwara's bound: no root of the definite part lies beyond. */
function rootBound(a: Polynomial<Interval>): number {
  const top = a.length - 1;
  const lead = distanceToZero(a[top]!);
  let bound = 0;
  for (let k = 1; k <= top; k++) bound = Math.max(bound, (size(a[top - k]!) / lead) ** (1 / k));
  return 2 * bound * (1 + 1e-9);
}

/** Bisection and Newton on the mid-coefficients inside a bracket that holds one root. */
function refine(a: Polynomial<Interval>, from: number, to: number): RootPlace {
  const mid = a.map(middle);
  const valueAt = (x: number) => {
    let value = 0;
    let slope = 0;
    for (let i = mid.length - 1; i >= 0; i--) {
      slope = slope * x + value;
      value = value * x + mid[i]!;
    }
    return { value, slope };
  };
  let lo = from;
  let hi = to;
  const signLow = Math.sign(valueAt(lo).value) || -Math.sign(valueAt(hi).value) || 1;
  let x = lo + (hi - lo) / 2;
  for (let i = 0; i < 200 && hi - lo > 2 ** -52 * hi; i++) {
    const { value, slope } = valueAt(x);
    if (value === 0) break;
    if (Math.sign(value) === signLow) lo = x;
    else hi = x;
    const newton = x - value / slope;
    const before = x;
    // Newton while it stays in the bracket and the bracket shrinks; bisection (geometric on wide ones) otherwise.
    if (newton > lo && newton < hi && i % 4 !== 3) x = newton;
    else x = hi > 4 * lo && lo > 0 ? Math.sqrt(lo * hi) : lo + (hi - lo) / 2;
    if (Math.abs(x - before) <= 2 ** -53 * x) break;
  }
  for (let width = 2 ** -51; width < 1e-3; width *= 4) {
    const below = Math.max(from, x * (1 - width));
    const above = Math.min(to, x * (1 + width));
    const left = signOf(evaluate(a, below));
    const right = signOf(evaluate(a, above));
    if (left !== null && right !== null && left * right < 0) {
      return { value: x, lo: below, hi: above, single: true, atMost: 1 };
    }
  }
  return { value: x, lo: from, hi: to, single: true, atMost: 1 };
}

/** Joins neighbouring knot pieces, and counts again from ends far enough out for their signs to be certain. */
function joinKnots(a: Polynomial<Interval>, pieces: Piece[]): RootPlace[] {
  const joined: RootPlace[] = [];
  for (const piece of [...pieces].sort((p, q) => p.from - q.from)) {
    const last = joined[joined.length - 1];
    if (last && piece.from <= last.hi * (1 + 2 * FINEST)) {
      last.hi = Math.max(last.hi, piece.to);
      last.atMost = Math.max(last.atMost, signChanges(piece.b).most);
    } else {
      const { most } = signChanges(piece.b);
      joined.push({ value: 0, lo: piece.from, hi: piece.to, single: false, atMost: most });
    }
  }
  for (const knot of joined) {
    knot.value = knot.lo + (knot.hi - knot.lo) / 2;
    for (let air = Math.max(knot.hi / knot.lo - 1, FINEST); air < 0.01; air *= 8) {
      const lo = knot.lo * (1 - air);
      const hi = knot.hi * (1 + air);
      if (joined.some((other) => other !== knot && other.lo <= hi && other.hi >= lo)) break;
      const width = subtract(divide(point(hi), point(lo)), ONE);
      knot.atMost = Math.min(knot.atMost, signChanges(bernstein(rescale(a, point(lo)), width)).most);
    }
  }
  return joined.filter((knot) => knot.atMost > 0);
}

/**
 * All positive roots.
 * @param polynomial interval coefficients, lowest first
 * @returns places in ascending order. Each positive root of every polynomial inside the intervals lies in exactly one
 *   place, or at 0 or infinity within rounding. Never throws.
 */
export function positiveRoots(polynomial: Polynomial<Interval>): PositiveRoots {
  const trimmed = algebra.trim(polynomial);
  let first = 0;
  while (first < trimmed.length && contains(trimmed[first]!, 0)) first += 1;
  if (first === trimmed.length) {
    return { places: [], atZero: 0, atInfinity: 0, vanishes: true, exactlyZero: trimmed.length === 0 };
  }
  let last = trimmed.length - 1;
  while (contains(trimmed[last]!, 0)) last -= 1;
  const body = trimmed.slice(first, last + 1);
  const base = { atZero: first, atInfinity: trimmed.length - 1 - last, vanishes: false, exactlyZero: false };
  const changes = signChanges(body);
  if (changes.most === 0) return { ...base, places: [] };

  const highest = rootBound(body);
  const lowest = 1 / rootBound([...body].reverse());
  if (changes.most === 1) return { ...base, places: [refine(body, lowest, highest)] };

  const singles: Piece[] = [];
  const knots: Piece[] = [];
  // Coefficients hundreds of orders of magnitude apart put a bound outside the range of numbers, where no search can go.
  const from = Math.max(LOWEST_SHELL, Math.floor(Math.log2(lowest / SHELL_START)));
  const to = Math.min(HIGHEST_SHELL, Math.ceil(Math.log2(highest / SHELL_START)));
  let beyond = !(lowest > 0) || !Number.isFinite(highest);
  for (let j = from; j <= to; j++) {
    const start = SHELL_START * 2 ** j;
    const onShell = rescale(body, point(start));
    if (!onShell.every(({ lo, hi }) => Number.isFinite(lo) && Number.isFinite(hi))) beyond = true;
    else if (!oneTermRules(onShell)) searchShell(bernstein(onShell, ONE), start, singles, knots);
  }
  const places = [...singles.map((piece) => refine(body, piece.from, piece.to)), ...joinKnots(body, knots)];
  return {
    ...base,
    atInfinity: base.atInfinity + (beyond ? 2 : 0),
    places: places.sort((p, q) => p.value - q.value)
  };
}

/** Encloses the value of a polynomial over [lo, hi]. */
export function rangeOf(a: Polynomial<Interval>, lo: number, hi: number): Interval {
  return algebra.at(a, interval(lo, hi));
}
