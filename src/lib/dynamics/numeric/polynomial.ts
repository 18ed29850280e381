import type { Ring } from './ring';

/** Coefficients, lowest degree first. The empty array is the zero polynomial. */
export type Polynomial<T> = readonly T[];

/** Algebra of polynomials over a ring; nothing is divided. */
export interface PolynomialRing<T> {
  constant(value: T): Polynomial<T>;
  add(...terms: Polynomial<T>[]): Polynomial<T>;
  sub(a: Polynomial<T>, b: Polynomial<T>): Polynomial<T>;
  mul(...factors: Polynomial<T>[]): Polynomial<T>;
  /** x^power times a. */
  shift(a: Polynomial<T>, power: number): Polynomial<T>;
  /** Without exact zeros at the top. */
  trim(a: Polynomial<T>): Polynomial<T>;
  at(a: Polynomial<T>, x: T): T;
}

/** Polynomials over `ring`. Exact zeros stay exact, so that degrees fall where terms are absent. */
export function polynomials<T>(ring: Ring<T>): PolynomialRing<T> {
  const trim = (a: Polynomial<T>) => {
    let n = a.length;
    while (n > 0 && ring.isZero(a[n - 1]!)) n -= 1;
    return n === a.length ? a : a.slice(0, n);
  };
  const add2 = (a: Polynomial<T>, b: Polynomial<T>, combine: (p: T, q: T) => T) => {
    const out: T[] = [];
    for (let i = 0; i < Math.max(a.length, b.length); i++) {
      const left = a[i];
      const right = b[i];
      if (right === undefined || (left !== undefined && ring.isZero(right))) out.push(left ?? ring.zero);
      else out.push(combine(left ?? ring.zero, right));
    }
    return trim(out);
  };
  const mul2 = (a: Polynomial<T>, b: Polynomial<T>) => {
    if (a.length === 0 || b.length === 0) return [];
    const out: T[] = new Array<T>(a.length + b.length - 1).fill(ring.zero);
    for (let i = 0; i < a.length; i++) {
      if (ring.isZero(a[i]!)) continue;
      for (let j = 0; j < b.length; j++) {
        if (ring.isZero(b[j]!)) continue;
        const product = ring.mul(a[i]!, b[j]!);
        out[i + j] = ring.isZero(out[i + j]!) ? product : ring.add(out[i + j]!, product);
      }
    }
    return trim(out);
  };
  return {
    trim,
    constant: (value) => (ring.isZero(value) ? [] : [value]),
    add: (...terms) => terms.reduce((sum, term) => add2(sum, term, ring.add), []),
    sub: (a, b) => add2(a, b, ring.sub),
    mul: (...factors) => factors.reduce((product, factor) => mul2(product, factor)),
    shift: (a, power) => (a.length === 0 ? a : [...new Array<T>(power).fill(ring.zero), ...a]),
    at: (a, x) => {
      let value = ring.zero;
      for (let i = a.length - 1; i >= 0; i--) value = ring.add(ring.mul(value, x), a[i]!);
      return value;
    }
  };
}
