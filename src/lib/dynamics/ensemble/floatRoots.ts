/** Largest degree that `positiveRootsInto` takes. */
export const HIGHEST_DEGREE = 15;
const WIDTH = HIGHEST_DEGREE + 1;

/** Share of the sum of its terms below which a value at a turning point counts as a double root. */
const TOUCHING = 1e-14;

/** Row d holds the derivative of degree d; roots of two neighbouring degrees in turn. */
const derivatives = new Float64Array(WIDTH * WIDTH);
const workA = new Float64Array(WIDTH);
const workB = new Float64Array(WIDTH);

/** Ends of a bracket on the way in, the root on the way out: numbers that are arguments of a call go by the heap. */
const bracket = new Float64Array(3);

/**
 * Into bracket[2], a root of the polynomial in row `at` between bracket[0] and bracket[1], where its signs differ.
 * @param falls whether it is positive at the lower end.
 */
function rootInBracket(c: Float64Array, at: number, degree: number, falls: boolean): void {
  let low = bracket[0]!;
  let high = bracket[1]!;
  let x = 0.5 * (low + high);
  for (let i = 0; i < 200; i++) {
    let value = c[at + degree]!;
    let slope = 0;
    for (let j = degree - 1; j >= 0; j--) {
      slope = slope * x + value;
      value = value * x + c[at + j]!;
    }
    if (value === 0) break;
    if (value > 0 === falls) low = x;
    else high = x;
    let next = x - value / slope;
    // Newton unless it leaves the bracket; halving, by ratio where the bracket spans decades, brings it back.
    if (!(next > low && next < high)) {
      next = low > 0 && high > 4 * low ? Math.sqrt(low * high) : low === 0 ? high * 0.125 : 0.5 * (low + high);
    }
    const moved = next > x ? next - x : x - next;
    x = next;
    if (moved <= 2.3e-16 * x || high - low <= 2.3e-16 * high) break;
  }
  bracket[2] = x;
}

function valueAt(c: Float64Array, at: number, degree: number, x: number): number {
  let value = c[at + degree]!;
  for (let j = degree - 1; j >= 0; j--) value = value * x + c[at + j]!;
  return value;
}

function isTouching(c: Float64Array, at: number, degree: number, x: number, value: number): boolean {
  let sum = Math.abs(c[at + degree]!);
  for (let j = degree - 1; j >= 0; j--) sum = sum * x + Math.abs(c[at + j]!);
  return Math.abs(value) <= TOUCHING * degree * sum;
}

/** Roots in (0, bound) of the quadratic in row `at`, without cancellation. */
function quadraticRoots(c: Float64Array, at: number, roots: Float64Array): number {
  const a = c[at + 2]!;
  const half = 0.5 * c[at + 1]!;
  const b = c[at]!;
  const inside = half * half - a * b;
  if (!(inside > 0)) {
    if (inside < 0 || half === 0) return 0;
    const x = -half / a;
    if (!(x > 0)) return 0;
    roots[0] = x;
    return 1;
  }
  const far = -(half + (half < 0 ? -Math.sqrt(inside) : Math.sqrt(inside)));
  const x1 = far / a;
  const x2 = b / far;
  const low = x1 < x2 ? x1 : x2;
  const high = x1 < x2 ? x2 : x1;
  let n = 0;
  if (low > 0) roots[n++] = low;
  if (high > 0) roots[n++] = high;
  return n;
}

/**
 * Positive real roots in floating point: between the turning points, found in the same way from the derivative. Not proven:
 * roots nearer than about 1e-7 of themselves may come back as one, or not at all.
 * @param c coefficients, lowest first. @param degree 1 to HIGHEST_DEGREE; leading zeros are allowed.
 * @param roots overwritten, ascending, degree long at least. @returns how many. Allocates nothing, never throws.
 */
export function positiveRootsInto(c: Float64Array, degree: number, roots: Float64Array): number {
  let top = degree;
  while (top > 0 && c[top] === 0) top -= 1;
  let shift = 0;
  while (shift < top && c[shift] === 0) shift += 1;
  const n = top - shift;
  if (n === 0) return 0;
  let changes = 0;
  let last = 0;
  for (let j = shift; j <= top; j++) {
    const value = c[j]!;
    if (value === 0) continue;
    if (last !== 0 && value > 0 !== last > 0) changes += 1;
    last = value;
  }
  // The rule of signs: as many roots as changes, or fewer by an even number.
  if (changes === 0) return 0;
  if (n === 1) {
    roots[0] = -c[shift]! / c[top]!;
    return 1;
  }
  const d = derivatives;
  const own = n * WIDTH;
  for (let j = 0; j <= n; j++) d[own + j] = c[shift + j]!;
  if (n === 2) return quadraticRoots(d, own, roots);

  // Beyond one and the largest ratio to the leading coefficient, of those against its sign, there is no positive root.
  const lead = d[own + n]!;
  let largest = 0;
  for (let j = 0; j < n; j++) {
    const ratio = -d[own + j]! / lead;
    if (ratio > 0) {
      const size = j === n - 1 ? ratio : j === n - 2 ? Math.sqrt(ratio) : ratio ** (1 / (n - j));
      if (size > largest) largest = size;
    }
  }
  const bound = 2 * largest;
  if (changes === 1) {
    bracket[0] = 0;
    bracket[1] = bound;
    rootInBracket(d, own, n, d[own]! > 0);
    roots[0] = bracket[2]!;
    return 1;
  }

  for (let k = n - 1; k >= 2; k--) {
    for (let j = 0; j <= k; j++) d[k * WIDTH + j] = d[(k + 1) * WIDTH + j + 1]! * (j + 1);
  }
  let turning = workA;
  let found = workB;
  let nTurning = quadraticRoots(d, 2 * WIDTH, turning);
  for (let k = 3; k <= n; k++) {
    const at = k * WIDTH;
    const target = k === n ? roots : found;
    let nFound = 0;
    let lo = 0;
    let first = at;
    while (d[first] === 0) first += 1;
    let atLo = d[first]!;
    for (let i = 0; i <= nTurning && lo < bound; i++) {
      const isTurn = i < nTurning && turning[i]! < bound;
      const hi = isTurn ? turning[i]! : bound;
      const atHi = valueAt(d, at, k, hi);
      if (isTurn && isTouching(d, at, k, hi, atHi)) {
        if (nFound === 0 || target[nFound - 1]! < hi) target[nFound++] = hi;
        // Past a double root the sign is the one before it.
        continue;
      }
      if (atLo > 0 !== atHi > 0) {
        bracket[0] = lo;
        bracket[1] = hi;
        rootInBracket(d, at, k, atLo > 0);
        target[nFound++] = bracket[2]!;
      }
      lo = hi;
      atLo = atHi;
    }
    if (k < n) {
      const spare = turning;
      turning = found;
      found = spare;
    }
    nTurning = nFound;
  }
  return nTurning;
}
