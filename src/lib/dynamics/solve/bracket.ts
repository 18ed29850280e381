/**
 * A zero of a continuous function between two points where its signs differ.
 * @param f any function of one number. @param a, b ends; @param fa, fb its values there, of opposite sign (or 0).
 * @param tolerance wanted half-width of the answer in the unit of a and b; never better than rounding allows.
 * @returns the point with the smaller |f| of the last bracket. Never throws; at most 120 evaluations.
 * @source brent1973 ch. 4: bisection, secant and inverse quadratic steps, the bracket always kept
 */
export function bracketedRoot(
  f: (x: number) => number,
  a: number,
  b: number,
  fa: number,
  fb: number,
  tolerance: number
): number {
  if (fa === 0) return a;
  if (fb === 0) return b;
  let best = b;
  let fBest = fb;
  let other = a;
  let fOther = fa;
  let previous = a;
  let fPrevious = fa;
  let step = b - a;
  let lastStep = step;
  for (let i = 0; i < 120 && fBest !== 0; i++) {
    if (fBest > 0 === fOther > 0) {
      other = previous;
      fOther = fPrevious;
      step = best - previous;
      lastStep = step;
    }
    if (Math.abs(fOther) < Math.abs(fBest)) {
      previous = best;
      fPrevious = fBest;
      best = other;
      fBest = fOther;
      other = previous;
      fOther = fPrevious;
    }
    const close = 2 * Number.EPSILON * Math.abs(best) + 0.5 * tolerance;
    const half = 0.5 * (other - best);
    if (Math.abs(half) <= close) break;
    let next = half;
    if (Math.abs(lastStep) >= close && Math.abs(fPrevious) > Math.abs(fBest)) {
      const s = fBest / fPrevious;
      let p: number;
      let q: number;
      if (previous === other) {
        p = 2 * half * s;
        q = 1 - s;
      } else {
        const r = fBest / fOther;
        const u = fPrevious / fOther;
        p = s * (2 * half * u * (u - r) - (best - previous) * (r - 1));
        q = (u - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      else p = -p;
      if (2 * p < Math.min(3 * half * q - Math.abs(close * q), Math.abs(lastStep * q))) next = p / q;
    }
    lastStep = next === half ? half : step;
    step = next;
    previous = best;
    fPrevious = fBest;
    best += Math.abs(step) > close ? step : Math.sign(half) * close;
    fBest = f(best);
  }
  return best;
}
