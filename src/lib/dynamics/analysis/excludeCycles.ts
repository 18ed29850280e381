/** A proof that a model has no closed orbit, where one of the classical criteria gives it. */
import { coefficientsOf, type Coefficients } from '../model/coefficients';
import type { ModelSpec } from '../model/spec';
import { INTERVAL, middle, point, signOf, type Interval } from '../numeric/interval';
import { polynomials, type Polynomial } from '../numeric/polynomial';
import { positiveRoots } from '../numeric/realRoots';

/** Which argument excludes cycles. */
export interface NoCycles {
  by: 'monotone' | 'Dulac';
  /** The argument in one sentence. */
  detail: string;
}

const { add, mul, shift, constant, trim } = polynomials(INTERVAL);
const times = (factor: number, a: Polynomial<Interval>) => mul([point(factor)], a);

function derivative(a: Polynomial<Interval>): Polynomial<Interval> {
  return a.slice(1).map((c, i) => INTERVAL.mul(c, point(i + 1)));
}

/** Beyond it the resource declines whoever feeds on it; infinite where it grows without limit. */
function ceilingOf(own: Polynomial<Interval>): number {
  const top = own[own.length - 1];
  if (top === undefined || signOf(top) !== -1) return Infinity;
  return positiveRoots(own).places.at(-1)?.hi ?? 0;
}

/** Whether a polynomial is certainly not above 0 on (0, end). */
function isNeverPositive(a: Polynomial<Interval>, end: number): boolean {
  if (a.every(({ hi }) => hi <= 0)) return true;
  const { places, atZero, atInfinity, vanishes } = positiveRoots(a);
  if (vanishes || (atInfinity > 0 && end === Infinity)) return false;
  // Coefficients of unknown sign at the bottom would decide what happens next to 0.
  if (a.slice(0, atZero).some(({ hi }) => hi > 0) || signOf(a[atZero]!) !== -1) return false;
  return places.every((place) => place.lo >= end);
}

/** The exponents that a grid of abundances leaves open, for parts + exponent * pull <= 0 all along. */
function exponentRange(parts: Polynomial<Interval>, pull: Polynomial<Interval>, end: number): [number, number] {
  const value = (a: Polynomial<Interval>, x: number) => a.reduceRight((sum, c) => sum * x + middle(c), 0);
  const sizes = positiveRoots(pull).places.map((place) => place.value);
  const scale = Number.isFinite(end) ? end : 1e3 * Math.max(1e-3, ...sizes);
  let [low, high] = [-Infinity, Infinity];
  for (let i = 1; i <= 160; i++) {
    const x = i <= 80 ? (scale * i) / 80 : scale * 10 ** ((80 - i) / 10);
    const [own, lever] = [value(parts, x), value(pull, x)];
    if (lever < 0) low = Math.max(low, own / -lever);
    else if (lever > 0) high = Math.min(high, -own / lever);
  }
  return [low, high];
}

/**
 * Dulac's criterion with y^(b-1) D/phi, D = 1 + h phi + w y, as is usual for consumers that feed by a response: the
 * divergence of the weighted field is y^(b-1)/(a x^(k+1)) times
 *
 *   x A' - k A + a h x^(k+1) A' + b (a (e + h q0) x^(k+1) + q0 x)        A = x P(x) + s1, phi = a x^k
 *
 * and terms that are negative one by one under the conditions asked for below.
 * @source strogatz2015 §7.2, hsuHubbellWaltman1978
 */
function byDulac(k: Coefficients<Interval>): NoCycles | null {
  const free = INTERVAL.isZero;
  const own = trim([k.s1, ...k.p]);
  const end = ceilingOf(own);
  const slope = derivative(own);
  // x A' - k A, coefficient by coefficient, so that what cancels is an exact zero.
  const bare = trim(own.map((c, i) => INTERVAL.mul(c, point(i - k.power))));
  const saturation = mul(constant(k.a), constant(k.h));
  const parts = add(bare, shift(mul(saturation, slope), k.power + 1));
  const gain = INTERVAL.mul(k.a, INTERVAL.add(k.e, INTERVAL.mul(k.h, k.q[0])));
  const pull = add(shift(constant(k.q[0]), 1), shift(constant(gain), k.power + 1));
  const crowds = !free(k.q[1]) || !free(k.leslie);
  if (k.q[1].hi > 0) return null;
  // Interference couples what is left of the resource's own curve, and growth of the consumer by itself, to y.
  if (!free(k.w) && !(isNeverPositive(bare, end) && k.q[0].hi <= 0)) return null;
  let [low, high] = exponentRange(parts, pull, end);
  if (crowds || !free(k.w)) low = Math.max(low, -1);
  if (k.s2.hi > 0) high = Math.min(high, 1);
  if (k.s2.lo < 0) low = Math.max(low, 1);
  if (!(low <= high)) return null;
  const isProof = (exponent: number): boolean => {
    const whole = add(parts, times(exponent, pull));
    // Where everything vanishes nothing is excluded: that is how the classical model has only closed orbits.
    const strict = whole.some((c) => signOf(c) === -1) || (crowds && exponent > -1);
    return strict && isNeverPositive(whole, end);
  };
  // The mildest weights first; room on both sides keeps rounding out of the proof.
  const inside = [low + Math.min(1, (high - low) / 2), high - Math.min(1, (high - low) / 2)];
  const exponent = [0, ...inside].find((value) => value >= low && value <= high && isProof(value));
  if (exponent === undefined) return null;
  return {
    by: 'Dulac',
    detail: `By Dulac’s criterion (weight y^${Number((exponent - 1).toFixed(3))} over the share eaten) no path closes on itself.`
  };
}

/**
 * Whether a model certainly has no closed orbit in the quadrant, nor a loop of paths from rest point to rest point.
 * @param spec a sound model
 * @returns the argument, or null where the criteria tried say nothing. Proven in interval arithmetic. Never throws. Some tens
 *   of microseconds.
 * @source hofbauerSigmund1998 §3.4 (competition), strogatz2015 §7.2 (Dulac)
 */
export function excludeCycles(spec: ModelSpec): NoCycles | null {
  if (spec.interaction === 'competition') {
    const detail = 'Both lose by each other’s increase: every path ends up moving one way and cannot close on itself.';
    return { by: 'monotone', detail };
  }
  return byDulac(coefficientsOf(INTERVAL, spec));
}
