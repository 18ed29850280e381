import type { Ring } from './ring';

/**
 * Taylor coefficients of a function of two variables up to total order 3:
 * [1, u, v, u^2, uv, v^2, u^3, u^2 v, u v^2, v^3].
 */
export type Jet = readonly number[];

const ORDERS: readonly [number, number][] = [
  [0, 0],
  [1, 0],
  [0, 1],
  [2, 0],
  [1, 1],
  [0, 2],
  [3, 0],
  [2, 1],
  [1, 2],
  [0, 3]
];
const SIZE = ORDERS.length;

/** For every pair of terms whose product is of order 3 at most: [left, right, where it goes]. */
const PRODUCTS: readonly [number, number, number][] = ORDERS.flatMap(([i, j], left) =>
  ORDERS.flatMap(([k, l], right): [number, number, number][] => {
    const target = ORDERS.findIndex(([m, n]) => m === i + k && n === j + l);
    return target < 0 ? [] : [[left, right, target]];
  })
);

function constant(value: number): Jet {
  const jet = new Array<number>(SIZE).fill(0);
  jet[0] = value;
  return jet;
}

function multiply(a: Jet, b: Jet): Jet {
  const out = new Array<number>(SIZE).fill(0);
  for (const [left, right, target] of PRODUCTS) out[target] = out[target]! + a[left]! * b[right]!;
  return out;
}

/** 1/b by the geometric series in the part without constant term; three steps are exact at order 3. */
function reciprocal(b: Jet): Jet {
  const head = b[0]!;
  const rest = b.map((c, i) => (i === 0 ? 0 : -c / head));
  let sum = constant(1);
  for (let i = 0; i < 3; i++) {
    const product = multiply(sum, rest);
    sum = product.map((c, j) => (j === 0 ? 1 + c : c));
  }
  return sum.map((c) => c / head);
}

/** Truncated Taylor arithmetic: derivatives up to the third, exact but for rounding. */
export const JETS: Ring<Jet> & { constant(value: number): Jet; variable(value: number, which: 0 | 1): Jet } = {
  constant,
  variable: (value, which) => constant(value).map((c, i) => (i === which + 1 ? 1 : c)),
  zero: constant(0),
  one: constant(1),
  of: constant,
  add: (a, b) => a.map((c, i) => c + b[i]!),
  sub: (a, b) => a.map((c, i) => c - b[i]!),
  mul: multiply,
  div: (a, b) => multiply(a, reciprocal(b)),
  neg: (a) => a.map((c) => -c),
  isZero: (a) => a.every((c) => c === 0)
};
