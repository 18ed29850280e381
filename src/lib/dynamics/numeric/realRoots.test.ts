import { describe, expect, it } from 'vitest';
import { INTERVAL, enclose, point, type Interval } from './interval';
import { polynomials, type Polynomial } from './polynomial';
import { positiveRoots } from './realRoots';

const algebra = polynomials(INTERVAL);
const fromRoots = (...roots: number[]): Polynomial<Interval> =>
  roots.reduce<Polynomial<Interval>>((product, root) => algebra.mul(product, [point(-root), point(1)]), [point(1)]);

describe('positiveRoots', () => {
  it('separates simple roots over twenty decades', () => {
    const roots = [1e-10, 3e-4, 1, 2, 2.0001, 64, 1e10];
    const found = positiveRoots(fromRoots(-5, -0.1, ...roots));
    expect(found.places.map((place) => place.single)).toEqual(roots.map(() => true));
    found.places.forEach((place, i) => {
      expect(Math.abs(place.value / roots[i]! - 1)).toBeLessThan(1e-9);
      expect(place.lo).toBeLessThanOrEqual(roots[i]!);
      expect(place.hi).toBeGreaterThanOrEqual(roots[i]!);
    });
  });

  it('finds none where there is none, near a tangency too', () => {
    expect(positiveRoots([enclose(1), enclose(-1.999999), enclose(1)]).places).toEqual([]);
    expect(positiveRoots([point(1), point(1), point(3)]).places).toEqual([]);
  });

  it('hands on a double root as one knot', () => {
    const found = positiveRoots(fromRoots(3, 3, 7));
    expect(found.places.map((place) => [place.single, place.atMost])).toEqual([
      [false, 2],
      [true, 1]
    ]);
    expect(found.places[0]!.value).toBeCloseTo(3, 7);
  });

  it('hands on a triple root as one knot without exploding', () => {
    const found = positiveRoots(fromRoots(3, 3, 3));
    expect(found.places).toHaveLength(1);
    expect(found.places[0]!.single).toBe(false);
    expect(found.places[0]!.atMost).toBe(3);
  });

  it('tells roots at zero, at infinity, and the zero polynomial', () => {
    expect(positiveRoots([point(0), point(-2), point(1)])).toMatchObject({ atZero: 1, atInfinity: 0 });
    const faint: Interval = { lo: -1e-17, hi: 1e-17 };
    expect(positiveRoots([point(-1), point(1), faint])).toMatchObject({ atZero: 0, atInfinity: 1 });
    expect(positiveRoots([faint, faint])).toMatchObject({ vanishes: true, exactlyZero: false });
  });

  it('ends, and says so, where coefficients are too far apart for any bound to be a number', () => {
    for (const a of [
      [1e300, -1e-300, 1e-308],
      [1e-308, -1e300, 1e-300, 1],
      [5e-324, -1, 1.7e308, -1e-200]
    ]) {
      const found = positiveRoots(a.map(point));
      expect(found.atInfinity).toBeGreaterThanOrEqual(2);
    }
  });
});
