import type { Coefficients } from '../model/coefficients';
import { dualRing, type Dual } from '../numeric/dual';
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
  size,
  subtract,
  ZERO,
  type Interval
} from '../numeric/interval';
import { REAL } from '../numeric/ring';
import { mapCoefficients, perHeadRates, rates, reducedEquations } from './elimination';

const realDuals = dualRing(REAL);
const intervalDuals = dualRing(INTERVAL);

/** A box that provably holds exactly one solution of the reduced equations, for every model within rounding. */
export interface CertifiedBox {
  x: Interval;
  y: Interval;
}

/** The algebra of one model, lifted once into the rings that the search needs. */
export interface Lifted {
  interval: Coefficients<Interval>;
  realDual: Coefficients<Dual<number>>;
  intervalDual: Coefficients<Dual<Interval>>;
}

export function lift(k: Coefficients<Interval>): Lifted {
  // A zero must stay an exact zero in floating point too, or the reduced equations would be others.
  return {
    interval: k,
    realDual: mapCoefficients(k, (value) => realDuals.lift(middle(value))),
    intervalDual: mapCoefficients(k, intervalDuals.lift)
  };
}

const steepness = (along: number, across: number) => Math.abs(along / across) || Infinity;

/** Natural sizes of x and y at a point: a coordinate at 0 takes its own from the other one, along the isoclines. */
function scales(x: number, y: number, a: number, b: number, c: number, d: number): [number, number] {
  const fromY = Math.min(steepness(b, a), steepness(d, c)) * Math.abs(y);
  const fromX = Math.min(steepness(a, b), steepness(c, d)) * Math.abs(x);
  const orNothing = (value: number) => (Number.isFinite(value) ? value : 0);
  return [Math.max(Math.abs(x), orNothing(fromY)), Math.max(Math.abs(y), orNothing(fromX))];
}

/**
 * Newton's method on the reduced equations.
 * @returns the point it settles on, or null when it leaves the finite plane or does not settle
 */
export function polish(lifted: Lifted, x0: number, y0: number): { x: number; y: number } | null {
  let x = x0;
  let y = y0;
  let last = Infinity;
  for (let i = 0; i < 30; i++) {
    const [g1, g2] = reducedEquations(realDuals, lifted.realDual, { v: x, dx: 1, dy: 0 }, { v: y, dx: 0, dy: 1 });
    const determinant = g1.dx * g2.dy - g1.dy * g2.dx;
    const stepX = (g2.dy * g1.v - g1.dy * g2.v) / determinant;
    const stepY = (g1.dx * g2.v - g2.dx * g1.v) / determinant;
    if (!Number.isFinite(stepX) || !Number.isFinite(stepY)) return i > 0 && last < 1e-7 ? { x, y } : null;
    const [scaleX, scaleY] = scales(x, y, g1.dx, g1.dy, g2.dx, g2.dy);
    const step = Math.max(Math.abs(stepX) / scaleX, Math.abs(stepY) / scaleY);
    x -= stepX;
    y -= stepY;
    // Once steps are at rounding level they stop shrinking: the last digit is noise.
    if (step < 1e-15 || (step < 1e-10 && step >= last)) return { x, y };
    last = step;
  }
  return last < 1e-6 ? { x, y } : null;
}

/**
 * Krawczyk's test around a point: proves that one solution, and only one, lies within the box returned.
 * @source neumaier1990 §5.1
 */
export function certifyBox(lifted: Lifted, x: number, y: number): CertifiedBox | null {
  const k = lifted.intervalDual;
  const at = (ix: Interval, iy: Interval) =>
    reducedEquations(intervalDuals, k, { v: ix, dx: ONE, dy: ZERO }, { v: iy, dx: ZERO, dy: ONE });
  const px = point(x);
  const py = point(y);
  const [g1, g2] = at(px, py);
  const [a, b, c, d] = [middle(g1.dx), middle(g1.dy), middle(g2.dx), middle(g2.dy)];
  const determinant = a * d - b * c;
  const inverse = [d / determinant, -b / determinant, -c / determinant, a / determinant].map(point);
  if (inverse.some((entry) => !Number.isFinite(entry.lo))) return null;
  const [c11, c12, c21, c22] = inverse as [Interval, Interval, Interval, Interval];
  const newtonX = add(multiply(c11, g1.v), multiply(c12, g2.v));
  const newtonY = add(multiply(c21, g1.v), multiply(c22, g2.v));
  const [scaleX, scaleY] = scales(x, y, a, b, c, d);
  let rx = 2 * size(newtonX) + 4e-16 * scaleX;
  let ry = 2 * size(newtonY) + 4e-16 * scaleY;
  if (!Number.isFinite(rx) || !Number.isFinite(ry)) return null;
  for (let attempt = 0; attempt < 5; attempt++, rx *= 8, ry *= 8) {
    const dx = interval(-rx, rx);
    const dy = interval(-ry, ry);
    const [j1, j2] = at(add(px, dx), add(py, dy));
    const e11 = subtract(ONE, add(multiply(c11, j1.dx), multiply(c12, j2.dx)));
    const e12 = add(multiply(c11, j1.dy), multiply(c12, j2.dy));
    const e21 = add(multiply(c21, j1.dx), multiply(c22, j2.dx));
    const e22 = subtract(ONE, add(multiply(c21, j1.dy), multiply(c22, j2.dy)));
    const kx = subtract(subtract(multiply(e11, dx), multiply(e12, dy)), newtonX);
    const ky = subtract(subtract(multiply(e22, dy), multiply(e21, dx)), newtonY);
    if (kx.lo > -rx && kx.hi < rx && ky.lo > -ry && ky.hi < ry) return { x: add(px, kx), y: add(py, ky) };
  }
  return null;
}

/** What is known for certain about the linear part at an equilibrium. */
export interface LinearEnclosure {
  /** The Jacobian of the rates, row by row. */
  entries: [Interval, Interval, Interval, Interval];
  /** Its determinant where that can be had more closely than from the entries, else null. */
  determinant: Interval | null;
}

const meet = (a: Interval, b: Interval): Interval => {
  const [lo, hi] = [Math.max(a.lo, b.lo), Math.min(a.hi, b.hi)];
  return lo <= hi ? { lo, hi } : a;
};

/**
 * Encloses the Jacobian at an equilibrium that lies in a box; leslie growth needs x away from 0 or y = 0.
 *
 * Where a species is present, growth per head is exactly -s/n, so that its row is n times the slopes of growth per head
 * (and -s/n on the diagonal): terms that cancel at rest, and would hide a weak trace in their rounding, do not appear.
 */
export function jacobianOver(lifted: Lifted, x: Interval, y: Interval): LinearEnclosure {
  const { intervalDual, interval: plain } = lifted;
  // On y = 0 the ceiling term and its slopes are nothing at any x.
  const onAxis = y.lo === 0 && y.hi === 0;
  const k = onAxis ? { ...intervalDual, leslie: intervalDuals.zero } : intervalDual;
  const at: [Dual<Interval>, Dual<Interval>] = [
    { v: x, dx: ONE, dy: ZERO },
    { v: y, dx: ZERO, dy: ONE }
  ];
  const [f1, f2] = rates(intervalDuals, k, ...at);
  const entries: LinearEnclosure['entries'] = [f1.dx, f1.dy, f2.dx, f2.dy];
  const hasFirst = distanceToZero(x) > 0;
  const hasSecond = distanceToZero(y) > 0;
  if (!hasFirst && !hasSecond) return { entries, determinant: null };
  const [g1, g2] = perHeadRates(intervalDuals, k, ...at);
  if (hasFirst) {
    entries[0] = meet(entries[0], subtract(multiply(x, g1.dx), divide(plain.s1, x)));
    entries[1] = meet(entries[1], multiply(x, g1.dy));
  }
  if (hasSecond) {
    entries[2] = meet(entries[2], multiply(y, g2.dx));
    entries[3] = meet(entries[3], subtract(multiply(y, g2.dy), divide(plain.s2, y)));
  }
  const bare = INTERVAL.isZero(plain.s1) && INTERVAL.isZero(plain.s2);
  const determinant =
    bare && hasFirst && hasSecond
      ? multiply(multiply(x, y), subtract(multiply(g1.dx, g2.dy), multiply(g1.dy, g2.dx)))
      : null;
  return { entries, determinant };
}

/**
 * The shortest decimal number in an interval, so that an exact answer is printed as one.
 * @returns a number with 12 or 15 digits inside the interval, or `value` itself
 */
export function tidy(value: number, within: Interval): number {
  for (const digits of [12, 15]) {
    const rounded = Number(value.toPrecision(digits));
    if (contains(within, rounded)) return rounded;
  }
  return value;
}
