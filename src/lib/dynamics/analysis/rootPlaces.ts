import { INTERVAL, point, type Interval } from '../numeric/interval';
import type { Polynomial } from '../numeric/polynomial';
import { positiveRoots, type PositiveRoots, type RootPlace } from '../numeric/realRoots';

function reflect(a: Polynomial<Interval>): Polynomial<Interval> {
  return a.map((c, i) => (i % 2 === 0 ? c : { lo: -c.hi, hi: -c.lo }));
}

function derivative(a: Polynomial<Interval>): Polynomial<Interval> {
  return a.slice(1).map((c, i) => INTERVAL.mul(c, point(i + 1)));
}

/** Pins a knot down to where the derivative of one order less than its own vanishes: a well-posed question. */
function pinKnot(a: Polynomial<Interval>, knot: RootPlace): PinnedPlace {
  let d = a;
  for (let i = 1; i < knot.atMost; i++) d = derivative(d);
  const near = positiveRoots(d).places.filter(
    (place) => place.single && place.value >= knot.lo * (1 - 1e-6) && place.value <= knot.hi * (1 + 1e-6)
  );
  const pinned = near[0];
  return near.length === 1 && pinned
    ? { ...knot, value: pinned.value, lo: pinned.lo, hi: pinned.hi, from: knot.lo, to: knot.hi }
    : { ...knot, from: knot.lo, to: knot.hi };
}

/** A place with the whole range of its knot, where it has one. */
export interface PinnedPlace extends RootPlace {
  from: number;
  to: number;
}

function pin(a: Polynomial<Interval>, place: RootPlace): PinnedPlace {
  return place.single ? { ...place, from: place.lo, to: place.hi } : pinKnot(a, place);
}

/** Mirrors a place found on the reflected polynomial. */
function mirror(place: PinnedPlace): PinnedPlace {
  return { ...place, value: -place.value, lo: -place.hi, hi: -place.lo, from: -place.to, to: -place.from };
}

export type SignedRoots = Omit<PositiveRoots, 'places'> & { places: PinnedPlace[] };

/**
 * Places of the real roots of a polynomial, ascending; 0 is counted apart.
 * @param includeNegative also roots below 0
 * @returns as positiveRoots does, with knots pinned to their best place. Never throws.
 */
export function rootsOf(polynomial: Polynomial<Interval>, includeNegative: boolean): SignedRoots {
  const positive = positiveRoots(polynomial);
  const places = positive.places.map((place) => pin(polynomial, place));
  if (includeNegative && !positive.vanishes) {
    const mirrored = reflect(polynomial);
    const negative = positiveRoots(mirrored).places.map((place) => pin(mirrored, place));
    places.unshift(...negative.map((place) => mirror(place)).reverse());
  }
  return { ...positive, places };
}
