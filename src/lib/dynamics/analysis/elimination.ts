import type { Coefficients } from '../model/coefficients';
import { polynomials, type Polynomial } from '../numeric/polynomial';
import type { Ring } from '../numeric/ring';

/**
 * One species eliminated. With t the abundance of `along` and u that of the other, equilibria off the invariant axes are
 * the roots t of `resultant` with u = top(t)/bottom(t).
 */
export interface Elimination<T> {
  along: 'first' | 'second';
  resultant: Polynomial<T>;
  top: Polynomial<T>;
  bottom: Polynomial<T>;
}

/** Species that do not touch each other: every root of one with every root of the other. */
export interface Uncoupled<T> {
  along: 'both';
  first: Polynomial<T>;
  second: Polynomial<T>;
}

/** n P(n) + s, or P(n) alone where s is 0 and n = 0 is listed apart. */
function ownEquation<T>(ring: Ring<T>, perHead: readonly T[], constant: T): Polynomial<T> {
  const algebra = polynomials(ring);
  const p = algebra.trim(perHead);
  return ring.isZero(constant) ? p : algebra.add(algebra.shift(p, 1), [constant]);
}

/** The first species alone (y = 0), without the root 0 that is there when nothing is added or taken by the unit. */
export function firstAlone<T>(ring: Ring<T>, k: Coefficients<T>): Polynomial<T> {
  return ownEquation(ring, k.p, k.s1);
}

/** The second species alone (x = 0); meaningless under leslie growth. */
export function secondAlone<T>(ring: Ring<T>, k: Coefficients<T>): Polynomial<T> {
  return ownEquation(ring, k.q, k.s2);
}

/** A rival's equation in its own abundance once that of the other, which it does not act on, is known. */
export function alongside<T>(ring: Ring<T>, k: Coefficients<T>, of: 'first' | 'second', other: T): Polynomial<T> {
  const [perHead, constant, loss] = of === 'first' ? [k.p, k.s1, k.c12] : [k.q, k.s2, k.c21];
  return ownEquation(ring, [ring.sub(perHead[0], ring.mul(loss, other)), perHead[1], perHead[2]], constant);
}

interface Side<T> {
  perHead: readonly T[];
  constant: T;
  loss: T;
}

/** The rival's abundance from the equation of `along`, put into the rival's own. */
function eliminateRival<T>(ring: Ring<T>, along: Side<T>, rival: Side<T>): Omit<Elimination<T>, 'along'> {
  const algebra = polynomials(ring);
  const top = ownEquation(ring, along.perHead, along.constant);
  const bottom = algebra.shift([along.loss], ring.isZero(along.constant) ? 0 : 1);
  // The rival's equation as a polynomial in u whose coefficients are polynomials in t; its loss is - loss t u^m.
  const inU = ownEquation(ring, rival.perHead, rival.constant).map((c) => algebra.constant(c));
  const lossPower = ring.isZero(rival.constant) ? 0 : 1;
  while (inU.length <= lossPower) inU.push([]);
  inU[lossPower] = algebra.sub(inU[lossPower]!, algebra.shift(algebra.constant(rival.loss), 1));
  let resultant: Polynomial<T> = [];
  for (let i = inU.length - 1, bottomPower: Polynomial<T> = [ring.one]; i >= 0; i--) {
    // Horner in u = top/bottom: each step down multiplies what is there by top and the newcomer by one more bottom.
    resultant = algebra.add(algebra.mul(resultant, top), algebra.mul(inU[i]!, bottomPower));
    bottomPower = algebra.mul(bottomPower, bottom);
  }
  return { resultant, top, bottom };
}

/**
 * The consumer from the resource's equation: y = U/V with U = A H, H = 1 + h phi, V = phi - w A and A = x P + s1. There
 * phi y/D = A and phi/D = V/H, so that the consumer's equation has no denominator left. V = 0 holds at no equilibrium.
 */
function eliminateConsumer<T>(ring: Ring<T>, k: Coefficients<T>): Omit<Elimination<T>, 'along'> | null {
  const algebra = polynomials(ring);
  const { add, mul, sub, shift, constant } = algebra;
  const free = ring.isZero(k.s1);
  // Where nothing is added or taken by the unit the common factor x of A and phi is left out.
  const gain = ownEquation(ring, k.p, k.s1);
  const phi = shift(constant(k.a), k.power);
  const eaten = free ? shift(constant(k.a), k.power - 1) : phi;
  const crowd = add([ring.one], mul(constant(k.h), phi));
  const top = mul(gain, crowd);
  const bottom = sub(eaten, mul(constant(k.w), gain));
  if (bottom.length === 0) return null;
  const [q0, q1] = [constant(k.q[0]), constant(k.q[1])];
  const conversion = constant(k.e);
  const plain = ring.isZero(k.q[1]) && ring.isZero(k.leslie);
  // Everything that does not carry y, as a multiple of `bottom`: what is eaten, converted, and what is added.
  const supply = ring.isZero(k.s2)
    ? shift(mul(conversion, bottom), free ? 1 : 0)
    : add(constant(k.s2), shift(mul(conversion, gain), free ? 1 : 0));
  const linear = ring.isZero(k.s2) ? crowd : top;
  if (plain && ring.isZero(k.q[0])) {
    // A consumer that neither dies nor grows by itself: what it eats must make up for what is taken, or it never rests.
    return ring.isZero(k.s2) ? null : { resultant: supply, top, bottom };
  }
  if (plain) {
    const rest = ring.isZero(k.s2) ? supply : mul(supply, bottom);
    return { resultant: add(mul(q0, linear), rest), top, bottom };
  }
  const square = ring.isZero(k.s2) ? mul(top, crowd) : mul(top, top);
  const rest = ring.isZero(k.s2) ? mul(supply, bottom) : mul(supply, bottom, bottom);
  const main = add(mul(q0, linear, bottom), rest);
  const resultant = ring.isZero(k.leslie)
    ? add(main, mul(q1, square))
    : add(shift(main, 1), mul(sub(shift(q1, 1), constant(k.leslie)), square));
  return { resultant, top, bottom };
}

/**
 * Eliminates one species from the equations with their invariant axes divided out.
 * @param ring arithmetic; zeros must be exact for degrees to fall
 * @param k coefficients of the model in that ring
 * @param prefer which species to keep where both can be: roots crowded along one may lie apart along the other
 * @returns the elimination, the two own equations when the species do not touch, or null when the equations contradict
 *   each other identically. Never throws.
 */
export function eliminate<T>(
  ring: Ring<T>,
  k: Coefficients<T>,
  prefer: 'first' | 'second' = 'first'
): Elimination<T> | Uncoupled<T> | null {
  if (k.interaction === 'consumer-resource') {
    const elimination = eliminateConsumer(ring, k);
    return elimination && { along: 'first', ...elimination };
  }
  const first: Side<T> = { perHead: k.p, constant: k.s1, loss: k.c12 };
  const second: Side<T> = { perHead: k.q, constant: k.s2, loss: k.c21 };
  const canFirst = !ring.isZero(k.c12);
  const canSecond = !ring.isZero(k.c21);
  if (canSecond && (prefer === 'second' || !canFirst))
    return { along: 'second', ...eliminateRival(ring, second, first) };
  if (canFirst) return { along: 'first', ...eliminateRival(ring, first, second) };
  return { along: 'both', first: firstAlone(ring, k), second: secondAlone(ring, k) };
}

/**
 * The two equations off the invariant axes, cleared of denominators, at a point: polynomials whose common zeros with x > 0
 * are the equilibria there.
 */
export function reducedEquations<T>(ring: Ring<T>, k: Coefficients<T>, x: T, y: T): [T, T] {
  const { add, sub, mul } = ring;
  const own = (c: readonly [T, T, T], n: T) => add(c[0], mul(add(c[1], mul(c[2], n)), n));
  const p = own(k.p, x);
  const q = own(k.q, y);
  const first = ring.isZero(k.s1);
  const second = ring.isZero(k.s2);
  if (k.interaction === 'competition') {
    const g1 = sub(p, mul(k.c12, y));
    const g2 = sub(q, mul(k.c21, x));
    return [first ? g1 : add(mul(x, g1), k.s1), second ? g2 : add(mul(y, g2), k.s2)];
  }
  const psi = k.power === 2 ? mul(k.a, x) : k.a;
  const phi = mul(psi, x);
  const d = add(add(ring.one, mul(k.h, phi)), mul(k.w, y));
  const g1 = first ? sub(mul(p, d), mul(psi, y)) : sub(mul(add(mul(x, p), k.s1), d), mul(phi, y));
  const growth = ring.isZero(k.leslie) ? q : sub(mul(q, x), mul(k.leslie, y));
  const carried = (value: T) => (ring.isZero(k.leslie) ? value : mul(value, x));
  const gain = carried(mul(k.e, phi));
  const g2 = second ? add(mul(growth, d), gain) : add(mul(add(mul(growth, y), carried(k.s2)), d), mul(gain, y));
  return [g1, g2];
}

/**
 * Growth per head of both species without what is added and taken by the unit, in any ring. Slopes of these carry no
 * rounding of terms that cancel at rest. Needs x away from 0 under leslie growth.
 */
export function perHeadRates<T>(ring: Ring<T>, k: Coefficients<T>, x: T, y: T): [T, T] {
  const { add, sub, mul } = ring;
  const own = (c: readonly [T, T, T], n: T) => add(c[0], mul(add(c[1], mul(c[2], n)), n));
  const p = own(k.p, x);
  const q = own(k.q, y);
  if (k.interaction === 'competition') return [sub(p, mul(k.c12, y)), sub(q, mul(k.c21, x))];
  const psi = k.power === 2 ? mul(k.a, x) : k.a;
  const phi = mul(psi, x);
  const plain = ring.isZero(k.h) && ring.isZero(k.w);
  const d = add(add(ring.one, mul(k.h, phi)), mul(k.w, y));
  const perD = (value: T) => (plain ? value : ring.div(value, d));
  const grown = ring.isZero(k.leslie) ? q : sub(q, ring.div(mul(k.leslie, y), x));
  return [sub(p, perD(mul(psi, y))), add(grown, mul(k.e, perD(phi)))];
}

/** dx/dt and dy/dt in any ring: the source of slopes of every order. At x = 0 leslie growth has no value. */
export function rates<T>(ring: Ring<T>, k: Coefficients<T>, x: T, y: T): [T, T] {
  const { add, sub, mul } = ring;
  const own = (c: readonly [T, T, T], n: T) => add(c[0], mul(add(c[1], mul(c[2], n)), n));
  const p = own(k.p, x);
  const q = own(k.q, y);
  if (k.interaction === 'competition') {
    return [add(mul(x, sub(p, mul(k.c12, y))), k.s1), add(mul(y, sub(q, mul(k.c21, x))), k.s2)];
  }
  const phi = k.power === 2 ? mul(mul(k.a, x), x) : mul(k.a, x);
  const plain = ring.isZero(k.h) && ring.isZero(k.w);
  const d = add(add(ring.one, mul(k.h, phi)), mul(k.w, y));
  const eaten = plain ? mul(phi, y) : ring.div(mul(phi, y), d);
  const growth = mul(y, q);
  const own2 = ring.isZero(k.leslie) ? growth : sub(growth, ring.div(mul(k.leslie, mul(y, y)), x));
  return [add(sub(mul(x, p), eaten), k.s1), add(add(own2, mul(k.e, eaten)), k.s2)];
}

/** The same coefficients carried into another ring, e.g. as constants among duals. */
export function mapCoefficients<S, T>(k: Coefficients<S>, map: (value: S) => T): Coefficients<T> {
  const three = (c: readonly [S, S, S]): [T, T, T] => [map(c[0]), map(c[1]), map(c[2])];
  return {
    interaction: k.interaction,
    power: k.power,
    p: three(k.p),
    q: three(k.q),
    s1: map(k.s1),
    s2: map(k.s2),
    c12: map(k.c12),
    c21: map(k.c21),
    a: map(k.a),
    h: map(k.h),
    w: map(k.w),
    e: map(k.e),
    leslie: map(k.leslie)
  };
}
