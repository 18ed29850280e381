/** Dense output: the state anywhere inside a step, from the stages already at hand. */
import { D1, D3, D4, D5, D6, D7 } from './tableau';

export interface Quartic {
  /** Coefficients for a step of size h from y0 to y1; k1…k7 are its stages. */
  set(
    y0: Float64Array,
    y1: Float64Array,
    h: number,
    k1: Float64Array,
    k3: Float64Array,
    k4: Float64Array,
    k5: Float64Array,
    k6: Float64Array,
    k7: Float64Array
  ): void;
  /** State at theta in [0, 1] into `out`, length n. */
  at(theta: number, out: Float64Array): void;
  /** The same function on a copy of the coefficients. */
  keep(): (theta: number, out: Float64Array) => void;
}

function evaluate(c: Float64Array, n: number, theta: number, out: Float64Array): void {
  const rest = 1 - theta;
  for (let i = 0; i < n; i++) {
    const j = 5 * i;
    out[i] = c[j]! + theta * (c[j + 1]! + rest * (c[j + 2]! + theta * (c[j + 3]! + rest * c[j + 4]!)));
  }
}

/**
 * The quartic of order 4 that joins the steps with a continuous slope.
 * @param n number of components. @returns a reusable interpolant; `set` and `at` allocate nothing.
 * @source hairer1993 §II.6, shampine1986
 */
export function makeQuartic(n: number): Quartic {
  const c = new Float64Array(5 * n);
  return {
    set(y0, y1, h, k1, k3, k4, k5, k6, k7) {
      for (let i = 0; i < n; i++) {
        const rise = y1[i]! - y0[i]!;
        const bulge = h * k1[i]! - rise;
        const j = 5 * i;
        c[j] = y0[i]!;
        c[j + 1] = rise;
        c[j + 2] = bulge;
        c[j + 3] = rise - h * k7[i]! - bulge;
        c[j + 4] = h * (D1 * k1[i]! + D3 * k3[i]! + D4 * k4[i]! + D5 * k5[i]! + D6 * k6[i]! + D7 * k7[i]!);
      }
    },
    at(theta, out) {
      evaluate(c, n, theta, out);
    },
    keep() {
      const copy = c.slice();
      return (theta, out) => evaluate(copy, n, theta, out);
    }
  };
}
