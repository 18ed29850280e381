import type { Ring } from './ring';

/** A value with its two first derivatives. */
export interface Dual<T> {
  v: T;
  dx: T;
  dy: T;
}

/** Forward differentiation over any ring: slopes of the algebra without writing them a second time. */
export function dualRing<T>(ring: Ring<T>): Ring<Dual<T>> & { lift(value: T): Dual<T> } {
  const lift = (v: T): Dual<T> => ({ v, dx: ring.zero, dy: ring.zero });
  return {
    lift,
    zero: lift(ring.zero),
    one: lift(ring.one),
    of: (value) => lift(ring.of(value)),
    add: (a, b) => ({ v: ring.add(a.v, b.v), dx: ring.add(a.dx, b.dx), dy: ring.add(a.dy, b.dy) }),
    sub: (a, b) => ({ v: ring.sub(a.v, b.v), dx: ring.sub(a.dx, b.dx), dy: ring.sub(a.dy, b.dy) }),
    mul: (a, b) => ({
      v: ring.mul(a.v, b.v),
      dx: ring.add(ring.mul(a.v, b.dx), ring.mul(a.dx, b.v)),
      dy: ring.add(ring.mul(a.v, b.dy), ring.mul(a.dy, b.v))
    }),
    div: (a, b) => {
      const v = ring.div(a.v, b.v);
      return {
        v,
        dx: ring.div(ring.sub(a.dx, ring.mul(v, b.dx)), b.v),
        dy: ring.div(ring.sub(a.dy, ring.mul(v, b.dy)), b.v)
      };
    },
    neg: (a) => ({ v: ring.neg(a.v), dx: ring.neg(a.dx), dy: ring.neg(a.dy) }),
    isZero: (a) => ring.isZero(a.v) && ring.isZero(a.dx) && ring.isZero(a.dy)
  };
}
