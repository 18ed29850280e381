/** Dense linear systems of a few unknowns, row-major, in place and without allocation. */

/**
 * LU factors with partial pivoting. @param a n x n, overwritten by its factors. @param pivots length n, filled.
 * @returns false when the matrix is singular or not finite. @source golub2013 alg. 3.4.1
 */
export function factorise(a: Float64Array, n: number, pivots: Int32Array): boolean {
  for (let k = 0; k < n; k++) {
    let p = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i * n + k]!) > Math.abs(a[p * n + k]!)) p = i;
    pivots[k] = p;
    const pivot = a[p * n + k]!;
    if (!(Math.abs(pivot) > 0) || !Number.isFinite(pivot)) return false;
    if (p !== k) {
      for (let j = 0; j < n; j++) {
        const swap = a[k * n + j]!;
        a[k * n + j] = a[p * n + j]!;
        a[p * n + j] = swap;
      }
    }
    for (let i = k + 1; i < n; i++) {
      const factor = a[i * n + k]! / pivot;
      a[i * n + k] = factor;
      if (factor !== 0) for (let j = k + 1; j < n; j++) a[i * n + j]! -= factor * a[k * n + j]!;
    }
  }
  return true;
}

/** Solves with the factors of `factorise`; `b`, length n, becomes the solution. */
export function substitute(lu: Float64Array, n: number, pivots: Int32Array, b: Float64Array): void {
  for (let k = 0; k < n; k++) {
    const p = pivots[k]!;
    const swap = b[k]!;
    b[k] = b[p]!;
    b[p] = swap;
  }
  for (let i = 1; i < n; i++) {
    let sum = b[i]!;
    for (let j = 0; j < i; j++) sum -= lu[i * n + j]! * b[j]!;
    b[i] = sum;
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i]!;
    for (let j = i + 1; j < n; j++) sum -= lu[i * n + j]! * b[j]!;
    b[i] = sum / lu[i * n + i]!;
  }
}
